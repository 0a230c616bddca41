/** From navigation to the first eigenvalues of the example a first visit opens on. */

/** Runs in the page before any script of it. */
function watchForValues() {
  const found = () => (document.querySelector('#eigenpairs .value .digits')?.textContent ?? '').trim() !== '';
  globalThis.firstValues = new Promise((resolve) => {
    const observer = new MutationObserver(() => {
      if (!found()) return;
      observer.disconnect();
      resolve(performance.now());
    });
    observer.observe(document, { childList: true, characterData: true, subtree: true });
  });
}

/** One visit in milliseconds, in a profile that has never seen the page. */
async function visit(browser, address) {
  const context = await browser.newContext();
  try {
    const page = await context.newPage();
    await page.addInitScript(watchForValues);
    await page.goto(address, { waitUntil: 'commit' });
    return await page.evaluate(() => globalThis.firstValues);
  } finally {
    await context.close();
  }
}

/** The median over several visits. */
export async function coldStart(browser, address, visits) {
  const times = [];
  for (let count = 0; count < visits; count += 1) times.push(await visit(browser, address));
  return { milliseconds: times.toSorted((a, b) => a - b)[Math.floor(visits / 2)], visits };
}
