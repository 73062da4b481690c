/**
 * The equations of a family: which candidate meets which output through which term. The pattern belongs to the terms alone, so it
 * is assembled once, from a stand-in with the numbers of the terms for couplings, and serves every case.
 */
import { Operator } from '../../algebra/operator.ts';
import type { Word } from '../../algebra/word.ts';
import type { Family } from '../../model/formula.ts';
import { hamiltonianOf } from '../../model/hamiltonian.ts';
import { assemble, cellsOf } from '../../search/assemble.ts';

export interface FamilyEquations {
  readonly range: number;
  /** Candidates by column: falling range, then alphabetical. */
  readonly strings: readonly Word[];
  readonly rangeOf: Uint8Array;
  readonly rows: number;
  /** Row i is the stretch start[i] … start[i + 1]. */
  readonly start: Uint32Array;
  readonly column: Uint32Array;
  /** ±(t + 1): the coefficient is plus or minus that of term t. */
  readonly term: Int16Array;
}

/** Cost and memory: candidates × terms × range. */
export function familyEquations(family: Family, range: number): FamilyEquations {
  const standIn = hamiltonianOf(
    family.chain,
    Operator.fromIntegers(family.terms.map(([word], t) => [word, BigInt(t + 1)] as const)),
  );
  // A common factor of the numbers would be divided out: one term alone would not keep its number, but it is 1 already.
  const packed: number[] = [];
  const cellBits = 2 * family.chain.cell;
  const first = 2 ** cellBits;
  for (let string = 1; string < first ** range; string++) if (string % first !== 0) packed.push(string);
  const { strings, matrix } = assemble(standIn, Float64Array.from(packed), range);
  return {
    range,
    strings: Array.from(strings, BigInt),
    rangeOf: Uint8Array.from(strings, (s) => cellsOf(s, cellBits)),
    rows: matrix.rows,
    start: matrix.start,
    column: matrix.column,
    term: Int16Array.from(matrix.value, (v) => Number(matrix.values[v])),
  };
}
