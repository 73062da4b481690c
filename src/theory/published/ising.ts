import { CONSERVATION_LAWS, MIXED_ISING } from '../../model/catalogue/sources.ts';
import type { PublishedTheorem } from '../citations.ts';

/** The program proves both by itself, through half steps; the entries let the two be compared. */
export const mixedFieldIsing: PublishedTheorem = {
  id: 'mixed-field-ising',
  conclusion: 'Only H and the identity, up to half the system.',
  hypotheses: 'H = J ZZ + g X + h Z with all three couplings not zero, after renaming axes.',
  source: MIXED_ISING,
  basis: 'seen',
  cell: 1,
  terms: [
    { word: 'ZZ', coupling: 'J' },
    { word: 'X', coupling: 'g' },
    { word: 'Z', coupling: 'h' },
  ],
  condition: ({ J = 0n, g = 0n, h = 0n }) => J !== 0n && g !== 0n && h !== 0n,
  verdict: 'none',
  from: 3,
};

export const transverseFieldIsing: PublishedTheorem = {
  id: 'transverse-field-ising',
  conclusion: 'Integrable: two explicit charges of every range from 2 on.',
  hypotheses: 'H = J ZZ + g X with both couplings not zero, after renaming axes.',
  source: CONSERVATION_LAWS,
  basis: 'seen',
  cell: 1,
  terms: [
    { word: 'ZZ', coupling: 'J' },
    { word: 'X', coupling: 'g' },
  ],
  condition: ({ J = 0n, g = 0n }) => J !== 0n && g !== 0n,
  verdict: 'integrable',
};
