/**
 * In the page: the module as it is shipped, through the calls the page makes.
 * Every measure takes a fresh instance, so that its memory is its own.
 */
let instances = 0;

async function freshModule() {
  instances += 1;
  const glue = await import(`./shipped/eigenledger.js?instance=${String(instances)}`);
  const { memory } = await glue.default({ module_or_path: new URL('./shipped/eigenledger_bg.wasm', import.meta.url) });
  return { bench: new glue.Workbench(), memory };
}

/** Whole numbers from −999 to 999 (Lehmer's generator: Park and Miller 1988). */
function* wholeNumbers(seed) {
  let state = seed;
  for (;;) {
    state = (state * 48_271) % 2_147_483_647;
    yield (state % 1999) - 999;
  }
}

/** A symmetric matrix as a person would paste it, a row a line. */
function matrixText(order, written) {
  const numbers = wholeNumbers(order);
  const rows = Array.from({ length: order }, () => []);
  for (let row = 0; row < order; row += 1) {
    for (let col = 0; col <= row; col += 1) {
      const cell = written(numbers.next().value);
      rows[row][col] = cell;
      rows[col][row] = cell;
    }
  }
  return rows.map((row) => row.join(' ')).join('\n');
}

const asDecimals = (whole) => (whole / 1000).toFixed(3);
const asIntegers = (whole) => String(whole);
const ignored = () => undefined;

function read(bench, matrix) {
  const reading = bench.read({ title: '', notes: '', matrix, parameters: [], choices: {}, claims: [] });
  if (!reading.ready) throw new Error('the measured problem is not read as one');
}

async function solved(order, written) {
  const module = await freshModule();
  read(module.bench, matrixText(order, written));
  const afterReading = module.memory.buffer.byteLength;
  const started = performance.now();
  const { trouble } = module.bench.solve(ignored);
  const milliseconds = performance.now() - started;
  if (trouble !== undefined) throw new Error(`order ${String(order)}: ${trouble}`);
  return { ...module, afterReading, milliseconds };
}

function timed(act) {
  const started = performance.now();
  act();
  return performance.now() - started;
}

function median(times) {
  return times.toSorted((a, b) => a - b)[Math.floor(times.length / 2)];
}

/** The module's memory, in bytes: after the text is read, and after the solve with ledger. */
export async function memory(order) {
  const { memory: grown, afterReading } = await solved(order, asDecimals);
  return { order, afterReading, afterSolving: grown.buffer.byteLength };
}

/** `solve` as the page calls it: ledger, residuals, fingerprint and view included. */
export async function solveTime(order, runs) {
  const { bench } = await solved(order, asDecimals);
  const times = Array.from({ length: runs }, () => timed(() => bench.solve(ignored)));
  return { order, milliseconds: median(times) };
}

/** The proof to so many digits, after the solve. */
export async function deepProof(order, digits, runs) {
  const times = [];
  for (let run = 0; run < runs; run += 1) {
    const { bench } = await solved(order, asDecimals);
    times.push(timed(() => bench.prove('deep', digits, ignored)));
    const { rows } = bench.values(digits);
    const shown = rows.map(({ figure }) => figure.replaceAll(/\D/g, '').length);
    if (Math.min(...shown) < digits) throw new Error(`a value has only ${String(Math.min(...shown))} digits`);
  }
  return { order, digits, milliseconds: median(times) };
}

/** The exact road on whole numbers of up to three digits, after the solve. */
export async function exactRoad(order, runs) {
  const times = [];
  for (let run = 0; run < runs; run += 1) {
    const { bench } = await solved(order, asIntegers);
    let found;
    times.push(timed(() => { found = bench.exact(false, ignored); }));
    if (found === undefined || found.trouble !== undefined) throw new Error('the exact road gave up');
  }
  return { order, milliseconds: median(times) };
}
