/**
 * The worker that holds the module, seen from the page.
 *
 * The remote object extends the Rust `Workbench`: a method added there can be
 * called here without another line. A long call is cancelled by ending the
 * worker; a worker that crashed is replaced. In both cases the document is
 * untouched, since the page owns it.
 */
import * as Comlink from 'comlink';

import { openStation, type RemoteWorkbench } from '../worker/open';
import { compiledModule, startWorker } from './parts';
import { work } from './store';

export type { RemoteWorkbench };

/** The call was given up because its worker was ended. */
export class Ended extends Error {
  constructor() {
    super('The work was ended before it was finished.');
    this.name = 'Ended';
  }
}

interface Running {
  readonly worker: Worker;
  readonly bench: RemoteWorkbench;
  readonly ended: Promise<never>;
  readonly end: (reason: Error) => void;
}

let running: Promise<Running> | null = null;

async function start(): Promise<Running> {
  const module = await compiledModule();
  const worker = startWorker();
  let end: (reason: Error) => void = () => undefined;
  const ended = new Promise<never>((_, reject) => {
    end = reject;
  });
  // Nobody may be waiting when the worker is ended.
  ended.catch(() => undefined);
  worker.addEventListener('error', (event) => {
    end(new Error(event.message || 'The worker stopped.'));
    running = null;
  });
  const bench = await openStation(worker, module);
  return { worker, bench, ended, end };
}

function current(): Promise<Running> {
  running ??= start().catch((reason: unknown) => {
    running = null;
    throw reason;
  });
  return running;
}

/** A trap leaves the module's memory in an unknown state: never call it again. */
function isTrap(reason: unknown): boolean {
  return reason instanceof Error && ['RuntimeError', 'RangeError', 'InternalError'].includes(reason.name);
}

/**
 * Runs one or more calls on the workbench.
 *
 * @throws Ended when the worker was ended meanwhile; otherwise what the module threw.
 */
export async function withWorkbench<T>(act: (bench: RemoteWorkbench) => Promise<T>): Promise<T> {
  const mine = await current();
  try {
    return await Promise.race([act(mine.bench), mine.ended]);
  } catch (reason) {
    if (isTrap(reason)) {
      await endWorker();
      const said = 'The module stopped on this problem and was started afresh; the problem is unchanged.';
      // What the module held is gone: the figures have to be computed again.
      work.value = { state: 'failed', reason: said };
      throw new Error(said, { cause: reason });
    }
    throw reason;
  }
}

/** Ends whatever is running. The next call starts a fresh worker. */
export async function endWorker(): Promise<void> {
  const ending = running;
  running = null;
  // A worker that never started needs no end.
  const mine = await ending?.catch(() => null);
  mine?.worker.terminate();
  mine?.end(new Ended());
}

/** A callback the module may call while it works. */
export function callback<T extends (...values: never[]) => void>(call: T): T {
  return Comlink.proxy(call);
}
