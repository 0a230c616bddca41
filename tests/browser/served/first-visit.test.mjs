/** The first visit, a first paste, and what is left after a reload. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { assertValues, fingerprint, footFigure, matrixEditor, openPage, pasteMatrix, sentences, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

test('opens on a solved example', async () => {
  const { page, assertQuiet } = await openPage(browser);
  await solved(page);
  assert.match(await footFigure(page, 'order'), /^3, real/);
  assert.notEqual(await footFigure(page, 'closing balance'), '\u2014');
  assertQuiet();
});

test('the first paste replaces the example and is solved', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  // Blocks: 3 ± 1 and 1.
  await pasteMatrix(page, '3 1 0\n1 3 0\n0 0 1');
  await solved(page, example);
  await assertValues(page, [1, 2, 4]);
  assertQuiet();
});

test('a complex Hermitian matrix is solved', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '2, -i\ni, 2');
  await solved(page, example);
  assert.match(await footFigure(page, 'order'), /^2, complex/);
  await assertValues(page, [1, 3]);
  assertQuiet();
});

test('a reload keeps the problem and finds the same bits', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '5 2\n2 -7.25');
  const first = await solved(page, example);
  // The document is written after a pause of 400 ms.
  await page.waitForTimeout(1000);
  await page.reload();
  assert.equal(await solved(page), first);
  assert.match(await matrixEditor(page).innerText(), /-7\.25/);
  assertQuiet();
});

test('every example is read and solved', async () => {
  const { page, assertQuiet } = await openPage(browser);
  let last = await solved(page);
  const keys = await page.locator('.examples option').evaluateAll((options) =>
    options.map((option) => option.value).filter((value) => value !== ''));
  assert.ok(keys.length >= 7, `only ${String(keys.length)} examples`);
  // The first is the one already shown.
  for (const key of keys.slice(1)) {
    await page.locator('.examples select').selectOption(key);
    last = await solved(page, last).catch(async () => {
      throw new Error(`${key} was not solved: ${(await sentences(page)).join(' ')}`);
    });
  }
  assert.equal(await fingerprint(page), last);
  assertQuiet();
});

test('a matrix that is not Hermitian lists the pairs and offers three choices', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '1 2\n3 4');
  const said = await sentences(page);
  assert.ok(said.some((sentence) => /disagree/.test(sentence)), said.join('\n'));
  await page.getByRole('button', { name: 'take the lower triangle' }).click();
  await solved(page, example);
  // λ² − 5λ − 5 = 0.
  await assertValues(page, [(5 - Math.sqrt(45)) / 2, (5 + Math.sqrt(45)) / 2]);
  assertQuiet();
});
