/** Models and results as plain values that cross a thread boundary by structured cloning, and back. */
import { Operator } from '../algebra/operator.ts';
import type { Word } from '../algebra/word.ts';
import { Chain } from '../lattice/chain.ts';
import { type Hamiltonian, hamiltonianOf } from '../model/hamiltonian.ts';
import type { Charge } from './result.ts';
import type { SectorCharges } from './search.ts';

/** An operator without its class. */
export interface PlainOperator {
  readonly numerators: ReadonlyMap<Word, bigint>;
  readonly denominator: bigint;
}

export interface PlainModel {
  readonly cell: number;
  readonly density: PlainOperator;
}

export interface PlainPart extends Omit<SectorCharges, 'charges'> {
  readonly charges: readonly (Omit<Charge, 'density'> & { readonly density: PlainOperator })[];
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

export function plainPart({ charges, primes }: SectorCharges): PlainPart {
  return { primes, charges: charges.map((q) => ({ ...q, density: plain(q.density) })) };
}

export function partOf({ charges, primes }: PlainPart): SectorCharges {
  return { primes, charges: charges.map((q) => ({ ...q, density: operator(q.density) })) };
}
