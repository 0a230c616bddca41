/**
 * The same bits in every engine: each browser solves and proves the examples
 * and the hard cases with the module as shipped, and is held against the
 * native program; and the page itself runs in each of them.
 *
 * The builder sets PAGE_ADDRESS (the page), FINGERPRINT_ADDRESS (the page in
 * `page/`, with the documents) and NATIVE (the native program's lines). Where
 * they are there it sets FIREFOX, and WEBKIT_DRIVER, WEBKIT_BROWSER and
 * WEBKIT_DISPLAY, all paths of programs; without them the engine is skipped.
 */
import assert from 'node:assert/strict';
import { readFile } from 'node:fs/promises';
import { basename } from 'node:path';
import { test } from 'node:test';

import { startBrowser } from '../harness.mjs';
import { startFirefox } from './drivers/firefox.mjs';
import { startWebKit } from './drivers/webkit.mjs';

const { PAGE_ADDRESS: pageAddress, FINGERPRINT_ADDRESS: address, NATIVE: native } = process.env;
const { FIREFOX: firefox, WEBKIT_DRIVER: driver, WEBKIT_BROWSER: browser, WEBKIT_DISPLAY: display } = process.env;

/** Slow engines are not wrong. */
const PATIENCE_MS = 120_000;

async function startChromium() {
  const browser = await startBrowser();
  const page = await browser.newPage();
  return { open: (url) => page.goto(url), evaluate: (expression) => page.evaluate(expression), close: () => browser.close() };
}

const engines = [
  { name: 'Chromium', start: startChromium, there: true },
  { name: 'Firefox', start: () => startFirefox(firefox), there: firefox !== undefined },
  { name: 'WebKit', start: () => startWebKit({ driver, browser, display }), there: driver !== undefined },
];

/** Asks the page until it has a text to give. */
async function until({ evaluate }, expression) {
  const deadline = Date.now() + PATIENCE_MS;
  while (Date.now() < deadline) {
    const found = await evaluate(expression);
    if (found) return found;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error(`nothing came of ${expression}`);
}

/** What the native program printed: a document's name, then what a browser has to find. */
async function expected() {
  const lines = (await readFile(native, 'utf8')).trim().split('\n');
  return Object.fromEntries(lines.map((line) => {
    const [path, ...found] = line.split('\t');
    return [basename(path), found.join('\t')];
  }));
}

for (const { name, start, there } of engines) {
  const skip = there ? false : `${name} is not on this machine`;
  test(`${name} finds the bits that the native program finds`, { skip }, async () => {
    const engine = await start();
    try {
      await engine.open(address);
      const { results, failure } = JSON.parse(await until(engine, 'document.body.dataset.outcome ?? ""'));
      assert.equal(failure, undefined);
      assert.deepEqual(results, await expected());
      assert.ok(Object.keys(results).length > 40, 'documents are missing');
      await engine.open(pageAddress);
      const shown = await until(engine, `[...document.querySelectorAll('.foot-line dd')]
        .map((figure) => figure.title).find((title) => /^[0-9a-f ]{71}$/.test(title)) ?? ""`);
      const prints = Object.values(results).map((found) => found.split('\t')[0]);
      assert.ok(prints.includes(shown), `the page opens on ${shown}, which is none of the examples`);
    } finally {
      await engine.close();
    }
  });
}
