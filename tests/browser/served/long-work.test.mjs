/** Order 1,000, and what is left of a problem when its worker is lost. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { dropFiles, fingerprint, footFigure, matrixEditor, npyFile, openPage, pasteMatrix, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

/** Several times what a slow machine has been seen to need. */
const LONG_MS = 300_000;

/** Symmetric, of small integers. */
function largest() {
  const order = 1000;
  const values = Array.from({ length: order * order }, (_, at) => {
    const [row, col] = [Math.floor(at / order), at % order];
    return ((row * 7 + col * 7 + ((row * col) % 11) * 13) % 97) - 48;
  });
  return npyFile([order, order], values);
}

test('order 1,000 shows progress, is cancelled, and finishes when asked again', { timeout: 2 * LONG_MS }, async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await dropFiles(page, 'main', [{ name: 'largest.npy', content: largest() }]);
  const foot = page.locator('.foot-line');
  await foot.getByText('reducing').waitFor({ timeout: LONG_MS });
  const done = () => foot.locator('progress').evaluate((bar) => bar.value);
  const early = await done();
  await page.waitForFunction(
    (before) => (document.querySelector('.foot-line progress')?.value ?? 0) > before,
    early,
    { timeout: LONG_MS },
  );
  await foot.getByRole('button', { name: 'Cancel' }).click();
  await foot.getByText('cancelled').waitFor();
  assert.equal(await fingerprint(page), '');
  await foot.getByRole('button', { name: 'Compute' }).click();
  await page.waitForFunction(
    (old) => {
      const print = [...document.querySelectorAll('.foot-line dd')].map((dd) => dd.title).find((text) => /^[0-9a-f ]{32,}$/.test(text));
      return print !== undefined && print !== old;
    },
    example,
    { timeout: LONG_MS },
  );
  assert.match(await footFigure(page, 'order'), /^1000, real/);
  assertQuiet();
});

test('a reload in the middle of a run brings the problem back', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  const order = 300;
  const rows = Array.from({ length: order }, (_, row) =>
    Array.from({ length: order }, (_, col) => ((row * 7 + col * 7 + ((row * col) % 11) * 13) % 97) - 48).join(' '));
  await pasteMatrix(page, rows.join('\n'));
  // Longer than the pause before a document is written.
  await page.waitForTimeout(1000);
  await page.reload();
  await solved(page, example);
  assert.match(await footFigure(page, 'order'), /^300, real/);
  assertQuiet();
});

test('a worker that crashes leaves the problem, and the run can be made again', async () => {
  const { page } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '5 2\n2 -7.25');
  const first = await solved(page, example);
  await page.locator('.foot-line progress').waitFor({ state: 'detached' });
  const [worker] = page.workers();
  await worker.evaluate(() => { setTimeout(() => { throw new Error('The worker stopped for a test.'); }); });
  // Another problem meets a worker that is gone.
  await page.waitForTimeout(200);
  await pasteMatrix(page, '5 3\n3 -7.25');
  const second = await solved(page, first);
  assert.notEqual(second, '');
  assert.match(await matrixEditor(page).innerText(), /5 3/);
});
