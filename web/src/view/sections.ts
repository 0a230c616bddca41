/** The sections of the sheet, in the order of the work. */
import type { ComponentType } from 'preact';

import { Claims } from './claims/claims';
import { Eigenpairs } from './eigenpairs/eigenpairs';
import { Problem } from './problem/problem';
import { Proof } from './proof/proof';
import { Sheet } from './sheet/sheet';
import { Working } from './working/working';

export interface SectionEntry {
  readonly id: string;
  readonly heading: string;
  readonly component: ComponentType;
  /** Whether its figures follow from the solution and fade when that is outdated. */
  readonly derived: boolean;
}

export const sections: readonly SectionEntry[] = [
  { id: 'problem', heading: 'Problem', component: Problem, derived: false },
  { id: 'working', heading: 'Working', component: Working, derived: true },
  { id: 'eigenpairs', heading: 'Eigenpairs', component: Eigenpairs, derived: true },
  { id: 'proof', heading: 'Proof', component: Proof, derived: true },
  { id: 'claims', heading: 'Claims', component: Claims, derived: true },
  { id: 'sheet', heading: 'Sheet', component: Sheet, derived: true },
];
