/** The values, a line each, and under the chosen one its vector. */
import { useState } from 'preact/hooks';

import type { ValueRow } from '../../shared/generated/eigenledger';
import { figuresKey } from '../../shared/proof';
import { chosenEigenvalue, digits } from '../../shared/store';
import { Figure } from '../parts/margin';
import { useRemote } from '../parts/remote';
import { Vector } from './vector';

/** Lines shown at once: more would push the proof out of reach. */
const PAGE = 40;

/** Digits before and after the decimal point, set so that the points align. */
function Aligned({ figure, whole }: { figure: string; whole: number }) {
  const point = figure.indexOf('.');
  const end = point < 0 ? figure.search(/[(e±]|$/) : point;
  return (
    <span class="digits aligned" style={{ '--whole': `${String(whole)}ch` }}>
      <span class="whole">{figure.slice(0, end)}</span>
      <span>{figure.slice(end)}</span>
    </span>
  );
}

function wholeLength(figure: string): number {
  const end = figure.search(/[.(e±]|$/);
  return end;
}

function numbers(row: ValueRow): string {
  return row.first === row.last ? String(row.first) : `${String(row.first)}–${String(row.last)}`;
}

function Value({ row, whole, open }: { row: ValueRow; whole: number; open: boolean }) {
  const label = `eigenvalue ${numbers(row)}`;
  return (
    <Figure mark={row.standing} reason={row.reason} label={label}>
      <div class={`value ${open ? 'open' : ''}`}>
        <button
          type="button"
          class="quiet index"
          aria-expanded={open}
          aria-label={`${label}: ${open ? 'hide' : 'show'} its vector`}
          onClick={() => { chosenEigenvalue.value = open ? -1 : row.first - 1; }}
        >
          λ<sub>{numbers(row)}</sub>
        </button>
        <span class={row.standing === 'plain' ? 'soft' : ''}>
          <Aligned figure={row.figure} whole={whole} />
        </span>
        {row.last > row.first && <span class="times">cluster of {row.last - row.first + 1}</span>}
        {row.residual !== undefined && (
          <span class="soft residual">
            residual ≤ <span class="digits">{row.residual}</span>
          </span>
        )}
      </div>
      {open && <Vector row={row} />}
    </Figure>
  );
}

export function Values({ order }: { order: number }) {
  const [page, setPage] = useState(0);
  const limit = digits.value === 'proven' ? 0 : digits.value;
  const key = figuresKey.value;
  const table = useRemote(key === null ? null : `${key} ${String(limit)}`, (bench) => bench.values(limit));
  if (table === undefined) return null;
  const chosen = chosenEigenvalue.value ?? 0;
  const pages = Math.ceil(table.rows.length / PAGE);
  const first = Math.min(page, pages - 1) * PAGE;
  const shown = table.rows.slice(first, first + PAGE);
  const whole = Math.max(...table.rows.map((row) => wholeLength(row.figure)));
  return (
    <>
      {pages > 1 && (
        <div class="row screen-only" role="group" aria-label="Which eigenvalues are shown">
          <button type="button" disabled={first === 0} onClick={() => { setPage(Math.max(0, page - 1)); }}>
            Lower
          </button>
          <span>
            lines {first + 1} to {first + shown.length} of {table.rows.length}, for {order} eigenvalues
          </span>
          <button
            type="button"
            disabled={first + PAGE >= table.rows.length}
            onClick={() => { setPage(Math.min(pages - 1, page + 1)); }}
          >
            Higher
          </button>
        </div>
      )}
      <p class="soft">{table.words}</p>
      {shown.map((row) => (
        <Value
          key={row.first}
          row={row}
          whole={whole}
          open={chosen + 1 >= row.first && chosen + 1 <= row.last}
        />
      ))}
    </>
  );
}
