/** The growth curve: time against order, both on logarithmic scales, as SVG. */
import { growthExponent, pointsOf } from './table.mjs';

const WIDTH = 680;
const HEIGHT = 420;
const MARGIN = { left: 70, right: 190, top: 20, bottom: 44 };
/** Marks tell the lines apart without colour. */
const MARKS = ['\u25cf', '\u25cb', '\u25b2', '\u25a0', '\u25c6', '\u25bd'];

function scale([low, high], from, to) {
  return (value) => from + ((Math.log(value / low)) / Math.log(high / low)) * (to - from);
}

function decades([low, high]) {
  const marks = [];
  for (let power = Math.ceil(Math.log10(low)); power <= Math.floor(Math.log10(high)); power += 1) marks.push(power);
  return marks;
}

function timeText(power) {
  return power < 0 ? `${String(1000 * 10 ** power)} \u00b5s` : `${String(10 ** power)} ms`;
}

function axes(orders, range, x, y) {
  const right = WIDTH - MARGIN.right;
  const across = decades(range).flatMap((power) => {
    const place = y(10 ** power).toFixed(1);
    return [
      `<path d="M${MARGIN.left} ${place}H${right}" stroke="#ddd"/>`,
      `<text x="${MARGIN.left - 6}" y="${place}" dy="4" text-anchor="end">${timeText(power)}</text>`,
    ];
  });
  const below = orders.map((order) =>
    `<text x="${x(order).toFixed(1)}" y="${HEIGHT - MARGIN.bottom + 18}" text-anchor="middle">${order}</text>`);
  const name = `<text x="${(MARGIN.left + right) / 2}" y="${HEIGHT - 8}" text-anchor="middle">order</text>`;
  return [...across, ...below, name];
}

function curve({ name, points }, index, x, y) {
  const ink = index === 0 ? '#1c4e80' : '#555';
  const places = points.map(([order, time]) => [x(order).toFixed(1), y(time).toFixed(1)]);
  const marks = places.map(([left, top]) =>
    `<text x="${left}" y="${top}" dy="4" text-anchor="middle" fill="${ink}">${MARKS[index]}</text>`);
  return [
    `<polyline points="${places.map((place) => place.join(',')).join(' ')}" fill="none" stroke="${ink}"/>`,
    ...marks,
    `<text x="${WIDTH - MARGIN.right + 12}" y="${MARGIN.top + 18 + 18 * index}" fill="${ink}">` +
      `${MARKS[index]} ${name}, n^${growthExponent(points).toFixed(1)}</text>`,
  ];
}

/** Draws the named solvers' times over real random matrices. */
export function growthCurve(rows, names) {
  const shown = rows.filter(({ family, complex }) => family === 'random' && !complex);
  const lines = names.map((name) => ({ name, points: pointsOf(shown, name) })).filter(({ points }) => points.length > 1);
  const times = lines.flatMap(({ points }) => points.map(([, time]) => time));
  const orders = shown.map(({ order }) => order);
  const range = [Math.min(...times) / 1.5, Math.max(...times) * 1.5];
  const x = scale([Math.min(...orders), Math.max(...orders)], MARGIN.left, WIDTH - MARGIN.right);
  const y = scale(range, HEIGHT - MARGIN.bottom, MARGIN.top);
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${WIDTH} ${HEIGHT}" font-family="sans-serif" font-size="12">`,
    '<title>Time with vectors against order, real symmetric, in the browser</title>',
    `<rect width="${WIDTH}" height="${HEIGHT}" fill="#fff"/>`,
    ...axes(orders, range, x, y),
    ...lines.flatMap((one, index) => curve(one, index, x, y)),
    '</svg>',
    '',
  ].join('\n');
}
