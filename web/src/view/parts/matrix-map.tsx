/**
 * The matrix as a map of magnitudes: one square a cell, darker for larger by
 * decades. Positive and negative differ in hue and, where the squares are large
 * enough to show it, by a stroke, so that the map reads in print and without
 * colour.
 */
import { useEffect, useRef } from 'preact/hooks';

import type { MagnitudePicture } from '../../shared/generated/eigenledger';

const SIDE_PX = 320;
/** Squares smaller than this show hue only. */
const SMALLEST_STROKED_PX = 7;
/** Steps of the scale; finer ones cannot be told apart. */
const STEPS = 40;
/** The faintest entry still differs from the paper. */
const FAINTEST = 0.12;

interface Scale {
  readonly low: number;
  readonly high: number;
}

/** The scale never spans less than a decade, so that equal entries do not look graded. */
function scaleOf(map: MagnitudePicture): Scale {
  const decades = map.decades.filter((decade) => Number.isFinite(decade));
  const high = decades.reduce((most, decade) => Math.max(most, decade), -Infinity);
  const low = decades.reduce((least, decade) => Math.min(least, decade), Infinity);
  return { low: Math.min(low, high - 1), high };
}

/** Where on the scale the smallest entry stands, as a share of it. */
function startOf(map: MagnitudePicture): string {
  const { low, high } = scaleOf(map);
  const least = map.decades.reduce((min, decade) => (Number.isFinite(decade) ? Math.min(min, decade) : min), high);
  const share = high > low ? (least - low) / (high - low) : 0;
  return `${String(Math.round(100 * (FAINTEST + (1 - FAINTEST) * share)))}%`;
}

function colourOf(style: CSSStyleDeclaration, negative: boolean, depth: number): string {
  const name = negative ? '--shade-negative' : '--shade';
  const low = style.getPropertyValue(`${name}-low`);
  const high = style.getPropertyValue(`${name}-high`);
  return `color-mix(in oklab, ${high} ${String(Math.round(depth * 100))}%, ${low})`;
}

function draw(canvas: HTMLCanvasElement, map: MagnitudePicture): void {
  const context = canvas.getContext('2d');
  if (context === null || map.side === 0) return;
  const pixels = Math.round(SIDE_PX * Math.max(1, devicePixelRatio));
  canvas.width = pixels;
  canvas.height = pixels;
  const style = getComputedStyle(canvas);
  const { low, high } = scaleOf(map);
  const cell = pixels / map.side;
  const stroked = cell >= SMALLEST_STROKED_PX * devicePixelRatio;
  const gap = cell > 12 ? 1 : 0;
  const palette = new Map<number, string>();
  for (let row = 0; row < map.side; row += 1) {
    for (let col = 0; col < map.side; col += 1) {
      const at = row * map.side + col;
      const decade = map.decades[at];
      if (decade === undefined || !Number.isFinite(decade)) continue;
      const negative = (map.signs[at] ?? 0) < 0;
      const step = Math.round(((decade - low) / (high - low)) * STEPS);
      const key = negative ? -1 - step : step;
      let colour = palette.get(key);
      if (colour === undefined) {
        colour = colourOf(style, negative, FAINTEST + ((1 - FAINTEST) * step) / STEPS);
        palette.set(key, colour);
      }
      const x = Math.floor(col * cell);
      const y = Math.floor(row * cell);
      const width = Math.ceil((col + 1) * cell) - x - gap;
      const height = Math.ceil((row + 1) * cell) - y - gap;
      context.fillStyle = colour;
      context.fillRect(x, y, width, height);
      if (negative && stroked) {
        context.strokeStyle = style.getPropertyValue('--paper');
        context.lineWidth = Math.max(1, cell / 14);
        context.beginPath();
        context.moveTo(x + width * 0.25, y + height / 2);
        context.lineTo(x + width * 0.75, y + height / 2);
        context.stroke();
      }
    }
  }
}

function description(map: MagnitudePicture): string {
  const order = map.side * map.block;
  const gathered = map.block > 1 ? ` Each square stands for ${String(map.block)} rows and columns.` : '';
  return `Magnitudes of a matrix of order about ${String(order)}, from ${map.smallest} to ${map.largest}.${gathered}`;
}

interface MatrixMapProps {
  readonly map: MagnitudePicture;
  readonly title: string;
  /** Of complex entries the sign of the real part is shown. */
  readonly complex?: boolean;
}

export function MatrixMap({ map, title, complex = false }: MatrixMapProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  useEffect(() => {
    const paint = () => {
      if (canvas.current !== null) draw(canvas.current, map);
    };
    paint();
    const scheme = matchMedia('(prefers-color-scheme: dark)');
    scheme.addEventListener('change', paint);
    addEventListener('beforeprint', paint);
    return () => {
      scheme.removeEventListener('change', paint);
      removeEventListener('beforeprint', paint);
    };
  }, [map]);
  return (
    <figure class="map">
      <canvas ref={canvas} role="img" aria-label={`${title}. ${description(map)}`} />
      <figcaption class="map-legend" style={{ '--start': startOf(map) }}>
        <span class="ramp" aria-hidden="true" />
        <span class="ramp negative" aria-hidden="true" />
        <span class="ends">
          <span class="digits">{map.smallest}</span>
          <span class="digits">{map.largest}</span>
        </span>
        <span class="soft">
          by decades; <span class="key" aria-hidden="true" /> positive, <span class="key negative" aria-hidden="true" />{' '}
          negative{complex ? ' real part' : ''}, blank zero
          {map.block > 1 ? `; a square is ${String(map.block)} × ${String(map.block)} entries` : ''}
        </span>
      </figcaption>
    </figure>
  );
}
