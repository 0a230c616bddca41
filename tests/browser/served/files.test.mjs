/** Files dropped on the page, in each form that a matrix arrives in. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { assertValues, dropFiles, fingerprint, npyFile, openPage, sentences, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

// Second differences of order 3: 2 − 2cos(kπ/4).
const VALUES = [2 - Math.SQRT2, 2, 2 + Math.SQRT2];

const FILES = [
  ['second-differences.csv', '2,-1,0\n-1,2,-1\n0,-1,2\n'],
  ['second-differences.npy', npyFile([3, 3], [2, -1, 0, -1, 2, -1, 0, -1, 2])],
  [
    'second-differences.mtx',
    '%%MatrixMarket matrix coordinate real symmetric\n3 3 5\n1 1 2\n2 1 -1\n2 2 2\n3 2 -1\n3 3 2\n',
  ],
  ['second-differences.json', '[[2, -1, 0], [-1, 2, -1], [0, -1, 2]]'],
  [
    'document.json',
    JSON.stringify({ format: 'eigenledger problem', version: 1, title: 'Second differences', matrix: '2\n-1 2\n0 -1 2' }),
  ],
];

for (const [name, content] of FILES) {
  test(`${name} is opened where it is dropped`, async () => {
    const { page, assertQuiet } = await openPage(browser);
    const example = await solved(page);
    await dropFiles(page, 'main', [{ name, content }]);
    await solved(page, example);
    await assertValues(page, VALUES);
    const title = await page.getByRole('textbox', { name: 'Title' }).inputValue();
    assert.match(title, /second.differences/i);
    assertQuiet();
  });
}

test('a file that cannot be read changes nothing and gets a sentence', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await dropFiles(page, 'main', [{ name: 'archive.zip', content: 'PK\x03\x04rest' }]);
  const said = await sentences(page);
  assert.ok(said.some((sentence) => sentence.includes('archive.zip')), said.join('\n'));
  assert.equal(await fingerprint(page), example);
  assertQuiet();
});
