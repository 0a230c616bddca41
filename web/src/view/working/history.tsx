/** The off-diagonals falling sweep by sweep, with the deflations marked. */
import type { HistoryView } from '../../shared/generated/eigenledger';
import { chosenEntry } from '../../shared/store';
import { useRemote } from '../parts/remote';

const WIDTH = 1000;
const HEIGHT = 260;
const LEFT = 64;
const FOOT = 232;
const HEAD = 10;

function Picture({ view }: { view: HistoryView }) {
  const span = Math.max(1, view.sweeps);
  const x = (sweep: number) => LEFT + 6 + (sweep / span) * (WIDTH - LEFT - 16);
  const y = (height: number) => FOOT - height * (FOOT - HEAD);
  const every = Math.max(1, Math.ceil(view.sweeps / 10));
  const sweeps = Array.from({ length: Math.floor(view.sweeps / every) + 1 }, (_, k) => k * every);
  return (
    <svg viewBox={`0 0 ${String(WIDTH)} ${String(HEIGHT)}`} role="img" aria-label={view.words}>
      <g class="axis" aria-hidden="true">
        {view.ticks.map((tick) => (
          <g key={tick.label}>
            <line x1={LEFT} x2={WIDTH} y1={y(tick.at)} y2={y(tick.at)} />
            <text x={LEFT - 8} y={y(tick.at) + 4} text-anchor="end">
              {tick.label}
            </text>
          </g>
        ))}
        {sweeps.map((sweep) => (
          <text key={sweep} x={x(sweep)} y={HEIGHT - 8} text-anchor="middle">
            {sweep}
          </text>
        ))}
      </g>
      {view.lines.map((line, place) => (
        <polyline
          key={line.place}
          class={`fall dash-${String(place % 4)}`}
          points={line.points.map(([sweep, height]) => `${x(sweep).toFixed(1)},${y(height).toFixed(1)}`).join(' ')}
        />
      ))}
      {view.deflations.map((deflation) => (
        <g
          key={deflation.entry}
          class={`deflation ${deflation.entry === chosenEntry.value ? 'chosen' : ''}`}
          onClick={() => { chosenEntry.value = deflation.entry; }}
        >
          <title>{deflation.words}</title>
          <rect x={x(deflation.sweep) - 7} y={y(deflation.at) - 7} width="14" height="14" class="reach" />
          <path
            d={`M${String(x(deflation.sweep) - 4.5)} ${String(y(deflation.at) - 3.5)}h9l-4.5 8z`}
          />
        </g>
      ))}
    </svg>
  );
}

export function History({ revision }: { revision: number }) {
  const view = useRemote(String(revision), (bench) => bench.history());
  if (view === undefined || view.sweeps === 0) return null;
  return (
    <figure class="history">
      <figcaption>
        Size of the off-diagonals, sweep by sweep; <span class="deflation-key" aria-hidden="true">▾</span> a deflation
      </figcaption>
      <Picture view={view} />
      <p class="soft">{view.words}</p>
    </figure>
  );
}
