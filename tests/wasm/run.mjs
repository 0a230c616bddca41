/**
 * Runs the crate's unit tests as wasm: `node run.mjs GLUE.js [FILTER]`.
 *
 * GLUE.js is what wasm-bindgen wrote for the test module, target `web`. A test
 * that traps leaves its instance in an unknown state, so the next one gets a
 * fresh instance: the glue is imported again under another query.
 */
import { readFile } from 'node:fs/promises';
import { pathToFileURL } from 'node:url';

const [gluePath, filter = ''] = process.argv.slice(2);
if (gluePath === undefined) throw new Error('usage: node run.mjs GLUE.js [FILTER]');

const glueUrl = pathToFileURL(gluePath).href;
const module = await WebAssembly.compile(await readFile(gluePath.replace(/\.js$/, '_bg.wasm')));

/** A test slower than this is named, since the whole run has to stay short. */
const SLOW_MILLISECONDS = 5000;

let messages = [];
globalThis.harnessReport = (text) => messages.push(text);

let instances = 0;
async function freshInstance() {
  instances += 1;
  const glue = await import(`${glueUrl}?instance=${String(instances)}`);
  glue.initSync({ module });
  return glue;
}

let harness = await freshInstance();
const count = harness.harnessCount();
let passed = 0;
let skipped = 0;
const failures = [];

for (let index = 0; index < count; index += 1) {
  const name = harness.harnessName(index);
  const expects = harness.harnessExpects(index);
  if (expects === 'ignore' || !name.includes(filter)) {
    skipped += 1;
    continue;
  }
  messages = [];
  const started = performance.now();
  let ended;
  try {
    ended = harness.harnessRun(index) ? 'return' : 'error';
  } catch (reason) {
    ended = 'panic';
    messages.push(String(reason));
    harness = await freshInstance();
  }
  const elapsed = performance.now() - started;
  if (elapsed > SLOW_MILLISECONDS) console.log(`slow: ${name} took ${(elapsed / 1000).toFixed(1)} s`);
  if (ended === expects) {
    passed += 1;
  } else {
    failures.push(name);
    console.log(`FAILED ${name}: expected ${expects}, got ${ended}\n${messages.join('\n')}`);
  }
}

if (count === 0) {
  console.log('FAILED: the module holds no tests');
  failures.push('no tests');
}
console.log(`${String(passed)} passed, ${String(failures.length)} failed, ${String(skipped)} skipped`);
process.exitCode = failures.length === 0 ? 0 : 1;
