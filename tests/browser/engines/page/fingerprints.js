/**
 * In the page: opens, solves and proves every file that `names.txt` lists with
 * the module as shipped, and leaves what it found, as a text, in
 * `document.body.dataset.outcome`.
 */
import init, { Workbench } from './eigenledger.js';

async function digest(text) {
  const bytes = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(text));
  return Array.from(new Uint8Array(bytes), (byte) => byte.toString(16).padStart(2, '0')).join('');
}

/** The fingerprint of the run, and the digest of the certificate with the bounds. */
async function found(bench, name) {
  const file = await (await fetch(`./${name}`)).arrayBuffer();
  const opened = bench.open_file(new Uint8Array(file), name);
  if (opened.outcome !== 'document') return `not a document: ${opened.reason}`;
  if (!bench.read(opened.document).ready) return 'not ready to be solved';
  const { fingerprint, trouble } = bench.solve(() => undefined);
  if (trouble !== undefined) return trouble;
  bench.prove('tight', 0, () => undefined);
  return `${fingerprint}\t${await digest(bench.certificate().text)}`;
}

async function outcome() {
  await init({ module_or_path: new URL('./eigenledger_bg.wasm', import.meta.url) });
  const names = (await (await fetch('./names.txt')).text()).trim().split('\n');
  const bench = new Workbench();
  const results = {};
  for (const name of names) results[name] = await found(bench, name);
  return { results };
}

const said = await outcome().catch((reason) => ({ failure: String(reason) }));
document.body.dataset.outcome = JSON.stringify(said);
