/**
 * Many problems at once: a few workers take turns at a batch.
 *
 * A worker takes the next few problems when it has finished the last ones, so
 * none waits for a slower one. Each result stands where its problem stood, and
 * holds the same bits whatever the number of workers: every problem is solved
 * by one thread alone.
 */
import type { ProblemDocument } from '../shared/generated/eigenledger';
import { openStation, type RemoteWorkbench } from './open';
import type { BatchResult } from './station';

export type { BatchResult } from './station';

/** Problems handed over at a time: enough that the hand-over costs little, few enough to share out evenly. */
const HANDFUL = 16;

export interface Pool {
  /**
   * Solves every problem; `limit` is the most digits of a figure, 0 for all
   * there are. `report` hears how many are done. One batch at a time.
   *
   * @throws if a worker fails; the pool is then of no more use.
   */
  readonly solve: (
    documents: readonly ProblemDocument[],
    limit?: number,
    report?: (done: number) => void,
  ) => Promise<BatchResult[]>;
  /** Ends the workers; a batch under way is given up. */
  readonly end: () => void;
}

/** Starts a pool of `size` workers, all on one compiled module. */
export async function startPool(module: WebAssembly.Module, startWorker: () => Worker, size: number): Promise<Pool> {
  const workers = Array.from({ length: size }, startWorker);
  const end = () => {
    for (const worker of workers) worker.terminate();
    giveUp(new Error('The pool was ended.'));
  };
  let giveUp: (reason: Error) => void = () => undefined;
  const givenUp = new Promise<never>((_, reject) => {
    giveUp = reject;
  });
  // Nobody may be waiting when the pool is ended.
  givenUp.catch(() => undefined);
  for (const worker of workers) {
    worker.addEventListener('error', (event) => giveUp(new Error(event.message || 'A worker stopped.')));
  }
  try {
    const stations = await Promise.all(workers.map((worker) => openStation(worker, module)));
    const solve: Pool['solve'] = (documents, limit = 0, report = () => undefined) =>
      Promise.race([shareOut(stations, documents, limit, report), givenUp]);
    return { solve, end };
  } catch (reason) {
    end();
    throw reason;
  }
}

async function shareOut(
  stations: readonly RemoteWorkbench[],
  documents: readonly ProblemDocument[],
  limit: number,
  report: (done: number) => void,
): Promise<BatchResult[]> {
  const results = new Array<BatchResult>(documents.length);
  let next = 0;
  let done = 0;
  const serve = async (station: RemoteWorkbench) => {
    while (next < documents.length) {
      const first = next;
      next += HANDFUL;
      const found = await station.solveAll(documents.slice(first, next), limit);
      found.forEach((result, place) => {
        results[first + place] = result;
      });
      done += found.length;
      report(done);
    }
  };
  await Promise.all(stations.map(serve));
  return results;
}
