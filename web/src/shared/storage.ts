/** The last problem, kept in the browser's own database across reloads. */
import { effect } from '@preact/signals';
import { get, set } from 'idb-keyval';

import type { ProblemDocument } from './generated/eigenledger';
import { sheet } from './store';

const KEY = 'last-problem';
const WRITE_PAUSE_MS = 400;

/** The document left last time, or null when there is none or storage is closed to us. */
export async function lastProblem(): Promise<ProblemDocument | null> {
  try {
    return (await get<ProblemDocument>(KEY)) ?? null;
  } catch {
    // Private windows and some file:// pages have no storage; the page works without.
    return null;
  }
}

/** Keeps the document from now on. */
export function keepDocument(): void {
  let timer: ReturnType<typeof setTimeout> | undefined;
  const write = () => {
    clearTimeout(timer);
    timer = undefined;
    set(KEY, sheet.value.value).catch(() => undefined);
  };
  effect(() => {
    if (sheet.value.revision === 0) return;
    clearTimeout(timer);
    timer = setTimeout(write, WRITE_PAUSE_MS);
  });
  addEventListener('pagehide', () => {
    if (timer !== undefined) write();
  });
}
