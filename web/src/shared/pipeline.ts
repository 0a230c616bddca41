/**
 * From a changed document to a current reading and solution.
 *
 * One run at a time. A change waits until typing pauses; if a long run is still
 * under way then, its worker is ended, since its result is outdated already.
 */
import { effect } from '@preact/signals';

import { latestReading, latestSolution, notice, type Notice, reportTrouble, sheet, work } from './store';
import { callback, Ended, endWorker, withWorkbench } from './worker';

const TYPING_PAUSE_MS = 180;

/** Rises with every run and cancel; a run whose number is past says no more. */
let turn = 0;
let running = false;
/** What the last failed run said; it goes when a run succeeds. */
let complaint: Notice | null = null;

async function run(): Promise<void> {
  turn += 1;
  const mine = turn;
  if (running) await endWorker();
  if (mine !== turn) return;
  running = true;
  const { revision, value } = sheet.value;
  const isCurrent = () => mine === turn;
  try {
    await withWorkbench(async (bench) => {
      work.value = { state: 'busy', stage: 'reading', done: 0 };
      const read = await bench.read(value);
      if (!isCurrent()) return;
      latestReading.value = { revision, value: read };
      if (read.ready) {
        const report = callback((stage: string, done: number) => {
          if (running && isCurrent()) work.value = { state: 'busy', stage, done };
        });
        const solved = await bench.solve(report);
        if (!isCurrent()) return;
        latestSolution.value = { revision, value: solved };
      }
    });
    if (!isCurrent()) return;
    work.value = { state: 'idle' };
    if (complaint !== null && notice.value === complaint) notice.value = null;
  } catch (reason) {
    if (!isCurrent() || reason instanceof Ended) return;
    work.value = { state: 'failed', reason: reason instanceof Error ? reason.message : String(reason) };
    reportTrouble(reason);
    complaint = notice.value;
  } finally {
    if (isCurrent()) running = false;
  }
}

/** Ends the run under way; the document stays as it is. */
export function cancelWork(): void {
  turn += 1;
  running = false;
  work.value = { state: 'cancelled' };
  endWorker().catch(reportTrouble);
}

/** Runs again after a cancel or a failure. */
export function retryWork(): void {
  void run();
}

/** Follows the document from now on. */
export function followDocument(): void {
  let timer: ReturnType<typeof setTimeout> | undefined;
  let first = true;
  let followed = -1;
  effect(() => {
    const { revision } = sheet.value;
    if (revision === followed) return;
    followed = revision;
    clearTimeout(timer);
    // Whatever opens first need not wait for typing to pause.
    timer = setTimeout(() => void run(), first ? 0 : TYPING_PAUSE_MS);
    first = false;
  });
}
