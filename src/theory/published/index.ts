/** The registry of published theorems, in the order in which they are tried. */
import type { PublishedTheorem } from '../citations.ts';
import { mixedFieldIsing, transverseFieldIsing } from './ising.ts';
import { zigzagClassical, zigzagIntegrable, zigzagOther } from './zigzag.ts';

export const PUBLISHED: readonly PublishedTheorem[] = [
  mixedFieldIsing,
  transverseFieldIsing,
  zigzagIntegrable,
  zigzagClassical,
  zigzagOther,
];
