/** A worker and its page find each other. */
import * as Comlink from 'comlink';

import type { Station } from './station';

export type RemoteWorkbench = Comlink.Remote<Station>;

/** Hands a fresh worker its module; the station answers from then on. */
export async function openStation(worker: Worker, module: WebAssembly.Module): Promise<RemoteWorkbench> {
  const ready = new Promise<void>((resolve, reject) => {
    worker.addEventListener('message', (event) => {
      if (event.data === 'ready') resolve();
      else reject(new Error(String(event.data)));
    }, { once: true });
    worker.addEventListener('error', (event) => {
      reject(new Error(event.message || 'The worker could not be started.'));
    });
  });
  worker.postMessage(module);
  await ready;
  return Comlink.wrap<Station>(worker);
}
