/**
 * Measures every solver on the same problems, in the page that loads this.
 * A time is the median of the runs; their number keeps a cell near a second.
 */
import init, { Bench } from './peers.js';

// A plain script of the page, which leaves its library under this name.
const { EigenvalueDecomposition, Matrix } = globalThis.mlMatrix;

const BUDGET_MS = 1500;
const MOST_RUNS = 60;
const LEAST_RUNS = 3;

function median(times) {
  const sorted = times.toSorted((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)];
}

function time(solve) {
  const times = [];
  let spent = 0;
  // The first run warms up the engine's compiler and is not counted.
  let least = solve();
  while (times.length < LEAST_RUNS || (spent < BUDGET_MS && times.length < MOST_RUNS)) {
    const started = performance.now();
    least = solve();
    const elapsed = performance.now() - started;
    times.push(elapsed);
    spent += elapsed;
  }
  return { milliseconds: median(times), runs: times.length, least };
}

/** One row: an order and a field, every solver's time. */
function row(order, complex) {
  const bench = new Bench(order, complex);
  const solvers = {
    ours: () => bench.ours(),
    'ours, no ledger': () => bench.ours_unrecorded(),
    nalgebra: () => bench.nalgebra(),
    faer: () => bench.faer(),
  };
  if (!complex) {
    const matrix = Matrix.from1DArray(order, order, bench.entries());
    solvers['ml-matrix'] = () =>
      Math.min(...new EigenvalueDecomposition(matrix, { assumeSymmetric: true }).realEigenvalues);
  }
  const cells = {};
  for (const [name, solve] of Object.entries(solvers)) cells[name] = time(solve);
  bench.free();
  return { order, field: complex ? 'complex' : 'real', cells };
}

export async function measure(orders, report) {
  await init();
  const rows = [];
  for (const complex of [false, true]) {
    for (const order of orders) {
      rows.push(row(order, complex));
      report(rows.at(-1));
    }
  }
  return rows;
}
