/** The sections of the sheet, in the order of the work. */
import type { ComponentType } from 'preact';

import { Problem } from './problem/problem';

export interface SectionEntry {
  readonly id: string;
  readonly heading: string;
  readonly component: ComponentType;
  /** Whether its figures follow from the solution and fade when that is outdated. */
  readonly derived: boolean;
}

export const sections: readonly SectionEntry[] = [
  { id: 'problem', heading: 'Problem', component: Problem, derived: false },
];
