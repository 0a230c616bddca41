/**
 * From a solution to its proof. The quick proof follows every solution; the
 * tight one follows by itself where it is cheap, the deep one on request.
 */
import { computed, effect, signal } from '@preact/signals';

import type { ExactAnswer, ProofView } from './generated/eigenledger';
import { retryWork } from './pipeline';
import { type Dated, latestSolution, reportTrouble, sheet, work } from './store';
import { callback, Ended, endWorker, type RemoteWorkbench, withWorkbench } from './worker';

/** Up to this order the tight proof takes a fraction of a second. */
const LARGEST_ORDER_TIGHT_BY_ITSELF = 120;

/** The latest proof; may lag behind the document. */
export const latestProof = signal<Dated<ProofView> | null>(null);

/** What the exact road found, or why it is closed. */
export const latestExact = signal<Dated<ExactAnswer> | null>(null);

/** Whether a proof is under way, and which. */
export const proving = signal<string | null>(null);

/** The proof of the solution on show, outdated or not. */
export const proof = computed<ProofView | null>(() =>
  latestProof.value?.revision === latestSolution.value?.revision ? (latestProof.value?.value ?? null) : null,
);

/** The exact results of the solution on show. */
export const exact = computed<ExactAnswer | null>(() =>
  latestExact.value?.revision === latestSolution.value?.revision ? (latestExact.value?.value ?? null) : null,
);

/** Names the state that figures on the page depend on. */
export const figuresKey = computed(() => {
  const solved = latestSolution.value;
  if (solved === null) return null;
  const level = latestProof.value?.revision === solved.revision ? latestProof.value.value.key : 'none';
  return `${String(solved.revision)} ${level}`;
});

async function under<T>(name: string, use: (bench: RemoteWorkbench) => Promise<T>): Promise<T | undefined> {
  proving.value = name;
  try {
    return await withWorkbench(use);
  } catch (reason) {
    if (!(reason instanceof Ended)) reportTrouble(reason);
    return undefined;
  } finally {
    proving.value = null;
  }
}

/** A report may arrive after the answer it belongs to: then no proof is under way. */
function progress(revision: number) {
  return callback((stage: string, done: number) => {
    if (proving.value !== null && sheet.value.revision === revision) work.value = { state: 'busy', stage, done };
  });
}

function settle(revision: number): void {
  if (sheet.value.revision === revision && work.value.state === 'busy') work.value = { state: 'idle' };
}

/** Proves at a level; `digits` counts for the deep one alone. */
export async function requestProof(level: 'quick' | 'tight' | 'deep', digits = 0): Promise<void> {
  const solved = latestSolution.value;
  if (solved === null || solved.revision !== sheet.value.revision) return;
  const { revision } = solved;
  const found = await under(`${level} proof`, (bench) => bench.prove(level, digits, progress(revision)));
  settle(revision);
  if (found !== undefined) latestProof.value = { revision, value: found };
}

/** Takes the exact road. */
export async function requestExact(beyondDefault: boolean): Promise<void> {
  const solved = latestSolution.value;
  if (solved === null || solved.revision !== sheet.value.revision) return;
  const { revision } = solved;
  const found = await under('exact road', async (bench) => await bench.exact(beyondDefault, progress(revision)));
  settle(revision);
  if (found !== undefined) latestExact.value = { revision, value: found };
}

/** Gives up the proof under way. Its worker is ended, so the run is made again. */
export async function cancelProof(): Promise<void> {
  await endWorker();
  retryWork();
}

/** Follows the solutions from now on. */
export function followSolutions(): void {
  let followed = -1;
  effect(() => {
    const solved = latestSolution.value;
    if (solved === null || solved.revision === followed) return;
    followed = solved.revision;
    if (solved.value.trouble !== undefined) return;
    void proveInTurn(solved.value.order);
  });
  // A proof of an earlier text is of no use to anyone.
  effect(() => {
    if (sheet.value.revision !== latestSolution.peek()?.revision && proving.peek() !== null) {
      endWorker().catch(reportTrouble);
    }
  });
}

/** Time for the sections to ask for their figures before the worker is taken. */
const HEAD_START_MS = 40;

async function proveInTurn(order: number): Promise<void> {
  await new Promise((resolve) => { setTimeout(resolve, HEAD_START_MS); });
  await requestProof('quick');
  if (order <= LARGEST_ORDER_TIGHT_BY_ITSELF) await requestProof('tight');
}
