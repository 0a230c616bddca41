/**
 * What the sections share. One-way: the document is what was typed; the
 * reading and the solution follow from it in the worker and carry the
 * revision of the document they belong to.
 */
import { computed, signal } from '@preact/signals';

import type { ProblemDocument, Reading, Solution } from './generated/eigenledger';

/** A result together with the revision of the document it was made from. */
export interface Dated<T> {
  readonly revision: number;
  readonly value: T;
}

/** A document without anything in it. */
export const EMPTY_DOCUMENT: ProblemDocument = {
  title: '',
  notes: '',
  matrix: '',
  parameters: [],
  choices: {},
  claims: [],
};

/** The document on the page and its revision, which every change of the problem in it raises. */
export const sheet = signal<Dated<ProblemDocument>>({
  revision: 0,
  value: EMPTY_DOCUMENT,
});

/** The latest reading; may lag behind the document. */
export const latestReading = signal<Dated<Reading> | null>(null);

/** The latest solution; may lag behind the document. */
export const latestSolution = signal<Dated<Solution> | null>(null);

/** The reading of the document as it stands, or null while it is being read. */
export const reading = computed<Reading | null>(() =>
  latestReading.value?.revision === sheet.value.revision ? latestReading.value.value : null,
);

/** The solution of the document as it stands, or null: never an outdated one. */
export const solution = computed<Solution | null>(() =>
  latestSolution.value?.revision === sheet.value.revision ? latestSolution.value.value : null,
);

/** Whether figures on show belong to an earlier text. */
export const outdated = computed(
  () => latestSolution.value !== null && latestSolution.value.revision !== sheet.value.revision,
);

/** What the worker is doing. */
export type Work =
  | { readonly state: 'starting' }
  | { readonly state: 'idle' }
  | { readonly state: 'busy'; readonly stage: string; readonly done: number }
  | { readonly state: 'cancelled' }
  | { readonly state: 'failed'; readonly reason: string };

export const work = signal<Work>({ state: 'starting' });

/** A sentence to the person, shown until dismissed or replaced. */
export interface Notice {
  readonly tone: 'information' | 'trouble';
  readonly text: string;
  /** Something to do about it, as a button. */
  readonly action?: { readonly label: string; readonly run: () => void };
}

export const notice = signal<Notice | null>(null);

/** Says something went wrong, in a sentence. */
export function reportTrouble(reason: unknown): void {
  notice.value = { tone: 'trouble', text: reason instanceof Error ? reason.message : String(reason) };
}

/** What is picked out across sections: an eigenvalue and a ledger entry, from 0. */
export const chosenEigenvalue = signal<number | null>(null);
export const chosenEntry = signal<number | null>(null);

/** Digits to show: all that are proven, or at most so many. */
export const digits = signal<'proven' | number>('proven');

/** Replaces the document; everything derived from the old one is outdated at once. */
export function replaceDocument(value: ProblemDocument): void {
  sheet.value = { revision: sheet.value.revision + 1, value };
  chosenEigenvalue.value = null;
  chosenEntry.value = null;
}

/** Replaces the document at someone's wish, with a way back to the former one. */
export function openDocument(value: ProblemDocument, said: string): void {
  const before = sheet.value.value;
  replaceDocument(value);
  if (before.matrix.trim() === '') {
    notice.value = null;
    return;
  }
  const run = () => {
    replaceDocument(before);
    notice.value = null;
  };
  notice.value = { tone: 'information', text: said, action: { label: 'bring back the one before', run } };
}

/** Fields that change no figure of the problem: nothing is outdated by them. */
const BESIDE_THE_PROBLEM: readonly string[] = ['title', 'notes', 'claims'] satisfies (keyof ProblemDocument)[];

/** Changes some fields of the document. */
export function changeDocument(change: Partial<ProblemDocument>): void {
  const { revision, value } = sheet.value;
  const next = { ...value, ...change };
  if (Object.keys(change).every((field) => BESIDE_THE_PROBLEM.includes(field))) sheet.value = { revision, value: next };
  else replaceDocument(next);
}

/** What stands beside the problem, as one text that changes with it. */
export const headingKey = computed(() => {
  const { title, notes, claims } = sheet.value.value;
  return JSON.stringify([title, notes, claims]);
});
