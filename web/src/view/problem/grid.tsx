/**
 * The matrix cell by cell, for people who type cells. The text is the truth:
 * every edit is a change of the text, made by the editor, so that undo is one
 * and the same in both.
 */
import { useSignal } from '@preact/signals';
import { useRef } from 'preact/hooks';

import type { Cell, GridEdit, TextReading } from '../../shared/generated/eigenledger';

interface GridProps {
  readonly reading: TextReading;
  readonly label: string;
  readonly onEdit: (edit: GridEdit) => void;
  readonly onUndo: () => void;
  readonly onRedo: () => void;
}

const LARGEST_NEW_ORDER = 40;

/** An empty text begins as a zero matrix of the order wanted. */
function Begin({ onEdit }: Pick<GridProps, 'onEdit'>) {
  const order = useSignal(3);
  return (
    <p class="row">
      <label>
        Order{' '}
        <input
          type="number"
          min={1}
          max={LARGEST_NEW_ORDER}
          value={order.value}
          onInput={(event) => { order.value = event.currentTarget.valueAsNumber; }}
        />
      </label>
      <button
        type="button"
        disabled={!(order.value >= 1 && order.value <= LARGEST_NEW_ORDER)}
        onClick={() => { onEdit({ act: 'zeros', order: Math.trunc(order.value) }); }}
      >
        begin with zeros
      </button>
    </p>
  );
}

interface CellProps extends Pick<GridProps, 'onEdit' | 'onUndo' | 'onRedo'> {
  readonly cell: Cell;
  readonly row: number;
  readonly col: number;
  readonly mirror: 'conjugate' | 'off';
  readonly onMove: (row: number, col: number) => boolean;
}

function CellField({ cell, row, col, mirror, onEdit, onUndo, onRedo, onMove }: CellProps) {
  const commit = (input: HTMLInputElement) => {
    const text = input.value.trim();
    if (text === '') input.value = cell.text;
    else if (text !== cell.text) onEdit({ act: 'set', row, col, text, mirror });
  };

  const onKey = (event: KeyboardEvent & { currentTarget: HTMLInputElement }) => {
    const input = event.currentTarget;
    const whole = input.selectionStart === 0 && input.selectionEnd === input.value.length;
    const atStart = input.selectionEnd === 0 || whole;
    const atEnd = input.selectionStart === input.value.length || whole;
    const command = event.ctrlKey || event.metaKey;
    const key = event.key.toLowerCase();
    let done = false;
    if (command && (key === 'z' || key === 'y') && input.value === cell.text) {
      if (key === 'y' || event.shiftKey) onRedo();
      else onUndo();
      done = true;
    } else if (key === 'arrowup') done = onMove(row - 1, col);
    else if (key === 'arrowdown') done = onMove(row + 1, col);
    else if (key === 'arrowleft' && atStart) done = onMove(row, col - 1);
    else if (key === 'arrowright' && atEnd) done = onMove(row, col + 1);
    else if (key === 'enter') {
      if (!onMove(row + 1, col)) commit(input);
      done = true;
    } else if (key === 'escape') {
      input.value = cell.text;
      input.select();
      done = true;
    }
    if (done) event.preventDefault();
  };

  return (
    <input
      data-row={row}
      data-col={col}
      value={cell.text}
      placeholder={cell.text === '' ? '0' : ''}
      aria-label={`row ${String(row + 1)}, column ${String(col + 1)}`}
      size={Math.min(Math.max(cell.text.length, 5), 16)}
      autocomplete="off"
      spellcheck={false}
      onFocus={(event) => { event.currentTarget.select(); }}
      onKeyDown={onKey}
      onPaste={(event) => {
        const block = event.clipboardData?.getData('text/plain') ?? '';
        if (!/[\t\n]/.test(block)) return;
        event.preventDefault();
        onEdit({ act: 'paste', row, col, block, mirror });
      }}
      onBlur={(event) => { commit(event.currentTarget); }}
    />
  );
}

export function Grid({ reading, label, onEdit, onUndo, onRedo }: GridProps) {
  const table = useRef<HTMLTableElement>(null);
  const mirrored = useSignal(true);
  const { cells, rows } = reading;
  if (rows === 0) return <Begin onEdit={onEdit} />;
  if (cells === undefined) {
    return <p class="soft">The grid opens for up to 40 rows; the text holds all of them.</p>;
  }

  const focus = (row: number, col: number): boolean => {
    const input = table.current?.querySelector<HTMLInputElement>(
      `input[data-row="${String(row)}"][data-col="${String(col)}"]`,
    );
    input?.focus();
    return input !== null && input !== undefined;
  };

  return (
    <div class="grid-part">
      <div class="grid-scroll" role="region" aria-label={label} tabIndex={0}>
        <table ref={table} class="grid" aria-label={label}>
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
            {cells.map((line, row) => (
              <tr key={row}>
                <th scope="row">{reading.rowLabels[row] ?? row + 1}</th>
                {line.map((cell, col) => (
                  <td key={col} class={row === col ? 'diagonal' : ''}>
                    <CellField
                      cell={cell}
                      row={row}
                      col={col}
                      mirror={mirrored.value ? 'conjugate' : 'off'}
                      onEdit={onEdit}
                      onUndo={onUndo}
                      onRedo={onRedo}
                      onMove={focus}
                    />
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <div class="row">
        <label>
          <input
            type="checkbox"
            checked={mirrored.value}
            onChange={(event) => { mirrored.value = event.currentTarget.checked; }}
          />{' '}
          the mirrored cell follows
        </label>
        <button type="button" class="quiet" onClick={() => { onEdit({ act: 'insert', at: rows }); }}>
          add a row and column
        </button>
        {rows > 1 && (
          <button type="button" class="quiet" onClick={() => { onEdit({ act: 'remove', at: rows - 1 }); }}>
            remove the last
          </button>
        )}
      </div>
    </div>
  );
}
