/**
 * The worker: takes the compiled module as its first message, then answers
 * calls on the Rust `Workbench`.
 */
import * as Comlink from 'comlink';

import { initSync, Workbench } from '../shared/generated/eigenledger';

self.addEventListener(
  'message',
  (event: MessageEvent<WebAssembly.Module>) => {
    try {
      initSync({ module: event.data });
      Comlink.expose(new Workbench());
      self.postMessage('ready');
    } catch (reason) {
      self.postMessage(reason instanceof Error ? reason.message : String(reason));
    }
  },
  { once: true },
);
