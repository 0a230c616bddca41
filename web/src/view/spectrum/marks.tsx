/** The ink of the spectrum line: its marks and its axis. */
import type { SpectrumMark, SpectrumView } from '../../shared/generated/eigenledger';
import { labelledEvery, type Place } from '../parts/geometry';

export const AXIS_Y = 92;
export const MARK_HEIGHT = 34;
export const STACK_STEP = 9;
export const MOST_STACKED = 6;
/** Narrower enclosures are drawn as a single stroke, in view units. */
const NARROWEST_BAR = 3;
const RANGE_HEIGHT = 18;
/** About the width of a digit of a label, in pixels. */
const LABEL_DIGIT_WIDTH = 9;

/** The range over the tolerances, a bar on the axis; neighbours that overlap are told apart by their height. */
function Range({ mark, x }: { mark: SpectrumMark; x: Place }) {
  if (mark.rangeLower === undefined || mark.rangeUpper === undefined) return null;
  const left = x(mark.rangeLower);
  const width = Math.max(x(mark.rangeUpper) - left, NARROWEST_BAR);
  const height = RANGE_HEIGHT - (mark.line % 2) * 6;
  return (
    <>
      <rect class="range" x={left} y={AXIS_Y - height} width={width} height={height} />
      <path class="ends" d={`M${String(left)} ${String(AXIS_Y - height)}V${String(AXIS_Y)}M${String(left + width)} ${String(AXIS_Y - height)}V${String(AXIS_Y)}`} />
    </>
  );
}

export function MarkShape({ mark, chosen, ranges, x }: { mark: SpectrumMark; chosen: boolean; ranges: boolean; x: Place }) {
  const count = mark.last - mark.first + 1;
  const lift = Math.min(mark.stacked, MOST_STACKED) * STACK_STEP;
  const top = AXIS_Y - MARK_HEIGHT - lift;
  const proven = mark.lower !== undefined && mark.upper !== undefined;
  const left = x(mark.lower ?? mark.at);
  const right = x(mark.upper ?? mark.at);
  const wide = right - left > NARROWEST_BAR;
  return (
    <g class={`spectrum-mark ${proven ? 'enclosed' : ''} ${chosen ? 'chosen' : ''}`}>
      <rect class="reach" x={Math.min(left, x(mark.at) - 5)} y={top - 4} width={Math.max(right - left, 10)} height={MARK_HEIGHT + lift + 8} />
      {ranges && <Range mark={mark} x={x} />}
      {proven && wide && (
        <>
          <rect class="enclosure" x={left} y={top + 6} width={right - left} height={AXIS_Y - top - 6} />
          <path class="ends" d={`M${String(left + 5)} ${String(top + 6)}H${String(left)}V${String(AXIS_Y)}M${String(right - 5)} ${String(top + 6)}H${String(right)}V${String(AXIS_Y)}`} />
        </>
      )}
      {mark.stacked === 0 ? (
        <line class="stem" x1={x(mark.at)} x2={x(mark.at)} y1={top + 6} y2={AXIS_Y} />
      ) : null}
      {mark.stacked <= MOST_STACKED && <circle cx={x(mark.at)} cy={top + 6} r={count > 1 ? 5 : 3.6} />}
      {count > 1 && (
        <text class="count" x={x(mark.at)} y={top - 6} text-anchor="middle">
          ×{count}
        </text>
      )}
    </g>
  );
}

export function Axis({ view, top, width, x }: { view: SpectrumView; top: number; width: number; x: Place }) {
  const longest = Math.max(1, ...view.ticks.map((tick) => tick.label.length + 2));
  const every = labelledEvery(view.ticks.length, longest * LABEL_DIGIT_WIDTH, width);
  return (
    <g class="axis" aria-hidden="true">
      <line x1={0} x2={width} y1={AXIS_Y} y2={AXIS_Y} />
      {view.ticks.map((tick, place) => (
        <g key={tick.label}>
          <line x1={x(tick.at)} x2={x(tick.at)} y1={AXIS_Y} y2={AXIS_Y + 6} />
          {place % every === 0 && (
            <text x={x(tick.at)} y={AXIS_Y + 22} text-anchor="middle">
              {view.prefix === '' ? tick.label : `…${tick.label}`}
            </text>
          )}
        </g>
      ))}
      {view.leftOf > 0 && (
        <text class="beyond" x={4} y={top + 16}>
          ◂ {view.leftOf}
        </text>
      )}
      {view.rightOf > 0 && (
        <text class="beyond" x={width - 4} y={top + 16} text-anchor="end">
          {view.rightOf} ▸
        </text>
      )}
    </g>
  );
}
