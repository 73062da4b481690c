/**
 * Conserved sectors: classes of strings that the equations do not mix.
 *
 * A function f of strings with f(T·P) = f(P) + const whenever a term T does not commute with P cuts the system into blocks that
 * share no unknown and no equation. Two kinds are found, both sums over the spins modulo 2: numbers of letters that anticommute
 * with a fixed letter, spin of the cell by spin of the cell (f(TP) = f(T) + f(P)), and the number of all Y, which is the sign
 * under transposition (f(TP) = f(T) + f(P) + 1, because TP is i times a Hermitian string). Combinations that all terms share
 * qualify. XYZ chains have 8 sectors, models with real coefficients at least 2.
 */
import { letterCounts, type Word } from '../algebra/word.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';

/** Classes of strings, as bit masks: the class of a string is the XOR over its cells. */
export interface Grading {
  /** log₂ of the number of classes. */
  readonly bits: number;
  /** The class of each content of a cell. */
  readonly ofCell: Uint8Array;
  /** What a term adds: class(output) = class(candidate) XOR shift. */
  readonly shift: number;
}

/** One class of candidates. */
export interface Sector {
  readonly grading: Grading;
  readonly value: number;
}

/** More would cut the sweep's inner loops to nothing. */
const MAX_BITS = 3;
export const MAX_SECTORS = 2 ** MAX_BITS;

/**
 * The finest grading of a model, and coarser ones.
 *
 * @param most log₂ of the largest number of classes wanted
 */
export function gradingOf(h: Hamiltonian, most = MAX_BITS): Grading {
  const n = h.chain.cell;
  const terms = [...h.density.numerators.keys()].map((word) => counts(word, n));
  // Unknown: which of the 2n + 1 counts take part. All terms agree; a reflection of the spins leaves the classes alone.
  const conditions = terms.map((t) => t ^ terms[0]!);
  if (h.reflection === 'spins')
    for (let s = 0; 2 * s < n - 1; s++)
      for (const kind of [1, 2]) conditions.push((kind ^ (kind << (2 * (n - 1 - 2 * s)))) << (2 * s + 1));
  const functions = annihilator(conditions, 2 * n + 1).slice(0, Math.min(most, MAX_BITS));
  const ofCell = new Uint8Array(4 ** n);
  const shiftOf = (f: number) => parity(f & terms[0]!) ^ (f & 1);
  let shift = 0;
  functions.forEach((f, i) => {
    for (let content = 0; content < ofCell.length; content++)
      ofCell[content]! |= parity(f & counts(BigInt(content), n)) << i;
    shift |= shiftOf(f) << i;
  });
  return { bits: functions.length, ofCell, shift };
}

/** All strings as one class. */
export function ungraded(h: Hamiltonian): Sector {
  return { grading: gradingOf(h, 0), value: 0 };
}

/** Every sector of a grading. */
export function sectorsOf(grading: Grading): readonly Sector[] {
  return Array.from({ length: 2 ** grading.bits }, (_, value) => ({ grading, value }));
}

/** The contents of so many cells by class, each list rising. */
export function membersByClass({ bits, ofCell }: Grading, cells: number): readonly Uint32Array[] {
  let classes: Uint8Array = Uint8Array.of(0);
  for (let cell = 0; cell < cells; cell++) {
    const longer = new Uint8Array(classes.length * ofCell.length);
    for (let content = 0; content < longer.length; content++)
      longer[content] = classes[Math.floor(content / ofCell.length)]! ^ ofCell[content % ofCell.length]!;
    classes = longer;
  }
  const lists = Array.from({ length: 2 ** bits }, () => [] as number[]);
  classes.forEach((c, content) => void lists[c]!.push(content));
  return lists.map((list) => Uint32Array.from(list));
}

/** Representatives of range ≤ `range` in a sector. */
export function sectorCandidates({ grading, value }: Sector, range: number): number {
  const cells = grading.ofCell.length;
  let count = new Array<number>(2 ** grading.bits).fill(0);
  // The first cell is not the identity, the others are anything.
  for (let content = 1; content < cells; content++) count[grading.ofCell[content]!]!++;
  const one = count.slice();
  one[0]!++;
  for (let cell = 1; cell < range; cell++)
    count = count.map((_, target) => one.reduce((sum, ways, c) => sum + ways * count[target ^ c]!, 0));
  return count[value]!;
}

/** Bit 0: the parity of the number of Y. Then the bits of all cells added up modulo 2: for each spin, its X or Y and its Z or Y. */
function counts(word: Word, n: number): number {
  const cell = (1n << BigInt(2 * n)) - 1n;
  let sum = 0n;
  for (let rest = word; rest > 0n; rest >>= BigInt(2 * n)) sum ^= rest & cell;
  return (Number(sum) << 1) | (letterCounts(word)[1] & 1);
}

function parity(mask: number): number {
  let sum = 0;
  for (let rest = mask; rest !== 0; rest &= rest - 1) sum ^= 1;
  return sum;
}

/** A basis of the masks f with parity(f & c) = 0 for every condition c; low bits first. */
function annihilator(conditions: readonly number[], bits: number): number[] {
  const pivots = new Map<number, number>();
  for (const condition of conditions) {
    let row = condition;
    for (const [pivot, other] of pivots) if ((row >>> pivot) & 1) row ^= other;
    if (row === 0) continue;
    // The highest bit is the pivot, so that a free low one, the number of Y, comes first.
    const pivot = 31 - Math.clz32(row);
    for (const [p, other] of pivots) if ((other >>> pivot) & 1) pivots.set(p, other ^ row);
    pivots.set(pivot, row);
  }
  const basis: number[] = [];
  for (let free = 0; free < bits; free++) {
    if (pivots.has(free)) continue;
    let f = 1 << free;
    for (const [pivot, row] of pivots) if ((row >>> free) & 1) f |= 1 << pivot;
    basis.push(f);
  }
  return basis;
}
