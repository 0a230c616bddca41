/** Bad input: each gets a clear sentence or a result, and nothing hangs. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { assertValues, fingerprint, openPage, pasteMatrix, sentences, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

/** A sentence a person can act on: words, not a code or a type name. */
function assertClear(said, input) {
  for (const sentence of said) {
    assert.match(sentence, /\p{L}{2,} \p{L}+/u, `not a sentence: ${sentence} (for ${input})`);
    assert.doesNotMatch(sentence, /undefined|\[object|RuntimeError|unreachable|panicked/, `for ${input}`);
  }
}

const REFUSED = [
  ['ragged rows', '1 2 3\n4 5\n6 7 8'],
  ['letters', 'quick brown\nfox jumps'],
  ['an infinite decimal', '1e999 0\n0 NaN'],
  ['not a number', 'NaN 0\n0 1'],
  ['markup in a cell', '<img src=x onerror=alert(1)> 2\n2 1'],
  ['right-to-left text', '\u05d0\u05d1 \u0661\n\u0661 \u05d2'],
  ['a rectangle', '1 2 3 4\n5 6 7 8'],
];

for (const [name, text] of REFUSED) {
  test(`${name}: a sentence`, async () => {
    const { page, assertQuiet } = await openPage(browser);
    await solved(page);
    await pasteMatrix(page, text);
    await page.locator('section.outdated').first().waitFor({ state: 'attached' });
    assertClear(await sentences(page), text);
    assert.equal(await page.locator('img[src="x"]').count(), 0, 'markup of a cell became an element');
    assertQuiet();
  });
}

test('an empty text: no figures, no complaint', async () => {
  const { page, assertQuiet } = await openPage(browser);
  await solved(page);
  await page.getByRole('button', { name: 'Clear' }).click();
  await page.waitForFunction(() => /none yet/.test(document.querySelector('.foot-line')?.textContent ?? ''));
  assert.equal(await fingerprint(page), '');
  assertQuiet();
});

test('one cell is solved', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '-2.5');
  await solved(page, example);
  await assertValues(page, [-2.5]);
  assertQuiet();
});

test('a million rows: a sentence, and the page still answers', async () => {
  const { page, assertQuiet } = await openPage(browser);
  await solved(page);
  await pasteMatrix(page, '1\n'.repeat(1_000_000));
  assertClear(await sentences(page), 'a million rows of 1');
  await pasteMatrix(page, '2 1\n1 2');
  await assertValues(page, [1, 3]);
  assertQuiet();
});

test('five megabytes of prose: a sentence, and the page still answers', async () => {
  const { page, assertQuiet } = await openPage(browser);
  await solved(page);
  await pasteMatrix(page, 'the tide at the sound was high\n'.repeat(170_000));
  assertClear(await sentences(page), '5 MB of prose');
  await pasteMatrix(page, '2 1\n1 2');
  await assertValues(page, [1, 3]);
  assertQuiet();
});

test('a binary file: a sentence, and the problem stays', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  const bytes = Buffer.from(Array.from({ length: 4096 }, (_, index) => (index * 197 + 31) % 256));
  await page.getByRole('region', { name: 'Problem' }).locator('input[type=file]').setInputFiles({ name: 'dump.bin', mimeType: 'application/octet-stream', buffer: bytes });
  assertClear(await sentences(page), 'a binary file');
  assert.equal(await fingerprint(page), example);
  assertQuiet();
});

for (const [name, fragment] of [
  ['a truncated link', '#p1.eJyrVkrLz1eyUkpKLFKqBQ'],
  ['a link of 100 kB of rubbish', `#${'Zm9v'.repeat(25_000)}`],
  ['a link of an unknown kind', '#version-99'],
]) {
  test(`${name}: a sentence, and the example stays`, async () => {
    const { page, assertQuiet } = await openPage(browser, { fragment });
    await solved(page);
    assertClear(await sentences(page), fragment.slice(0, 40));
    assertQuiet();
  });
}
