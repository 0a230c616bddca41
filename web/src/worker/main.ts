/**
 * The worker: takes the compiled module as its first message, then answers
 * calls on a `Station`.
 */
import * as Comlink from 'comlink';

import { initSync } from '../shared/generated/eigenledger';
import { Station } from './station';

self.addEventListener(
  'message',
  (event: MessageEvent<WebAssembly.Module>) => {
    try {
      initSync({ module: event.data });
      Comlink.expose(new Station());
      self.postMessage('ready');
    } catch (reason) {
      self.postMessage(reason instanceof Error ? reason.message : String(reason));
    }
  },
  { once: true },
);
