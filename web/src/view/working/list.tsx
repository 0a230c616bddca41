/** The ledger as a list; only the rows in sight are fetched and drawn. */
import { useEffect, useRef, useState } from 'preact/hooks';

import type { LedgerRow, LedgerSummary } from '../../shared/generated/eigenledger';
import { chosenEntry } from '../../shared/store';
import { useRemote } from '../parts/remote';

const ROW_HEIGHT = 30;
const ROWS_IN_SIGHT = 14;
const ROWS_AROUND = 20;

/** The entry on show, from 0: the last one until another is chosen. */
export function entryShown(entries: number): number {
  return Math.min(chosenEntry.value ?? entries - 1, entries - 1);
}

/** The deflation after `entry`, or before it. */
function deflation(summary: LedgerSummary, entry: number, way: 'next' | 'previous'): number | undefined {
  return way === 'next'
    ? summary.deflations.find((place) => place > entry)
    : summary.deflations.findLast((place) => place < entry);
}

function Row({ row, place, chosen, entries }: { row: LedgerRow; place: number; chosen: boolean; entries: number }) {
  return (
    <li
      id={`entry-${String(place)}`}
      role="option"
      aria-selected={chosen}
      aria-setsize={entries}
      aria-posinset={place + 1}
      class={`entry-row ${row.kind}`}
      style={{ top: `${String(place * ROW_HEIGHT)}px`, height: `${String(ROW_HEIGHT)}px` }}
      onClick={() => { chosenEntry.value = place; }}
    >
      <span class="number">{row.number}</span>
      <span class="words" title={row.words}>{row.words}</span>
      <span class="digits balance">
        <span class="unseen">balance </span>
        {row.balance}
      </span>
      <span class="digits drift" aria-hidden="true" title="drift of trace and Frobenius norm, in units in the last place">
        {row.traceDrift} {row.normDrift}
      </span>
    </li>
  );
}

export function LedgerList({ summary, revision }: { summary: LedgerSummary; revision: number }) {
  const list = useRef<HTMLUListElement>(null);
  const [top, setTop] = useState(0);
  const { entries } = summary;
  const chosen = entryShown(entries);
  const first = Math.max(0, Math.floor(top / ROW_HEIGHT) - ROWS_AROUND);
  // Asked for in steps, so that scrolling does not ask at every row.
  const from = first - (first % ROWS_AROUND);
  const count = ROWS_IN_SIGHT + 3 * ROWS_AROUND;
  const page = useRemote(`${String(revision)} ${String(from)}`, (bench) => bench.ledger_page(from, count));

  const [follow, setFollow] = useState(true);
  useEffect(() => {
    const box = list.current;
    if (box === null || !follow) return;
    const at = chosen * ROW_HEIGHT;
    if (at < box.scrollTop) box.scrollTop = at;
    else if (at + ROW_HEIGHT > box.scrollTop + box.clientHeight) box.scrollTop = at + ROW_HEIGHT - box.clientHeight;
  }, [chosen, follow, revision]);

  const go = (place: number | undefined) => {
    if (place === undefined) return;
    setFollow(true);
    chosenEntry.value = Math.min(Math.max(place, 0), entries - 1);
  };
  const pressed = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const act: Record<string, () => void> = {
      ArrowUp: () => { go(chosen - 1); },
      ArrowLeft: () => { go(chosen - 1); },
      ArrowDown: () => { go(chosen + 1); },
      ArrowRight: () => { go(chosen + 1); },
      PageUp: () => { go(chosen - ROWS_IN_SIGHT); },
      PageDown: () => { go(chosen + ROWS_IN_SIGHT); },
      Home: () => { go(0); },
      End: () => { go(entries - 1); },
      d: () => { go(deflation(summary, chosen, 'next')); },
      D: () => { go(deflation(summary, chosen, 'previous')); },
    };
    const found = act[event.key];
    if (found === undefined) return;
    event.preventDefault();
    found();
  };
  return (
    <div class="ledger-list">
      <div class="row screen-only" role="toolbar" aria-label="Steps through the ledger">
        <button type="button" disabled={chosen <= 0} onClick={() => { go(chosen - 1); }}>
          Back
        </button>
        <button type="button" disabled={chosen >= entries - 1} onClick={() => { go(chosen + 1); }}>
          Forward
        </button>
        <button
          type="button"
          disabled={deflation(summary, chosen, 'next') === undefined}
          onClick={() => { go(deflation(summary, chosen, 'next')); }}
        >
          Next deflation
        </button>
        <label>
          entry{' '}
          <input
            type="number"
            min={1}
            max={entries}
            value={chosen + 1}
            onChange={(event) => {
              const asked = event.currentTarget.valueAsNumber;
              if (Number.isInteger(asked)) go(asked - 1);
            }}
          />{' '}
          of {entries}
        </label>
      </div>
      <div class="entry-head" aria-hidden="true">
        <span class="number">no.</span>
        <span class="words">entry</span>
        <span class="balance">balance</span>
        <span class="drift">drift, ulp</span>
      </div>
      <ul
        ref={list}
        role="listbox"
        aria-label="Entries of the ledger"
        aria-activedescendant={`entry-${String(chosen)}`}
        tabIndex={0}
        style={{ height: `${String(Math.min(entries, ROWS_IN_SIGHT) * ROW_HEIGHT)}px` }}
        onKeyDown={pressed}
        onScroll={(event) => { setTop(event.currentTarget.scrollTop); }}
        onWheel={() => { setFollow(false); }}
      >
        <li role="presentation" style={{ height: `${String(entries * ROW_HEIGHT)}px` }} />
        {page?.rows.map((row, offset) => (
          <Row
            key={row.number}
            row={row}
            place={page.first + offset}
            chosen={page.first + offset === chosen}
            entries={entries}
          />
        ))}
      </ul>
      <p class="soft keys screen-only">
        <kbd>↑</kbd> <kbd>↓</kbd> step, <kbd>Home</kbd> <kbd>End</kbd> first and last, <kbd>d</kbd> next deflation,{' '}
        <kbd>Shift</kbd>+<kbd>d</kbd> the one before
      </p>
    </div>
  );
}
