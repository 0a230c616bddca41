/** Claims: judged without solving again, and files of another program's output. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { dropFiles, fingerprint, npyFile, openPage, pasteMatrix, sentences, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

/** A page that has solved a matrix with eigenvalues 2 and 4. */
async function ready() {
  const opened = await openPage(browser);
  const example = await solved(opened.page);
  await pasteMatrix(opened.page, '3 1\n1 3');
  await solved(opened.page, example);
  // The proofs follow by themselves; a claim that is judged meanwhile waits for them.
  await opened.page.locator('#proof .condition').first().waitFor();
  return opened;
}

const verdicts = (page) => page.locator('#claims .claim .sentence strong');

async function claim(page, text, count) {
  await page.locator('#claims-text').fill(text);
  await page.locator('#claims').getByRole('button', { name: 'Judge' }).click();
  await verdicts(page).nth(count - 1).waitFor();
  return verdicts(page).allTextContents();
}

test('claims are judged without solving the problem again', async () => {
  const { page, assertQuiet } = await ready();
  const before = await fingerprint(page);
  await page.evaluate(() => {
    window.wasOutdated = false;
    new MutationObserver(() => {
      if (document.querySelector('section.outdated') !== null) window.wasOutdated = true;
    }).observe(document.body, { subtree: true, attributes: true, attributeFilter: ['class'] });
  });
  assert.deepEqual(await claim(page, 'eigenvalues: 2, 4\ntrace: 7\neigenvalue: 4,1', 3), ['confirmed', 'refuted', 'refuted']);
  assert.equal(await page.evaluate(() => window.wasOutdated), false, 'figures were outdated by a claim');
  assert.equal(await fingerprint(page), before);
  const sheet = page.frameLocator('#sheet iframe');
  await sheet.getByText('trace: 7').waitFor();
  assertQuiet();
});

test('a title typed changes the sheet and solves nothing', async () => {
  const { page, assertQuiet } = await ready();
  await page.getByRole('textbox', { name: 'Title' }).fill('Two springs');
  assert.equal(await page.locator('section.outdated').count(), 0);
  await page.frameLocator('#sheet iframe').getByRole('heading', { name: 'Two springs' }).waitFor();
  assertQuiet();
});

test('a title typed over the first example stays when the matrix is replaced', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  const title = page.getByRole('textbox', { name: 'Title' });
  await title.fill('Two springs');
  await pasteMatrix(page, '3 1\n1 3');
  await solved(page, example);
  assert.equal(await title.inputValue(), 'Two springs');
  assert.equal(await page.getByRole('textbox', { name: 'Notes' }).inputValue(), '', 'the example’s notes stayed');
  assertQuiet();
});

const half = Math.SQRT1_2;
const OUTPUTS = [
  ['values in an array file', [{ name: 'w.npy', content: npyFile([2], [2, 4]) }], 'confirmed'],
  [
    'values and vectors in array files',
    [{ name: 'v.npy', content: npyFile([2, 2], [-half, half, half, half]) }, { name: 'w.npy', content: npyFile([2], [2, 4]) }],
    'confirmed',
  ],
  ['a CSV file with a value that is wrong', [{ name: 'w.csv', content: '2.0,4.1\n' }], 'refuted'],
  ['a Matrix Market file', [{ name: 'w.mtx', content: '%%MatrixMarket matrix array real general\n2 1\n2\n4\n' }], 'confirmed'],
  ['a JSON file', [{ name: 'r.json', content: JSON.stringify({ values: [2, 4], vectors: [[-half, half], [half, half]] }) }], 'confirmed'],
];

for (const [name, files, word] of OUTPUTS) {
  test(`${name} dropped on the claims is ${word}`, async () => {
    const { page, assertQuiet } = await ready();
    await dropFiles(page, '#claims', files);
    await verdicts(page).first().waitFor();
    assert.deepEqual(await verdicts(page).allTextContents(), [word]);
    assert.ok((await page.locator('#claims .claim-items tbody tr').count()) >= 2, 'no digits are told');
    assert.equal(await page.locator('#claims .claim-picture').count(), 1);
    assertQuiet();
  });
}

test('a file that is no output gets a sentence, and the problem stays', async () => {
  const { page, assertQuiet } = await ready();
  const before = await fingerprint(page);
  await dropFiles(page, '#claims', [{ name: 'v.npy', content: npyFile([2, 2], [1, 0, 0, 1]) }]);
  const said = await sentences(page);
  assert.ok(said.some((sentence) => /no values/.test(sentence)), said.join('\n'));
  assert.equal(await fingerprint(page), before);
  assertQuiet();
});
