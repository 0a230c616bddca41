/**
 * `node bench.mjs OUTPUT [PICTURE]`: measures in headless Chromium, prints the
 * tables, writes them as JSON and draws the growth curve into OUTPUT. A quiet
 * run also writes the curve to PICTURE.
 *
 * The builder, which serves both pages, sets CHROMIUM, PAGE_ADDRESS (the
 * solvers' page), SITE_ADDRESS (the finished page) and, where there is one,
 * PYTHON (with NumPy).
 */
import { execFileSync } from 'node:child_process';
import { mkdir, writeFile } from 'node:fs/promises';
import { cpus } from 'node:os';
import { join } from 'node:path';

import { startBrowser } from '../../browser/harness.mjs';
import { coldStart } from './cold-start.mjs';
import { growthCurve } from './growth.mjs';
import { throughput } from './throughput.mjs';
import { COLUMNS, NATIVE, OURS, PEERS, conclusions, conclusionsText, heading, rowName, rowText } from './table.mjs';

const ORDERS = [2, 3, 10, 20, 50, 100, 200, 400, 1000];
/** The general JavaScript library and the tight proof take minutes from here on. */
const PATIENT_FROM = 1000;
const REPEATED_ORDERS = [50, 100, 200, 400];
/** A quiet run's samples mostly agree this well. */
const QUIET_SPREAD = 0.1;

const [output, picture] = process.argv.slice(2);
if (output === undefined) throw new Error('usage: node bench.mjs OUTPUT [PICTURE]');
const { PAGE_ADDRESS: address, SITE_ADDRESS: site, PYTHON: python } = process.env;

function problems() {
  const all = [false, true].flatMap((complex) => [
    ...ORDERS.map((order) => ({ family: 'random', order, complex })),
    ...REPEATED_ORDERS.map((order) => ({ family: 'repeated', order, complex })),
  ]);
  return all.map((one) => ({ ...one, without: one.order >= PATIENT_FROM ? ['ml-matrix', 'with tight proof'] : [] }));
}

/** LAPACK's cells for these problems, or none without Python. */
function nativeCells(asked) {
  if (python === undefined) {
    console.log('NumPy is left out: `cargo page test outside` makes the Python environment that has it.');
    return [];
  }
  const script = join(import.meta.dirname, 'native.py');
  return JSON.parse(execFileSync(python, [script], { input: JSON.stringify(asked), encoding: 'utf8' }));
}

/** Every solver found the same least eigenvalue, or the times mean nothing. */
function assertAgree(row) {
  const values = Object.values(row.cells).map(({ least }) => least);
  const spread = Math.max(...values) - Math.min(...values);
  // Backward errors of a few n·u·‖A‖: ‖A‖ is below 2·√n for the random family
  // and below n/10 + 1 for the repeated one.
  const norm = Math.max(2 * Math.sqrt(row.order), row.order / 10 + 1);
  if (!(spread <= 1e-14 * row.order * norm)) {
    throw new Error(`${rowName(row)}: the least eigenvalues differ: ${values.join(', ')}`);
  }
}

async function measuredRows(page) {
  const asked = problems();
  const random = asked.filter(({ family }) => family === 'random');
  const native = nativeCells(random);
  console.log('Milliseconds, with vectors, one thread, median');
  console.log(heading());
  const rows = [];
  for (const one of asked) {
    const row = await page.evaluate(async (problem) => {
      const { measure } = await import('./solvers.js');
      return measure(problem);
    }, one);
    const beside = native[random.indexOf(one)];
    if (beside !== undefined) row.cells[NATIVE] = beside;
    assertAgree(row);
    console.log(rowText(row));
    rows.push(row);
  }
  return rows;
}

const megabytes = (bytes) => `${(bytes / 2 ** 20).toFixed(1)} MiB`;
const milliseconds = (time) => `${time.toPrecision(3)} ms`;

/** The module as shipped, and the whole page. */
async function measuredShipped(browser, page) {
  const call = (name, ...words) => page.evaluate(async ([verb, given]) => {
    const shipped = await import('./shipped.js');
    return shipped[verb](...given);
  }, [name, words]);
  const found = { memory: [], solve: [] };
  console.log('The module as shipped');
  for (const order of [100, 200, 400, 1000]) {
    const used = await call('memory', order);
    found.memory.push(used);
    console.log(`  memory at order ${String(order)}: ${megabytes(used.afterReading)} with the text read, ${megabytes(used.afterSolving)} with the ledger`);
  }
  for (const order of [10, 100, 200, 400]) {
    const taken = await call('solveTime', order, 9);
    found.solve.push(taken);
    console.log(`  solve with ledger, residuals and fingerprint at order ${String(order)}: ${milliseconds(taken.milliseconds)}`);
  }
  found.deep = await call('deepProof', 10, 100, 5);
  console.log(`  100 proven digits at order 10: ${milliseconds(found.deep.milliseconds)}`);
  found.exact = await call('exactRoad', 8, 5);
  console.log(`  exact road at order 8, whole numbers of three digits: ${milliseconds(found.exact.milliseconds)}`);
  found.coldStart = await coldStart(browser, site, 9);
  console.log(`  first visit, from navigation to the first eigenvalues: ${milliseconds(found.coldStart.milliseconds)}`);
  found.throughput = await throughput(browser, site, [1, 2]);
  for (const { workers, order, perSecond } of found.throughput) {
    console.log(`  batch of order ${String(order)}, workers: ${String(workers)}: ${perSecond.toFixed(0)} problems a second`);
  }
  return found;
}

/** The middle of all spreads: half of the cells are steadier than this. */
function typicalSpread(rows) {
  const spreads = rows.flatMap(({ cells }) => Object.values(cells).map(({ spread }) => spread)).sort((a, b) => a - b);
  return spreads[Math.floor(spreads.length / 2)];
}

const browser = await startBrowser();
try {
  const page = await browser.newPage();
  await page.goto(address);
  const shipped = await measuredShipped(browser, page);
  const rows = await measuredRows(page);
  const drawn = conclusions(rows);
  console.log(conclusionsText(drawn));
  const spread = typicalSpread(rows);
  console.log(`Half of the cells\u2019 samples agree to ${(100 * spread).toFixed(1)} % or better.`);
  await mkdir(output, { recursive: true });
  const machine = { browser: browser.version(), processor: cpus()[0]?.model };
  const table = { ...machine, unit: 'ms', columns: COLUMNS, spread, rows, shipped, conclusions: drawn };
  await writeFile(join(output, 'bench.json'), `${JSON.stringify(table, null, 2)}\n`);
  const curve = growthCurve(rows, [OURS, ...PEERS, NATIVE]);
  await writeFile(join(output, 'growth.svg'), curve);
  console.log(`Written: ${join(output, 'bench.json')}, ${join(output, 'growth.svg')}`);
  if (picture !== undefined) {
    if (spread > QUIET_SPREAD) throw new Error('The machine was too busy for a picture to keep: run again when it is quiet.');
    await writeFile(picture, curve);
    console.log(`Written: ${picture}`);
  }
} finally {
  await browser.close();
}
