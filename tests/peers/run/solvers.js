/**
 * In the page: every solver on the same problem. The solvers take turns, so
 * that whatever else the machine does falls on all of them alike.
 */
import init, { Bench } from './peers.js';

// A plain script of the page leaves its library under this name.
const { EigenvalueDecomposition, Matrix } = globalThis.mlMatrix;

/** The clock of a page is coarse: a sample repeats the work for this long. */
const SAMPLE_MS = 20;
/** An engine compiles quickly first and better later, while the code runs. */
const WARM_UP_MS = 100;
/** Time given to one solver at one order, unless the fewest samples need more. */
const BUDGET_MS = 700;
const FEWEST_SAMPLES = 5;
const MOST_SAMPLES = 31;

let ready;

function timed(solve, count) {
  const started = performance.now();
  let least = 0;
  for (let turn = 0; turn < count; turn += 1) least = solve();
  return { elapsed: performance.now() - started, least };
}

/** Lets the engine's compilers finish, then finds how many turns fill a sample. */
function turnsPerSample(solve) {
  const started = performance.now();
  do solve(); while (performance.now() - started < WARM_UP_MS);
  for (let count = 1; ;) {
    const { elapsed } = timed(solve, count);
    if (elapsed >= SAMPLE_MS) return count;
    count = Math.ceil(count * Math.min(10, (1.3 * SAMPLE_MS) / Math.max(elapsed, 0.1)));
  }
}

function quantile(sorted, share) {
  return sorted[Math.round(share * (sorted.length - 1))];
}

function summary({ samples, least }) {
  const sorted = samples.toSorted((a, b) => a - b);
  const milliseconds = quantile(sorted, 0.5);
  const spread = (quantile(sorted, 0.75) - quantile(sorted, 0.25)) / milliseconds;
  return { milliseconds, spread, samples: samples.length, least };
}

function solversOf(bench, { order, complex, without }) {
  const solvers = {
    ours: () => bench.ours(),
    'no ledger': () => bench.ours_unrecorded(),
    'with quick proof': () => bench.ours_quick(),
    'with tight proof': () => bench.ours_tight(),
    nalgebra: () => bench.nalgebra(),
    faer: () => bench.faer(),
  };
  if (!complex) {
    const matrix = Matrix.from1DArray(order, order, bench.entries());
    solvers['ml-matrix'] = () =>
      Math.min(...new EigenvalueDecomposition(matrix, { assumeSymmetric: true }).realEigenvalues);
  }
  for (const name of without) delete solvers[name];
  return solvers;
}

/**
 * Measures one problem.
 *
 * @param asked `{ family, order, complex, without }`; `without` names solvers to leave out.
 * @returns `cells`, by solver: median milliseconds a solve, the middle half's
 *   width as a share of it, the number of samples, and the least eigenvalue.
 */
export async function measure(asked) {
  ready ??= init({ module_or_path: new URL('./peers_bg.wasm', import.meta.url) });
  await ready;
  const bench = new Bench(asked.family, asked.order, asked.complex);
  const runs = Object.entries(solversOf(bench, asked)).map(([name, solve]) => ({
    name, solve, count: turnsPerSample(solve), samples: [], spent: 0, least: Number.NaN,
  }));
  const wants = ({ samples, spent }) =>
    samples.length < FEWEST_SAMPLES || (spent < BUDGET_MS && samples.length < MOST_SAMPLES);
  while (runs.some(wants)) {
    for (const run of runs.filter(wants)) {
      const { elapsed, least } = timed(run.solve, run.count);
      run.samples.push(elapsed / run.count);
      run.spent += elapsed;
      run.least = least;
    }
  }
  bench.free();
  const cells = Object.fromEntries(runs.map((run) => [run.name, summary(run)]));
  return { ...asked, cells };
}
