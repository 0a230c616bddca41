/** The examples' page of links, and the page that uses the module by itself. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { openPage, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

test('every link of the examples opens its problem, solved', async () => {
  const { page, assertQuiet } = await openPage(browser, { fragment: 'examples/index.html' });
  const links = page.locator('#examples li > a:first-child');
  await links.nth(7).waitFor();
  const addresses = await links.evaluateAll((anchors) => anchors.map((anchor) => anchor.href));
  const titles = await links.allTextContents();
  for (const [index, address] of addresses.entries()) {
    const opened = await openPage(browser, { fragment: `index.html${new URL(address).hash}` });
    await solved(opened.page);
    const foot = await opened.page.locator('.foot-line').innerText();
    assert.ok(foot.includes(titles[index]), `${titles[index]} is not in: ${foot}`);
    opened.assertQuiet();
    await opened.context.close();
  }
  assertQuiet();
});

test('the embedding page prints the values of the second-difference matrix', async () => {
  const { page, assertQuiet } = await openPage(browser, { fragment: 'examples/embed.html' });
  const values = page.locator('#values');
  await page.waitForFunction(() => document.getElementById('values')?.textContent !== '');
  // Closed form: 2 − √2, 2, 2 + √2.
  assert.match(await values.innerText(), /^0\.58578644\n2\.0000000\n3\.4142136$/);
  assertQuiet();
});
