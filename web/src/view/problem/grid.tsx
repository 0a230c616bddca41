/**
 * The matrix cell by cell, for people who type cells. The text is the truth:
 * every edit is a change of the text, made by the editor, so that undo is one
 * and the same in both.
 */
import { useRef } from 'preact/hooks';

import type { Cell, TextReading } from '../../shared/generated/eigenledger';

interface GridProps {
  readonly reading: TextReading;
  readonly label: string;
  readonly onBlock: (row: number, col: number, cells: string[][]) => void;
  readonly onUndo: () => void;
  readonly onRedo: () => void;
}

/** A block as spreadsheets copy it: tabs between cells, line breaks between rows. */
function blockFrom(text: string): string[][] {
  return text
    .replace(/\r\n?/g, '\n')
    .replace(/\n$/, '')
    .split('\n')
    .map((line) => line.split('\t'));
}

export function Grid({ reading, label, onBlock, onUndo, onRedo }: GridProps) {
  const table = useRef<HTMLTableElement>(null);
  const cells = reading.cells;
  if (cells === undefined) {
    return <p class="soft">The grid opens for matrices of readable text and up to a few dozen rows.</p>;
  }

  const focus = (row: number, col: number): boolean => {
    const input = table.current?.querySelector<HTMLInputElement>(
      `input[data-row="${String(row)}"][data-col="${String(col)}"]`,
    );
    input?.focus();
    input?.select();
    return input !== null && input !== undefined;
  };

  const onKey = (event: KeyboardEvent, row: number, col: number) => {
    const input = event.currentTarget as HTMLInputElement;
    const whole = input.selectionStart === 0 && input.selectionEnd === input.value.length;
    const atStart = input.selectionEnd === 0 || whole;
    const atEnd = input.selectionStart === input.value.length || whole;
    const undo = (event.ctrlKey || event.metaKey) && event.key.toLowerCase() === 'z';
    const redo = (event.ctrlKey || event.metaKey) && event.key.toLowerCase() === 'y';
    let moved = false;
    if ((undo || redo) && input.value === (cells[row]?.[col]?.text ?? '')) {
      if (redo || event.shiftKey) onRedo();
      else onUndo();
      moved = true;
    } else if (event.key === 'ArrowUp') moved = focus(row - 1, col);
    else if (event.key === 'ArrowDown' || event.key === 'Enter') moved = focus(row + 1, col) || event.key === 'Enter';
    else if (event.key === 'ArrowLeft' && atStart) moved = focus(row, col - 1);
    else if (event.key === 'ArrowRight' && atEnd) moved = focus(row, col + 1);
    else if (event.key === 'Escape') {
      input.value = cells[row]?.[col]?.text ?? '';
      input.select();
      moved = true;
    }
    if (moved) {
      event.preventDefault();
      if (event.key === 'Enter') commit(input, row, col);
    }
  };

  const commit = (input: HTMLInputElement, row: number, col: number) => {
    const before = cells[row]?.[col]?.text ?? '';
    const after = input.value.trim();
    if (after !== before && after !== '') onBlock(row, col, [[after]]);
    else if (after === '') input.value = before;
  };

  const onPaste = (event: ClipboardEvent, row: number, col: number) => {
    const text = event.clipboardData?.getData('text/plain') ?? '';
    if (!/[\t\n]/.test(text)) return;
    event.preventDefault();
    onBlock(row, col, blockFrom(text));
  };

  return (
    <div class="grid-scroll" role="region" aria-label={label} tabIndex={0}>
      <table ref={table} class="grid" role="grid" aria-label={label}>
        <thead>
          <tr>
            <td />
            {(cells[0] ?? []).map((_, col) => (
              <th key={col} scope="col">
                {reading.colLabels[col] ?? col + 1}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {cells.map((line: Cell[], row) => (
            <tr key={row}>
              <th scope="row">{reading.rowLabels[row] ?? row + 1}</th>
              {line.map((cell, col) => (
                <td key={col} class={row === col ? 'diagonal' : ''}>
                  <input
                    data-row={row}
                    data-col={col}
                    value={cell.text}
                    aria-label={`row ${String(row + 1)}, column ${String(col + 1)}`}
                    size={Math.min(Math.max(cell.text.length, 5), 16)}
                    onFocus={(event) => { event.currentTarget.select(); }}
                    onKeyDown={(event) => { onKey(event, row, col); }}
                    onPaste={(event) => { onPaste(event, row, col); }}
                    onBlur={(event) => { commit(event.currentTarget, row, col); }}
                  />
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
