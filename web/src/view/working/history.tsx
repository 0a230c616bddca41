/** The off-diagonals falling sweep by sweep, with the deflations marked. */
import type { HistoryView } from '../../shared/generated/eigenledger';
import { chosenEntry } from '../../shared/store';
import { between, labelledEvery } from '../parts/geometry';
import { useRemote } from '../parts/remote';
import { useWidth } from '../parts/width';

const WIDTH_AT_FIRST = 1000;
const HEIGHT = 260;
const LEFT = 64;
const FOOT = 232;
const HEAD = 10;
/** Room for the number of a sweep on the axis. */
const SWEEP_LABEL_WIDTH = 60;

function Picture({ view, width }: { view: HistoryView; width: number }) {
  const span = Math.max(1, view.sweeps);
  const x = between(0, span, LEFT + 6, width - 10);
  const y = between(0, 1, FOOT, HEAD);
  const every = labelledEvery(view.sweeps, SWEEP_LABEL_WIDTH, width);
  const sweeps = Array.from({ length: Math.floor(view.sweeps / every) + 1 }, (_, k) => k * every);
  return (
    <svg viewBox={`0 0 ${String(width)} ${String(HEIGHT)}`} role="img" aria-label={view.words}>
      <g class="axis" aria-hidden="true">
        {view.ticks.map((tick) => (
          <g key={tick.label}>
            <line x1={LEFT} x2={width} y1={y(tick.at)} y2={y(tick.at)} />
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
  const [width, setFigure] = useWidth(WIDTH_AT_FIRST);
  if (view === undefined || view.sweeps === 0) return null;
  return (
    <figure class="history" ref={setFigure}>
      <figcaption>
        Size of the off-diagonals, sweep by sweep; <span class="deflation-key" aria-hidden="true">▾</span> a deflation
      </figcaption>
      <Picture view={view} width={width} />
      <p class="soft">{view.words}</p>
    </figure>
  );
}
