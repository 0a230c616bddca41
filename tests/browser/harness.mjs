/**
 * Opens the page in headless Chromium as a person would, and watches it: an
 * error on the console, a broken policy or a request for anything but the
 * page's own files fails the scenario.
 */
import assert from 'node:assert/strict';

import { chromium } from 'playwright-core';

const { CHROMIUM: executablePath, PAGE_ADDRESS: address } = process.env;
if (executablePath === undefined || address === undefined) {
  throw new Error('CHROMIUM and PAGE_ADDRESS must be set: run `cargo page test browser`.');
}

/** The address under test. */
export const pageAddress = address;

/** Slow machines are not wrong: a scenario waits this long for a result. */
export const PATIENCE_MS = 30_000;

const QUIET = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

/** A running browser; close it after the file's scenarios. */
export function startBrowser() {
  return chromium.launch({ executablePath, headless: true, args: QUIET });
}

/**
 * A page in a profile of its own, opened at the address under test.
 *
 * @returns the page, and `assertQuiet`, which fails on anything it complained of.
 */
export async function openPage(browser, { fragment = '', colorScheme = 'light', viewport } = {}) {
  const context = await browser.newContext({ colorScheme, acceptDownloads: true, ...(viewport && { viewport }) });
  const page = await context.newPage();
  page.setDefaultTimeout(PATIENCE_MS);
  const complaints = [];
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(`console: ${message.text()}`);
  });
  page.on('pageerror', (error) => complaints.push(`uncaught: ${error.message}`));
  const own = new URL('.', pageAddress).href;
  page.on('request', (request) => {
    const url = request.url();
    const allowed = url.startsWith(own) || url.startsWith('blob:') || url.startsWith('data:');
    if (!allowed) complaints.push(`request: ${url.slice(0, 200)}`);
  });
  await page.goto(pageAddress + fragment);
  return {
    page,
    context,
    assertQuiet: () => assert.deepEqual(complaints, [], 'the page complained or asked for something else'),
  };
}

/** The editor of the matrix. */
export const matrixEditor = (page) => page.getByRole('textbox', { name: 'The matrix', exact: true });

/** Pastes a text over whatever the matrix editor holds. */
export async function pasteMatrix(page, text) {
  const editor = matrixEditor(page);
  await editor.click();
  await page.keyboard.press('Control+a');
  await editor.evaluate((element, pasted) => {
    const clipboardData = new DataTransfer();
    clipboardData.setData('text/plain', pasted);
    element.dispatchEvent(new ClipboardEvent('paste', { clipboardData, bubbles: true, cancelable: true }));
  }, text);
}

/** The figure under a heading of the foot line, as text. */
export async function footFigure(page, heading) {
  const group = page.locator('.foot-line dl > div', { has: page.locator('dt', { hasText: heading }) });
  return (await group.locator('dd').textContent())?.trim() ?? '';
}

/** The whole fingerprint, or nothing while there is none. */
export async function fingerprint(page) {
  const group = page.locator('.foot-line dl > div', { has: page.locator('dt', { hasText: 'fingerprint' }) });
  return (await group.locator('dd').getAttribute('title')) ?? '';
}

/** Waits until the page has solved what it shows; returns the fingerprint. */
export async function solved(page, before = '') {
  await page.waitForFunction(
    (old) => {
      const title = [...document.querySelectorAll('.foot-line dd')].map((dd) => dd.getAttribute('title') ?? '');
      const print = title.find((text) => /^[0-9a-f ]{32,}$/.test(text)) ?? '';
      return print !== '' && print !== old && document.querySelector('.foot-line progress') === null;
    },
    before,
    { timeout: PATIENCE_MS },
  );
  return fingerprint(page);
}

/** Waits until something is said about the text: a finding or a notice. */
export async function sentences(page) {
  const said = page.locator('.findings .sentence, .question legend, .notice span');
  await said.first().waitFor({ timeout: PATIENCE_MS });
  return (await said.allTextContents()).map((text) => text.trim());
}

/** The eigenvalues as the page prints them, the uncertain last digit included. */
async function printedValues(page) {
  const figures = await page.locator('#eigenpairs .value .digits.aligned').allTextContents();
  return figures.map((figure) => figure.trim().replace('\u2212', '-').replace(/\(\d+\)/, ''));
}

/**
 * Waits until the page prints these eigenvalues, each to the digits it prints.
 *
 * At least six significant digits are asked for: they tell these values apart.
 */
export async function assertValues(page, expected) {
  const agree = (printed) =>
    printed.length === expected.length &&
    printed.every((text, index) => {
      const scale = Math.max(Math.abs(expected[index]), 1);
      return text !== '' && Math.abs(Number(text) - expected[index]) <= 1e-6 * scale;
    });
  const deadline = Date.now() + PATIENCE_MS;
  let printed = await printedValues(page);
  while (!agree(printed) && Date.now() < deadline) {
    await page.waitForTimeout(100);
    printed = await printedValues(page);
  }
  assert.ok(agree(printed), `expected ${expected.join(', ')}, the page prints ${printed.join(', ')}`);
}

/** Drops files on an element as a person would with the mouse; contents are buffers or text. */
export async function dropFiles(page, target, files) {
  const packed = files.map(({ name, content }) => ({ name, base64: Buffer.from(content).toString('base64') }));
  await page.locator(target).evaluate((element, list) => {
    const dataTransfer = new DataTransfer();
    for (const { name, base64 } of list) {
      const bytes = Uint8Array.from(atob(base64), (letter) => letter.charCodeAt(0));
      dataTransfer.items.add(new File([bytes], name));
    }
    for (const type of ['dragover', 'drop']) {
      element.dispatchEvent(new DragEvent(type, { dataTransfer, bubbles: true, cancelable: true }));
    }
  }, packed);
}

/** A .npy file (NumPy Enhancement Proposal 1, version 1.0) of doubles, row by row. */
export function npyFile(shape, values) {
  const sizes = shape.map((size) => `${String(size)},`).join(' ');
  const header = `{'descr': '<f8', 'fortran_order': False, 'shape': (${sizes}), }\n`;
  const bytes = Buffer.alloc(10 + header.length + 8 * values.length);
  bytes.write('\x93NUMPY\x01\x00', 'latin1');
  bytes.writeUInt16LE(header.length, 8);
  bytes.write(header, 10, 'latin1');
  values.forEach((value, place) => bytes.writeDoubleLE(value, 10 + header.length + 8 * place));
  return bytes;
}
