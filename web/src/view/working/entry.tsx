/** One entry in full, and the state after it. */
import type { EntryView, Fact, StateView } from '../../shared/generated/eigenledger';
import { useRemote } from '../parts/remote';
import { MatrixMap } from '../parts/matrix-map';
import { entryShown } from './list';

function Facts({ facts }: { facts: readonly Fact[] }) {
  if (facts.length === 0) return null;
  return (
    <dl class="facts">
      {facts.map((fact) => (
        <div key={fact.name}>
          <dt>{fact.name}</dt>
          <dd class="digits">{fact.figure}</dd>
        </div>
      ))}
    </dl>
  );
}

function Reflector({ vector }: { vector: readonly Fact[] }) {
  if (vector.length === 0) return null;
  return (
    <details open={vector.length <= 8}>
      <summary>the reflector’s vector v</summary>
      <div class="scroll-figures" tabIndex={0}>
        <table>
          <tbody>
            {vector.map((component) => (
              <tr key={component.name}>
                <th scope="row">{component.name}</th>
                <td class="digits number">{component.figure}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}

function OffDiagonals({ entry }: { entry: EntryView }) {
  if (entry.offDiagonals.length === 0) return null;
  return (
    <details open={entry.offDiagonals.length <= 8}>
      <summary>off-diagonals of the block, before and after</summary>
      <div class="scroll-figures" tabIndex={0}>
        <table>
          <thead>
            <tr>
              <th scope="col">between rows</th>
              <th scope="col">before</th>
              <th scope="col">after</th>
            </tr>
          </thead>
          <tbody>
            {entry.offDiagonals.map((change) => (
              <tr key={change.place}>
                <th scope="row">
                  {change.place}, {change.place + 1}
                </th>
                <td class="digits number">{change.before}</td>
                <td class="digits number">{change.after}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}

function State({ state }: { state: StateView }) {
  return (
    <figure class="state">
      <figcaption>{state.caption}</figcaption>
      {state.picture !== undefined && <MatrixMap map={state.picture} title={state.caption} />}
      {state.cells.length > 0 && (
        <div class="scroll-figures" tabIndex={0}>
          <table class="matrix">
            <tbody>
              {state.cells.map((row, i) => (
                <tr key={i}>
                  {row.map((cell, j) => (
                    <td key={j} class={`digits ${cell.role}`}>
                      {cell.figure}
                    </td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {state.cells.length > 0 && (
        <p class="soft legend">
          <span class="zeroed">0</span> set to zero here, <span class="changed">1</span> changed here
        </p>
      )}
    </figure>
  );
}

export function EntryPanel({ revision, entries }: { revision: number; entries: number }) {
  const shown = entryShown(entries);
  const entry = useRemote(shown < 0 ? null : `${String(revision)} ${String(shown)}`, (bench) =>
    bench.ledger_entry(shown),
  );
  if (entry === undefined) return null;
  return (
    <div class="entry-panel" aria-live="polite">
      <h3>
        Entry {entry.row.number}: {entry.row.words}
      </h3>
      <Facts facts={entry.facts} />
      <Reflector vector={entry.vector} />
      <OffDiagonals entry={entry} />
      <State state={entry.state} />
    </div>
  );
}
