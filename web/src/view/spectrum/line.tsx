/**
 * The spectrum on a line that can be panned and zoomed down to the width of an
 * enclosure of hundreds of digits. Rust owns the window and the axis; here is
 * only where the ink goes.
 */
import { useEffect, useRef, useState } from 'preact/hooks';

import type { SpectrumMark, SpectrumView, WindowMove } from '../../shared/generated/eigenledger';
import { figuresKey } from '../../shared/proof';
import { chosenEigenvalue, digits, latestSolution } from '../../shared/store';
import { between, sideways } from '../parts/geometry';
import { useRemote } from '../parts/remote';
import { useWidth } from '../parts/width';
import { Axis, AXIS_Y, MARK_HEIGHT, MarkShape, MOST_STACKED, STACK_STEP } from './marks';

const WIDTH_AT_FIRST = 1000;
const HEIGHT = 128;
/** Room above the highest mark, for counts and for what lies beyond. */
const HEADROOM = 24;
const ZOOM_STEP = 0.5;

function alternative(view: SpectrumView, label: string): string {
  const seen = view.marks.length === 1 ? '1 mark' : `${String(view.marks.length)} marks`;
  return `${label}: ${seen} in a window ${view.width} wide; ${String(view.leftOf)} eigenvalues to the left of it, ${String(view.rightOf)} to the right.`;
}

interface Asked {
  readonly turn: number;
  readonly move: WindowMove;
}

interface SpectrumLineProps {
  readonly label: string;
  /** What it opens on. */
  readonly start: WindowMove;
  /** A new text here makes it open afresh, as a new solution does. */
  readonly afresh?: string | undefined;
  /** Whether the ranges over the tolerances are drawn. */
  readonly ranges?: boolean;
}

export function SpectrumLine({ label, start, afresh = '', ranges = false }: SpectrumLineProps) {
  const [asked, setAsked] = useState<Asked>({ turn: 0, move: start });
  const shown = useRef<string | undefined>(undefined);
  const answered = useRef(-1);
  const opened = useRef<string | undefined>(undefined);
  const [width, setFigure] = useWidth(WIDTH_AT_FIRST);
  const drag = useRef<{ at: number; moved: boolean } | null>(null);
  const picture = useRef<SVGSVGElement>(null);
  const key = figuresKey.value;
  const view = useRemote(
    key === null ? null : `${key} ${String(digits.value)} ${String(asked.turn)} ${afresh}`,
    async (bench) => {
      const limit = digits.value === 'proven' ? 0 : digits.value;
      // A move is made once; asked again after a proof, the window stays, and a
      // new solution begins afresh.
      const occasion = `${String(latestSolution.value?.revision)} ${afresh}`;
      const fresh = opened.current !== occasion;
      const move: WindowMove = fresh ? start : answered.current === asked.turn ? { move: 'stay' } : asked.move;
      if (fresh) shown.current = undefined;
      const seen = await bench.spectrum(shown.current, move, limit);
      if (seen !== undefined) {
        shown.current = seen.window;
        answered.current = asked.turn;
        opened.current = occasion;
      }
      return seen;
    },
  );
  const ask = (move: WindowMove) => { setAsked(({ turn }) => ({ turn: turn + 1, move })); };
  const askLatest = useRef(ask);
  askLatest.current = ask;

  // A wheel listener of our own, since only one that is not passive may keep
  // the page from scrolling; it does so only while the line has the focus.
  const present = view !== undefined;
  useEffect(() => {
    const svg = picture.current;
    if (svg === null) return undefined;
    const turnWheel = (event: WheelEvent) => {
      if (document.activeElement !== svg && !event.ctrlKey) return;
      event.preventDefault();
      askLatest.current({ move: 'zoom', factor: event.deltaY > 0 ? 1 / 0.8 : 0.8, about: sideways(event, svg) });
    };
    svg.addEventListener('wheel', turnWheel, { passive: false });
    return () => { svg.removeEventListener('wheel', turnWheel); };
  }, [present]);

  if (view === undefined) return null;
  const x = between(-1, 1, 0, width);
  const highest = Math.min(MOST_STACKED, Math.max(0, ...view.marks.map((mark) => mark.stacked)));
  const top = AXIS_Y - MARK_HEIGHT - highest * STACK_STEP - HEADROOM;
  const chosen = chosenEigenvalue.value ?? 0;
  const isChosen = (mark: SpectrumMark) => chosen + 1 >= mark.first && chosen + 1 <= mark.last;
  const chosenLine = view.lines.findIndex((line) => chosen + 1 >= line.first && chosen + 1 <= line.last);
  const choose = (line: number) => {
    const next = view.lines[line];
    if (next !== undefined) chosenEigenvalue.value = next.first - 1;
  };
  const lens = () => { ask({ move: 'lens', line: Math.max(0, chosenLine) }); };

  const pressed = (event: KeyboardEvent) => {
    const act: Record<string, () => void> = {
      ArrowLeft: () => { ask({ move: 'pan', by: -0.25 }); },
      ArrowRight: () => { ask({ move: 'pan', by: 0.25 }); },
      '+': () => { ask({ move: 'zoom', factor: ZOOM_STEP, about: 0 }); },
      '=': () => { ask({ move: 'zoom', factor: ZOOM_STEP, about: 0 }); },
      '-': () => { ask({ move: 'zoom', factor: 1 / ZOOM_STEP, about: 0 }); },
      '0': () => { ask({ move: 'all' }); },
      Enter: lens,
      '[': () => { choose(chosenLine - 1); },
      ']': () => { choose(chosenLine + 1); },
    };
    const found = act[event.key];
    if (found === undefined || event.ctrlKey || event.metaKey || event.altKey) return;
    event.preventDefault();
    found();
  };
  const pointed = (event: PointerEvent) => {
    const svg = picture.current;
    if (svg === null) return;
    svg.focus();
    svg.setPointerCapture(event.pointerId);
    drag.current = { at: event.clientX, moved: false };
  };
  const dragged = (event: PointerEvent) => {
    const svg = picture.current;
    if (svg === null || drag.current === null) return;
    const by = ((drag.current.at - event.clientX) / svg.getBoundingClientRect().width) * 2;
    if (Math.abs(by) < 0.01) return;
    drag.current = { at: event.clientX, moved: true };
    ask({ move: 'pan', by });
  };
  const released = (event: PointerEvent) => {
    const svg = picture.current;
    const began = drag.current;
    drag.current = null;
    if (svg === null || began === null || began.moved) return;
    const at = sideways(event, svg);
    let nearest: SpectrumMark | undefined;
    for (const mark of view.marks) {
      if (nearest === undefined || Math.abs(mark.at - at) < Math.abs(nearest.at - at)) nearest = mark;
    }
    if (nearest !== undefined) chosenEigenvalue.value = nearest.first - 1;
  };
  return (
    <figure class="spectrum" ref={setFigure}>
      <svg
        ref={picture}
        viewBox={`0 ${String(top)} ${String(width)} ${String(HEIGHT - top)}`}
        role="img"
        tabIndex={0}
        aria-label={alternative(view, label)}
        onKeyDown={pressed}
        onPointerDown={pointed}
        onPointerMove={dragged}
        onPointerUp={released}
      >
        <Axis view={view} top={top} width={width} x={x} />
        {view.marks.map((mark) => (
          <MarkShape key={mark.line} mark={mark} chosen={isChosen(mark)} ranges={ranges} x={x} />
        ))}
      </svg>
      <figcaption>
        <span class="soft">
          {view.prefix === '' ? '' : <>… stands for <span class="digits">{view.prefix}</span>; </>}
          {view.origin === '' ? '' : <>distances from <span class="digits">{view.origin}</span>; </>}
          one division is <span class="digits">{view.step}</span>
        </span>
        <span class="row screen-only">
          <button type="button" class="quiet" onClick={() => { ask({ move: 'all' }); }}>whole</button>
          <button type="button" class="quiet" aria-label="zoom in" onClick={() => { ask({ move: 'zoom', factor: ZOOM_STEP, about: 0 }); }}>closer</button>
          <button type="button" class="quiet" aria-label="zoom out" onClick={() => { ask({ move: 'zoom', factor: 1 / ZOOM_STEP, about: 0 }); }}>wider</button>
          <button type="button" class="quiet" onClick={lens}>to the width of the chosen one</button>
        </span>
        <span class="soft keys screen-only">
          <kbd>←</kbd> <kbd>→</kbd> move, <kbd>+</kbd> <kbd>−</kbd> zoom, <kbd>0</kbd> whole, <kbd>[</kbd> <kbd>]</kbd> neighbour, <kbd>Enter</kbd> to its width
        </span>
      </figcaption>
    </figure>
  );
}
