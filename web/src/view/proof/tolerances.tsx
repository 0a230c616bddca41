/** What the tolerances of the entries do: proven ranges, and which entry matters most. */
import type { RangeRow, TolerancesView } from '../../shared/generated/eigenledger';
import { figuresKey } from '../../shared/proof';
import { chosenEigenvalue } from '../../shared/store';
import { Figure } from '../parts/margin';
import { useRemote } from '../parts/remote';
import { SpectrumLine } from '../spectrum/line';

const RANGES = { move: 'ranges' } as const;

function Range({ range, chosen }: { range: RangeRow; chosen: boolean }) {
  return (
    <tr class={chosen ? 'chosen' : ''}>
      <th scope="row">
        <button
          type="button"
          class="quiet index"
          aria-pressed={chosen}
          aria-label={`rank the entries for eigenvalue ${String(range.index)}`}
          onClick={() => { chosenEigenvalue.value = range.index - 1; }}
        >
          λ<sub>{range.index}</sub>
        </button>
      </th>
      <td class="digits">{range.lower}</td>
      <td class="digits">{range.upper}</td>
      <td class="words">{range.most}</td>
    </tr>
  );
}

function Ranges({ view }: { view: TolerancesView }) {
  return (
    <div class="scroll-figures" tabIndex={0}>
      <table class="ranges">
        <thead>
          <tr>
            <th scope="col">λ</th>
            <th scope="col">not below</th>
            <th scope="col">not above</th>
            <th scope="col">moved most by entry (to first order)</th>
          </tr>
        </thead>
        <tbody>
          {view.ranges.map((range) => (
            <Range key={range.index} range={range} chosen={range.index === view.index} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Ranking({ view }: { view: TolerancesView }) {
  return (
    <div class="ranking">
      <h4>
        Which entry matters most for λ<sub>{view.index}</sub>
      </h4>
      {view.influences.length > 0 && (
        <table class="influences">
          <thead>
            <tr>
              <th scope="col">entry</th>
              <th scope="col">tolerance</th>
              <th scope="col">slope</th>
              <th scope="col">moves λ by about</th>
              <td aria-hidden="true" />
            </tr>
          </thead>
          <tbody>
            {view.influences.map((influence) => (
              <tr key={influence.entry}>
                <th scope="row">{influence.entry}</th>
                <td class="digits number">{influence.tolerance}</td>
                <td class="digits number">{influence.derivative}</td>
                <td class="digits number">{influence.effect}</td>
                <td class="share" aria-hidden="true">
                  <span style={{ width: `${String(100 * influence.share)}%` }} />
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
      <p class="soft">{view.words}</p>
    </div>
  );
}

export function Tolerances() {
  const key = figuresKey.value;
  const chosen = Math.max(0, chosenEigenvalue.value ?? 0);
  const view = useRemote(key === null ? null : `${key} ${String(chosen)}`, async (bench) => (await bench.tolerances(chosen)) ?? null);
  if (view === undefined || view === null) return null;
  return (
    <>
      <h3>Within the tolerances</h3>
      {view.ranges.length > 0 && <SpectrumLine label="The range of each eigenvalue over the tolerances" start={RANGES} ranges />}
      <Figure mark={view.standing} reason={view.reason} label="ranges over the tolerances">
        {view.ranges.length > 0 ? <Ranges view={view} /> : <p>{view.reason}</p>}
      </Figure>
      <Ranking view={view} />
    </>
  );
}
