/** Entries with tolerances: proven ranges, the ranking, and both on the sheet. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { openPage, pasteMatrix, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

const number = (text) => Number(text.trim().replace('\u2212', '-'));

test('ranges hold what the corners of a diagonal matrix give, and entries are ranked', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '1 ± 0.25, 0, 0\n0, 4 ± 0.5, 0\n0, 0, 9');
  await solved(page, example);
  const ranges = page.locator('#proof .ranges tbody tr');
  await ranges.nth(2).waitFor();
  for (const [place, low, high] of [[0, 0.75, 1.25], [1, 3.5, 4.5], [2, 9, 9]]) {
    const [lower, upper] = await ranges.nth(place).locator('td.digits').allTextContents();
    assert.ok(number(lower) <= low && number(upper) >= high, `${lower} to ${upper} does not hold ${low} to ${high}`);
  }
  await page.getByRole('button', { name: 'rank the entries for eigenvalue 2' }).click();
  const ranking = page.locator('#proof .influences tbody tr');
  await page.locator('#proof .ranking h4', { hasText: '2' }).waitFor();
  await ranking.filter({ hasText: '2, 2' }).waitFor();
  assert.equal(await ranking.count(), 1, 'only entry 2, 2 moves the second eigenvalue');
  await page.frameLocator('#sheet iframe').getByRole('heading', { name: 'Within the tolerances' }).waitFor();
  assertQuiet();
});

test('a matrix without tolerances has no such part', async () => {
  const { page, assertQuiet } = await openPage(browser);
  await solved(page);
  await page.locator('#proof .condition').first().waitFor();
  assert.equal(await page.locator('#proof .ranges').count(), 0);
  assertQuiet();
});
