/**
 * `node bench.mjs OUTPUT`: measures in the page at PAGE_ADDRESS, in headless
 * Chromium, prints the table, writes it as JSON and draws the growth curve.
 * CHROMIUM and PAGE_ADDRESS are set by the builder, which serves the page.
 */
import { mkdir, writeFile } from 'node:fs/promises';
import { cpus } from 'node:os';
import { join } from 'node:path';

import { startBrowser } from '../../browser/harness.mjs';
import { growthCurve } from './growth.mjs';

const ORDERS = [3, 10, 20, 50, 100, 200, 400];
const [output] = process.argv.slice(2);
if (output === undefined) throw new Error('usage: node bench.mjs OUTPUT');

const NAMES = ['ours', 'ours, no ledger', 'nalgebra', 'faer', 'ml-matrix'];

function line(first, cells) {
  return [first.padEnd(14), ...cells.map((cell) => cell.padStart(16))].join('');
}

function shown({ order, field, cells }) {
  const times = NAMES.map((name) => cells[name]?.milliseconds.toPrecision(3) ?? '\u2014');
  return line(`${field} ${String(order)}`, times);
}

/** Every solver found the same least eigenvalue, or the times mean nothing. */
function assertAgree({ order, field, cells }) {
  const values = Object.values(cells).map(({ least }) => least);
  const spread = Math.max(...values) - Math.min(...values);
  // Backward errors of a few n·u·‖A‖, and ‖A‖ below 2·√n for these matrices.
  if (!(spread <= 1e-13 * order * Math.sqrt(order))) {
    throw new Error(`${field} ${String(order)}: the least eigenvalues differ: ${values.join(', ')}`);
  }
}

const browser = await startBrowser();
try {
  const page = await browser.newPage();
  await page.goto(process.env.PAGE_ADDRESS);
  console.log('milliseconds, with vectors, median, one thread');
  console.log(line('', NAMES));
  await page.exposeFunction('reportRow', (row) => console.log(shown(row)));
  const rows = await page.evaluate(async (orders) => {
    const { measure } = await import('./measure.js');
    return measure(orders, (row) => globalThis.reportRow(row));
  }, ORDERS);
  rows.forEach(assertAgree);
  await mkdir(output, { recursive: true });
  const table = { browser: browser.version(), processor: cpus()[0]?.model, unit: 'ms', rows };
  await writeFile(join(output, 'bench.json'), `${JSON.stringify(table, null, 2)}\n`);
  await writeFile(join(output, 'growth.svg'), growthCurve(rows, NAMES));
  console.log(`written: ${join(output, 'bench.json')}, ${join(output, 'growth.svg')}`);
} finally {
  await browser.close();
}
