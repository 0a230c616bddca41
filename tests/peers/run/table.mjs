/** The table as text, and what is drawn from it: means, ratios, exponents. */

export const OURS = 'ours';
/** What one could compile or script in a browser instead. */
export const PEERS = ['nalgebra', 'faer', 'ml-matrix'];
/** Natively, so no peer; for orientation. */
export const NATIVE = 'LAPACK, native';
export const COLUMNS = [OURS, 'no ledger', 'with quick proof', 'with tight proof', ...PEERS, NATIVE];

const LARGE = [50, 100, 200, 400];
const SMALL = [3, 10, 20];
const FIRST_WIDTH = 22;
const WIDTH = 18;

function line(first, cells) {
  return [first.padEnd(FIRST_WIDTH), ...cells.map((cell) => cell.padStart(WIDTH))].join('');
}

export function heading() {
  return line('', COLUMNS);
}

export function rowName({ family, complex, order }) {
  return `${family} ${complex ? 'complex' : 'real'} ${String(order)}`;
}

export function rowText(row) {
  return line(rowName(row), COLUMNS.map((name) => row.cells[name]?.milliseconds.toPrecision(3) ?? '\u2014'));
}

/** The time of the fastest peer in the browser. */
function fastestPeer({ cells }) {
  return Math.min(...PEERS.filter((name) => cells[name]).map((name) => cells[name].milliseconds));
}

function geometricMean(values) {
  return Math.exp(values.reduce((sum, value) => sum + Math.log(value), 0) / values.length);
}

/** How many times our time the fastest peer's is, row by row. */
function advantages(rows, column) {
  return rows.filter(({ cells }) => cells[column]).map((row) => fastestPeer(row) / row.cells[column].milliseconds);
}

/** Least squares slope of log time over log order, over rows of order 50 and more. */
export function growthExponent(points) {
  const large = points.filter(([order]) => order >= LARGE[0]).map(([order, value]) => [Math.log(order), Math.log(value)]);
  const mean = (index) => large.reduce((sum, point) => sum + point[index], 0) / large.length;
  const [x, y] = [mean(0), mean(1)];
  const covariance = large.reduce((sum, point) => sum + (point[0] - x) * (point[1] - y), 0);
  return covariance / large.reduce((sum, point) => sum + (point[0] - x) ** 2, 0);
}

/** Points of one solver among rows. */
export function pointsOf(rows, name) {
  return rows.filter(({ cells }) => cells[name]).map(({ order, cells }) => [order, cells[name].milliseconds]);
}

function comparison(name, rows, column) {
  const found = advantages(rows, column);
  return { name, column, mean: geometricMean(found), least: Math.min(...found) };
}

/** Everything the table comes down to, as plain data. */
export function conclusions(rows) {
  const among = (family, orders, complex) => rows.filter((row) => row.family === family
    && orders.includes(row.order) && (complex === undefined || row.complex === complex));
  const random = (orders, complex) => among('random', orders, complex);
  const comparisons = [OURS, 'with quick proof'].flatMap((column) => [
    comparison('orders 50 to 400, real', random(LARGE, false), column),
    comparison('orders 50 to 400, complex', random(LARGE, true), column),
    comparison('orders 50 to 400, both', random(LARGE), column),
    comparison('orders 3 to 20, both', random(SMALL), column),
    comparison('repeated values', among('repeated', LARGE), column),
  ]);
  const native = random(LARGE).filter(({ cells }) => cells[NATIVE])
    .map((row) => ({ name: rowName(row), times: row.cells[OURS].milliseconds / row.cells[NATIVE].milliseconds }));
  const ledger = random(LARGE)
    .map((row) => ({ name: rowName(row), percent: 100 * (row.cells[OURS].milliseconds / row.cells['no ledger'].milliseconds - 1) }));
  const exponents = [false, true].flatMap((complex) => COLUMNS.map((name) => {
    const exponent = growthExponent(pointsOf(rows.filter((row) => row.family === 'random' && row.complex === complex), name));
    return { name: `${name}, ${complex ? 'complex' : 'real'}`, exponent };
  })).filter(({ exponent }) => Number.isFinite(exponent));
  return { comparisons, native, ledger, exponents };
}

export function conclusionsText({ comparisons, native, ledger, exponents }) {
  const list = (items, words) => items.map((item) => `  ${words(item)}`);
  return [
    'Fastest peer\u2019s time over ours, geometric mean (least):',
    ...list(comparisons, ({ name, column, mean, least }) => `${column}, ${name}: ${mean.toFixed(2)} (${least.toFixed(2)})`),
    'Our time over native LAPACK\u2019s:',
    ...list(native, ({ name, times }) => `${name}: ${times.toFixed(2)}`),
    'What recording the ledger adds:',
    ...list(ledger, ({ name, percent }) => `${name}: ${percent.toFixed(1)} %`),
    'Exponent of time in the order, from order 50 on:',
    ...list(exponents, ({ name, exponent }) => `${name}: ${exponent.toFixed(2)}`),
  ].join('\n');
}
