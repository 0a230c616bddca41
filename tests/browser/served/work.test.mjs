/** Long work, stepping through the ledger, downloads, and bits across engines. */
import assert from 'node:assert/strict';
import { execFileSync } from 'node:child_process';
import { readFile, readdir } from 'node:fs/promises';
import { join } from 'node:path';
import { after, before, test } from 'node:test';

import { fingerprint, openPage, pasteMatrix, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

/** A symmetric matrix of small integers with no structure to profit from. */
function busyMatrix(order) {
  const entry = (row, col) => ((row * 7 + col * 7 + ((row * col) % 11) * 13) % 97) - 48;
  return Array.from({ length: order }, (_, row) =>
    Array.from({ length: order }, (_, col) => entry(row, col)).join(' '),
  ).join('\n');
}

test('a long run shows progress and can be cancelled; the text stays', async () => {
  const { page, assertQuiet } = await openPage(browser);
  await solved(page);
  await pasteMatrix(page, busyMatrix(700));
  const cancel = page.locator('.foot-line').getByRole('button', { name: 'Cancel' });
  await cancel.click();
  await page.locator('.foot-line').getByText('cancelled').waitFor();
  assert.equal(await fingerprint(page), '');
  assertQuiet();
});

test('values download as CSV', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '3 1\n1 3');
  await solved(page, example);
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.locator('#eigenpairs').getByRole('button', { name: 'Download' }).click(),
  ]);
  assert.match(download.suggestedFilename(), /\.csv$/);
  const text = await readFile(await download.path(), 'utf8');
  for (const value of [/\b2(\.0*)?\b/, /\b4(\.0*)?\b/]) assert.match(text, value);
  assertQuiet();
});

test('the examples have the same fingerprints natively and here', async () => {
  const { PROJECT: project, EIGENLEDGER_EXAMPLES: programs } = process.env;
  const folder = join(project, 'www-examples');
  const files = (await readdir(folder)).filter((name) => name.endsWith('.json')).sort();
  const printed = execFileSync(join(programs, 'fingerprint'), files.map((name) => join(folder, name)), { encoding: 'utf8' });
  const natively = printed.trim().split('\n').map((line) => line.split('\t')[1]);
  const { page, assertQuiet } = await openPage(browser);
  const found = [await solved(page)];
  for (const name of files.slice(1)) {
    await page.locator('.examples select').selectOption(name.replace(/\.json$/, ''));
    found.push(await solved(page, found.at(-1)));
  }
  assert.deepEqual(found, natively);
  assertQuiet();
});
