/** A vector as bars: signed for real components, a modulus with a phase mark for complex ones. */
import type { ValueRow, VectorComponent } from '../../shared/generated/eigenledger';
import { figuresKey } from '../../shared/proof';
import { useRemote } from '../parts/remote';

/** Longer vectors are drawn as one profile, with the figures to scroll. */
const MOST_BARS = 24;
const PROFILE_WIDTH = 1000;
const PROFILE_HEIGHT = 120;

function Bar({ component }: { component: VectorComponent }) {
  const complex = component.phase !== undefined;
  const length = Math.abs(component.bar) * (complex ? 100 : 50);
  const left = complex ? 0 : component.bar < 0 ? 50 - length : 50;
  return (
    <span class={`bar ${complex ? 'complex' : ''}`} aria-hidden="true">
      <span
        class={component.bar < 0 ? 'ink negative' : 'ink'}
        style={{ left: `${String(left)}%`, width: `${String(length)}%` }}
      />
    </span>
  );
}

/** The phase as the hand of a small dial; east is the positive real axis. */
function Phase({ angle }: { angle: number }) {
  return (
    <svg class="phase" viewBox="-10 -10 20 20" aria-hidden="true">
      <circle r="8.5" />
      <line x1="0" y1="0" x2="8.5" y2="0" transform={`rotate(${String((-angle * 180) / Math.PI)})`} />
    </svg>
  );
}

function Profile({ components }: { components: readonly VectorComponent[] }) {
  const width = PROFILE_WIDTH / components.length;
  const complex = components.some((component) => component.phase !== undefined);
  const base = complex ? PROFILE_HEIGHT : PROFILE_HEIGHT / 2;
  const span = complex ? PROFILE_HEIGHT : PROFILE_HEIGHT / 2;
  return (
    <svg
      class="profile"
      viewBox={`0 0 ${String(PROFILE_WIDTH)} ${String(PROFILE_HEIGHT)}`}
      preserveAspectRatio="none"
      aria-hidden="true"
    >
      {components.map((component, place) => (
        <rect
          key={component.label}
          class={component.bar < 0 ? 'negative' : ''}
          x={place * width}
          width={width * 0.9}
          y={component.bar < 0 ? base : base - component.bar * span}
          height={Math.abs(component.bar) * span}
        />
      ))}
      <line x1="0" x2={PROFILE_WIDTH} y1={base} y2={base} />
    </svg>
  );
}

function Table({ components }: { components: readonly VectorComponent[] }) {
  const withBars = components.length <= MOST_BARS;
  return (
    <div class={withBars ? 'vector-table' : 'vector-table long'} tabIndex={withBars ? -1 : 0}>
      <table>
        <tbody>
          {components.map((component, place) => (
            <tr key={place}>
              <th scope="row">{component.label}</th>
              {withBars && (
                <td class="bar-cell">
                  <Bar component={component} />
                </td>
              )}
              {component.phase !== undefined && (
                <td>
                  <Phase angle={component.phase} />
                </td>
              )}
              <td class="digits number">{component.figure}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

export function Vector({ row }: { row: ValueRow }) {
  const key = figuresKey.value;
  const vector = useRemote(key === null ? null : `${key} ${String(row.first)}`, (bench) =>
    bench.vector(row.first - 1),
  );
  if (vector === undefined) return null;
  return (
    <div class="vector">
      {vector.components.length > MOST_BARS && <Profile components={vector.components} />}
      {vector.components.length > 0 && <Table components={vector.components} />}
      <p class="soft">
        {vector.standing} {vector.convention}
      </p>
    </div>
  );
}
