/**
 * Where the worker's script and the wasm module come from. Served, they are
 * files beside the page. In the single file they are embedded elements, and the
 * worker is a classic one made from a blob, which runs at a file:// address in
 * every engine (a module worker from a blob does not).
 */
import moduleUrl from './generated/eigenledger_bg.wasm?url';

const EMBEDDED_WORKER = 'embedded-worker';
const EMBEDDED_MODULE = 'embedded-module';

function embedded(id: string): string | null {
  return document.getElementById(id)?.textContent ?? null;
}

function bytesFromBase64(text: string): Uint8Array<ArrayBuffer> {
  const binary = atob(text.trim());
  const bytes = new Uint8Array(binary.length);
  for (let i = 0; i < binary.length; i += 1) bytes[i] = binary.charCodeAt(i);
  return bytes;
}

async function compile(): Promise<WebAssembly.Module> {
  const base64 = embedded(EMBEDDED_MODULE);
  if (base64 !== null) {
    const packed = new Blob([bytesFromBase64(base64)]).stream();
    const module = new Response(packed.pipeThrough(new DecompressionStream('gzip')));
    return WebAssembly.compile(await module.arrayBuffer());
  }
  const response = await fetch(moduleUrl);
  if (!response.ok) throw new Error(`The module could not be loaded (${String(response.status)}).`);
  if (response.headers.get('content-type')?.startsWith('application/wasm')) {
    return WebAssembly.compileStreaming(response);
  }
  return WebAssembly.compile(await response.arrayBuffer());
}

let compiled: Promise<WebAssembly.Module> | null = null;

/** The module, compiled once a page; every worker gets the same one. */
export function compiledModule(): Promise<WebAssembly.Module> {
  compiled ??= compile().catch((reason: unknown) => {
    compiled = null;
    throw reason;
  });
  return compiled;
}

let workerUrl: string | null = null;

/** A fresh worker, waiting for the module as its first message. */
export function startWorker(): Worker {
  const source = embedded(EMBEDDED_WORKER);
  if (source !== null) {
    // Kept for the life of the page: the next worker needs it again.
    workerUrl ??= URL.createObjectURL(new Blob([source], { type: 'text/javascript' }));
    return new Worker(workerUrl);
  }
  return new Worker(new URL('../worker/main.ts', import.meta.url), { type: 'module' });
}
