/** Batches of small problems through the shipped pool of workers. */

const COUNT = 1000;
const ORDER = 10;

/** In the page: problems a second, the workers' start not counted. */
async function inPage([size, count, order]) {
  const { startPool } = await import('./pool.js');
  const module = await WebAssembly.compileStreaming(fetch('./eigenledger_bg.wasm'));
  const pool = await startPool(module, () => new Worker('./worker.js', { type: 'module' }), size);
  const matrix = (index) => Array.from({ length: order }, (_, row) =>
    Array.from({ length: order }, (_, col) => ((row + 1) * (col + 1) * (index + 7)) % 199).join(' ')).join('\n');
  const documents = Array.from({ length: count }, (_, index) =>
    ({ title: '', notes: '', matrix: matrix(index), parameters: [], choices: {}, claims: [] }));
  try {
    // The first batch warms the engine's compilers up.
    await pool.solve(documents);
    const started = performance.now();
    const results = await pool.solve(documents);
    const seconds = (performance.now() - started) / 1000;
    const failed = results.find(({ trouble }) => trouble.length > 0);
    if (failed !== undefined) throw new Error(failed.trouble.join(' '));
    return results.length / seconds;
  } finally {
    pool.end();
  }
}

/** Problems a second by number of workers: text read, solved with ledger, figures made. */
export async function throughput(browser, site, sizes) {
  const page = await browser.newPage();
  try {
    await page.goto(new URL('examples/batch.html', site).href);
    const found = [];
    for (const workers of sizes) {
      found.push({ workers, order: ORDER, perSecond: await page.evaluate(inPage, [workers, COUNT, ORDER]) });
    }
    return found;
  } finally {
    await page.close();
  }
}
