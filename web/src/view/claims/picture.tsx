/** Stated intervals against proven ones, on one line. */
import type { Drawn, Item } from '../../shared/generated/eigenledger';
import { between } from '../parts/geometry';
import { useWidth } from '../parts/width';

const WIDTH_AT_FIRST = 800;
const ROW = 26;
const EDGE = 12;
/** Intervals narrower than this are drawn this wide, in view units. */
const NARROWEST = 3;

interface Shown {
  readonly item: Item;
  readonly drawn: Drawn;
}

function reach(shown: readonly Shown[]): readonly [number, number] {
  let low = Infinity;
  let high = -Infinity;
  for (const { drawn } of shown) {
    low = Math.min(low, drawn.provenLow, drawn.claimedLow ?? Infinity);
    high = Math.max(high, drawn.provenHigh, drawn.claimedHigh ?? -Infinity);
  }
  return [low, high];
}

export function ClaimPicture({ items }: { items: readonly Item[] }) {
  const [width, setFigure] = useWidth(WIDTH_AT_FIRST);
  const shown = items.flatMap((item) => (item.drawn === undefined ? [] : [{ item, drawn: item.drawn }]));
  const [low, high] = reach(shown);
  if (shown.length === 0 || shown.length > 40 || !(high > low)) return null;
  const x = between(low, high, EDGE, width - EDGE);
  const height = shown.length * ROW + 8;
  return (
    <figure class="claim-picture" ref={setFigure}>
      <svg viewBox={`0 0 ${String(width)} ${String(height)}`} role="img" aria-label="stated intervals above proven ones, a line each; the table has the figures">
        {shown.map(({ item, drawn }, place) => {
          const y = place * ROW + 4;
          const proven = Math.max(NARROWEST, x(drawn.provenHigh) - x(drawn.provenLow));
          const { claimedLow, claimedHigh } = drawn;
          return (
            <g key={place} class={item.word}>
              <line class="base" x1={EDGE} x2={width - EDGE} y1={y + ROW - 6} y2={y + ROW - 6} />
              <rect class="proven" x={x(drawn.provenLow)} y={y + 11} width={proven} height={9} />
              {claimedLow !== undefined && claimedHigh !== undefined && (
                <rect
                  class="stated"
                  x={x(claimedLow)}
                  y={y}
                  width={Math.max(NARROWEST, x(claimedHigh) - x(claimedLow))}
                  height={9}
                />
              )}
            </g>
          );
        })}
      </svg>
    </figure>
  );
}
