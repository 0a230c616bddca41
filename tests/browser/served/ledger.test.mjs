/** Stepping through the ledger by keyboard, and what stands in it before the first reflector. */
import assert from 'node:assert/strict';
import { after, before, test } from 'node:test';

import { openPage, pasteMatrix, solved, startBrowser } from '../harness.mjs';

let browser;
before(async () => { browser = await startBrowser(); });
after(() => browser.close());

const heading = (page) => page.locator('.entry-panel h3');

/** Number and words of the entry on show, once it is another than before. */
async function entry(page, number) {
  await heading(page).filter({ hasText: new RegExp(`^Entry ${String(number)}:`) }).waitFor();
  return (await heading(page).textContent())?.trim() ?? '';
}

const state = (page) => page.locator('.entry-panel .state').innerText();

test('the ledger steps by keyboard, and the state follows', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '4 1 2 0\n1 3 0 1\n2 0 5 1\n0 1 1 2');
  await solved(page, example);
  const list = page.getByRole('listbox', { name: 'Entries of the ledger' });
  await list.focus();
  await page.keyboard.press('Home');
  await entry(page, 1);
  const first = await state(page);
  await page.keyboard.press('ArrowDown');
  assert.match(await entry(page, 2), /reflector 1/);
  const reflected = await state(page);
  assert.notEqual(reflected, first, 'the state after the reflector is that before it');
  await page.keyboard.press('d');
  await heading(page).filter({ hasText: 'deflation' }).waitFor();
  const deflated = (await heading(page).textContent()) ?? '';
  assert.notEqual(await state(page), reflected);
  await page.keyboard.press('d');
  await page.waitForFunction((before) => document.querySelector('.entry-panel h3')?.textContent !== before, deflated);
  assert.match((await heading(page).textContent()) ?? '', /deflation/);
  await page.keyboard.press('Shift+D');
  await page.waitForFunction((before) => document.querySelector('.entry-panel h3')?.textContent === before, deflated);
  await page.keyboard.press('Home');
  await entry(page, 1);
  assert.equal(await state(page), first, 'the way back gives the same state');
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('ArrowDown');
  await page.keyboard.press('ArrowUp');
  await entry(page, 2);
  assert.equal(await state(page), reflected);
  const number = page.locator('.ledger-list input[type=number]');
  await number.fill('3');
  await number.press('Enter');
  await entry(page, 3);
  assertQuiet();
});

test('a repaired asymmetry is entered before the first reflector', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await pasteMatrix(page, '4 1 2\n3 3 0\n2 0 5');
  await page.getByRole('button', { name: 'take the mean of both' }).click();
  await solved(page, example);
  const rows = page.locator('.entry-row .words');
  await page.getByRole('listbox', { name: 'Entries of the ledger' }).focus();
  await page.keyboard.press('Home');
  await entry(page, 1);
  const words = await rows.allTextContents();
  const adjusted = words.findIndex((text) => /disagreed.*mean/.test(text));
  const reflected = words.findIndex((text) => text.startsWith('reflector'));
  assert.ok(adjusted >= 0 && adjusted < reflected, words.join('\n'));
  assertQuiet();
});

test('the Cholesky step of a pair is entered before the first reflector', async () => {
  const { page, assertQuiet } = await openPage(browser);
  const example = await solved(page);
  await page.locator('.examples select').selectOption('3-mast-modes');
  await solved(page, example);
  await page.getByRole('listbox', { name: 'Entries of the ledger' }).focus();
  await page.keyboard.press('Home');
  await entry(page, 1);
  const words = await page.locator('.entry-row .words').allTextContents();
  const factored = words.findIndex((text) => text.startsWith('Cholesky'));
  const reflected = words.findIndex((text) => text.startsWith('reflector'));
  assert.ok(factored >= 0 && factored < reflected, words.join('\n'));
  assertQuiet();
});
