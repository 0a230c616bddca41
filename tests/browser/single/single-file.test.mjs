/** The single file, from a file:// address: no server, no request at all. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { openPage, pageAddress, pasteMatrix, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

test('opens on a solved example and asks for no other file', async () => {
  assert.match(pageAddress, /^file:/);
  const context = await browser.newContext({ offline: true });
  const page = await context.newPage();
  const requests = [];
  page.on('request', (request) => requests.push(request.url()));
  await page.goto(pageAddress);
  await solved(page);
  const outside = requests.filter((url) => !url.startsWith('blob:') && !url.startsWith('data:'));
  assert.deepEqual(outside, [pageAddress]);
});

test('a pasted matrix is solved and its link opens to the same bits', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '2 1 0\n1 2 1\n0 1 2');
  const first = await solved(page, example);
  const link = await page.evaluate(async () => {
    const copied = new Promise((resolve) => {
      navigator.clipboard.writeText = (text) => { resolve(text); return Promise.resolve(); };
    });
    [...document.querySelectorAll('button')].find((button) => button.textContent === 'Copy link')?.click();
    return copied;
  });
  assert.ok(link.startsWith(pageAddress), link.slice(0, 120));
  const opened = await openPage(browser, { fragment: link.slice(pageAddress.length) });
  assert.equal(await solved(opened.page), first);
  assertQuiet();
  opened.assertQuiet();
});
