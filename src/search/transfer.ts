/** Models and results as plain values that cross a thread boundary by structured cloning, and back. */
import { Operator } from '../algebra/operator.ts';
import type { Rational } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';
import { Chain } from '../lattice/chain.ts';
import { type Hamiltonian, hamiltonianOf } from '../model/hamiltonian.ts';
import { type Charge, resultFrom, type SearchResult } from './result.ts';

/** An operator without its class. */
export interface PlainOperator {
  readonly numerators: ReadonlyMap<Word, bigint>;
  readonly denominator: bigint;
}

export interface PlainModel {
  readonly cell: number;
  readonly density: PlainOperator;
}

export interface PlainResult extends Omit<SearchResult, 'hamiltonian' | 'charges' | 'expansionOfH'> {
  readonly charges: readonly (Omit<Charge, 'density'> & { readonly density: PlainOperator })[];
  readonly expansionOfH: readonly Rational[] | null;
}

function plain({ numerators, denominator }: Operator): PlainOperator {
  return { numerators, denominator };
}

function operator({ numerators, denominator }: PlainOperator): Operator {
  return Operator.fromIntegers(numerators, denominator);
}

export function plainModel(h: Hamiltonian): PlainModel {
  return { cell: h.chain.cell, density: plain(h.density) };
}

export function modelOf({ cell, density }: PlainModel): Hamiltonian {
  return hamiltonianOf(new Chain(cell), operator(density));
}

export function plainResult({ hamiltonian: _, ...result }: SearchResult): PlainResult {
  return { ...result, charges: result.charges.map((q) => ({ ...q, density: plain(q.density) })) };
}

/** @param hamiltonian the model that was searched */
export function resultOf(hamiltonian: Hamiltonian, data: PlainResult): SearchResult {
  return resultFrom({
    ...data,
    hamiltonian,
    charges: data.charges.map((q) => ({ ...q, density: operator(q.density) })),
  });
}
