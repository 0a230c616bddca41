/** The checker's margin: a mark beside each figure, and the reason behind it. */
import type { ComponentChildren } from 'preact';

export type Mark = 'proven' | 'bounded' | 'confirmed' | 'refuted' | 'undecided' | 'plain';

const WORDS: Record<Mark, string> = {
  proven: 'proven',
  bounded: 'bounded only',
  confirmed: 'claimed, confirmed',
  refuted: 'claimed, refuted',
  undecided: 'undecided',
  plain: 'not proven',
};

/** Told apart by shape, so that print and colour-blind readers lose nothing. */
function Glyph({ mark }: { mark: Mark }) {
  const line = { fill: 'none', stroke: 'currentColor', 'stroke-width': 1.8 } as const;
  return (
    <svg viewBox="0 0 16 16" aria-hidden="true" style={{ color: 'var(--mark, currentColor)' }}>
      {mark === 'proven' && <rect x="2" y="2" width="12" height="12" fill="currentColor" />}
      {mark === 'bounded' && (
        <>
          <rect x="2.5" y="2.5" width="11" height="11" {...line} />
          <path d="M2.5 13.5h11v-11z" fill="currentColor" />
        </>
      )}
      {mark === 'confirmed' && <path d="M2 8.5l4 4.5 8-10" {...line} stroke-width="2.6" />}
      {mark === 'refuted' && <path d="M3 3l10 10M13 3L3 13" {...line} stroke-width="2.6" />}
      {mark === 'undecided' && <circle cx="8" cy="8" r="5.6" {...line} stroke-dasharray="3 2" />}
      {mark === 'plain' && <path d="M3 8h10" {...line} />}
    </svg>
  );
}

/** The mark alone; it opens its reason. */
export function MarginMark({ mark, reason }: { mark: Mark; reason: string }) {
  return (
    <div class={`margin-mark ${mark}`}>
      <details>
        <summary>
          <Glyph mark={mark} />
          {WORDS[mark]}
        </summary>
        <p>{reason}</p>
      </details>
    </div>
  );
}

/** Something a checker settles, with its mark beside it in the margin. */
export function Figure(props: {
  mark: Mark;
  reason: string;
  label?: string;
  children: ComponentChildren;
}) {
  return (
    <div class="figure" role="group" aria-label={props.label}>
      <div class="figure-body">{props.children}</div>
      <MarginMark mark={props.mark} reason={props.reason} />
    </div>
  );
}
