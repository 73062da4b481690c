/**
 * Chains that are bilinear in fermions: recognition, Bogoliubov–de Gennes block, dispersion, and the bilinear charges. Exact.
 *
 * Jordan–Wigner along the spins s = 0, 1, …: `a_s = (∏_{r<s} Z_r) X_s`, `b_s = (∏_{r<s} Z_r) Y_s`, `c_s = (a_s + i b_s)/2`. Bilinear are
 * Z and the strings X or Y, Zs without a gap, X or Y:
 *
 *     Z_s = −i a_s b_s,  X Z…Z X = −i b_s a_t,  Y Z…Z Y = i a_s b_t,  Y Z…Z X = i a_s a_t,  X Z…Z Y = −i b_s b_t.
 *
 * With H = (i/2) Σ A_mn γ_m γ_n and A(q) = Σ_d A^(d) e^{iqd} between cells d apart, H = Σ_q Ψ_q† h(q) Ψ_q for Ψ_q = (c_q, c†_{−q}) over all q, where
 * h(q) is unitarily equivalent to iA(q). Its eigenvalues come in pairs λ(q), −λ(−q); a mode costs 2|λ|, and H = Σ ± λ over one of each pair.
 * Source: "Two soluble models of an antiferromagnetic chain", Ann. Phys. 16, 407 (1961).
 */
import { Operator } from '../algebra/operator.ts';
import {
  multiply,
  negate,
  ONE,
  type Rational,
  rational,
  squareRoot,
  textFromRational,
  ZERO,
} from '../algebra/rational.ts';
import { firstSpin, letterAt, spanOf, type Word } from '../algebra/word.ts';
import { InputError, LimitError, show } from '../errors.ts';
import type { Chain } from '../lattice/chain.ts';
import { type Hamiltonian, hamiltonianOf } from '../model/hamiltonian.ts';
import { characteristicPolynomial, Laurent, type LaurentMatrix } from './laurent.ts';
import { fermionAxes, inverseRotation, type Rotation, rotateOperator, rotationToZ } from './rotation.ts';
import { relations } from './span.ts';

/** The axis that plays the part of Z on a spin of the cell; the two others follow in cyclic order, a proper rotation. */
export type Axis = 'X' | 'Y' | 'Z';

export interface FreeFermions {
  readonly hamiltonian: Hamiltonian;
  /** A rotation of all spins before the axes are renamed; null where none is needed. */
  readonly rotation: Rotation | null;
  /** One axis a spin of the cell. */
  readonly axes: readonly Axis[];
  /** H rotated, and with these axes renamed to Z: bilinear as it stands. */
  readonly rotated: Hamiltonian;
  /** Terms c·iγ_mγ_n; Majorana 2s is a_s, 2s + 1 is b_s, m on a spin of cell 0, m < n. */
  readonly bilinears: readonly { readonly m: number; readonly n: number; readonly coefficient: Rational }[];
  /** h(q), in the basis c_{q,1} … c_{q,n}, c†_{−q,1} … c†_{−q,n} for a cell of n spins. */
  readonly block: LaurentMatrix;
  /** No terms c c or c† c†: the number of fermions, ΣZ after the rotation, is conserved. */
  readonly conservesNumber: boolean;
  readonly dispersion: Dispersion;
}

export interface Dispersion {
  /** `closed`: formulas for λ(q). `roots`: λ(q) are the roots of the polynomial. */
  readonly kind: 'closed' | 'roots';
  /** Eigenvalues λ(q) of h(q); where the number is conserved those of the block of c alone. A mode costs 2λ. */
  readonly text: readonly string[];
  readonly latex: readonly string[];
  /** det(λ − block) with lowest power of λ first: what the formulas solve. */
  readonly polynomial: readonly Laurent[];
}

/** Longest charges that are rotated back, in spins: a string of so many letters becomes up to 3⁸ strings. */
export const MAX_ROTATED_SPINS = 8;

/** Most spins a cell for which every choice of axes is tried; above, all spins get the same axis. */
const MAX_SEPARATE = 4;

/**
 * Recognises a chain that is bilinear after a renaming of axes, the same in every cell; each spin of the cell may have its own; or after one
 * rotation of all spins with rational entries. Null where there is none. Directions of irrational length, such as (1, 1, 0), and other
 * orders of the spins along the chain are not tried.
 */
export function freeFermions(h: Hamiltonian): FreeFermions | null {
  const found = afterRenaming(h, h.density, null);
  if (found !== null) return found;
  for (const axis of fermionAxes(h.density)) {
    const rotation = rotationToZ(axis);
    if (rotation === null) continue;
    const turned = afterRenaming(h, rotateOperator(h.density, rotation), rotation);
    if (turned !== null) return turned;
  }
  return null;
}

function afterRenaming(h: Hamiltonian, turned: Operator, rotation: Rotation | null): FreeFermions | null {
  const { cell } = h.chain;
  for (const axes of axisChoices(cell)) {
    const density = turned.mapWords((word) => renamed(word, axes, 1));
    const bilinears: { m: number; n: number; coefficient: Rational }[] = [];
    let all = true;
    for (const [word, c] of density.terms()) {
      const pair = majoranaPair(word);
      if (pair === null) {
        all = false;
        break;
      }
      bilinears.push({ m: pair.m, n: pair.n, coefficient: pair.sign > 0 ? c : negate(c) });
    }
    if (!all) continue;
    const block = bogoliubovBlock(cell, bilinears);
    const conservesNumber = block.every((row, i) =>
      row.every((entry, j) => i < cell === j < cell || entry.isZero()),
    );
    return Object.freeze({
      hamiltonian: h,
      rotation,
      axes,
      rotated: hamiltonianOf(h.chain, density),
      bilinears,
      block,
      conservesNumber,
      dispersion: dispersionOf(
        conservesNumber ? block.slice(0, cell).map((row) => row.slice(0, cell)) : block,
      ),
    });
  }
  return null;
}

const AXES: readonly Axis[] = ['Z', 'X', 'Y'];

function* axisChoices(cell: number): Generator<Axis[]> {
  for (const axis of AXES) yield Array.from({ length: cell }, () => axis);
  if (cell === 1 || cell > MAX_SEPARATE) return;
  for (let number = 0; number < 3 ** cell; number++) {
    const axes = Array.from({ length: cell }, (_, s) => AXES[Math.floor(number / 3 ** s) % 3]!);
    if (axes.some((axis) => axis !== axes[0])) yield axes;
  }
}

/** Letters X, Y, Z in cyclic order by code (X = 1, Z = 2, Y = 3). */
const CYCLE = [1, 3, 2];
const STEPS: Readonly<Record<Axis, number>> = { Z: 0, Y: 1, X: 2 };

/** The axis becomes Z (`direction` 1), or Z becomes the axis again (−1). */
function renamed(word: Word, axes: readonly Axis[], direction: 1 | -1): Word {
  let image = 0n;
  for (let s = spanOf(word) - 1; s >= 0; s--) {
    const letter = letterAt(word, s);
    const steps = direction * STEPS[axes[s % axes.length]!];
    const code = letter === 0 ? 0 : CYCLE[(CYCLE.indexOf(letter) + steps + 3) % 3]!;
    image = (image << 2n) | BigInt(code);
  }
  return image;
}

/** word = sign · iγ_mγ_n, or null where the word is no bilinear. */
function majoranaPair(word: Word): { m: number; n: number; sign: 1 | -1 } | null {
  const s = firstSpin(word);
  const t = spanOf(word) - 1;
  const [first, last] = [letterAt(word, s), letterAt(word, t)];
  if (s === t) return first === 2 ? { m: 2 * s, n: 2 * s + 1, sign: -1 } : null;
  if (first === 2 || last === 2) return null;
  for (let r = s + 1; r < t; r++) if (letterAt(word, r) !== 2) return null;
  // X Z…Z: −i b_s; Y Z…Z: i a_s. Then a_t for X, b_t for Y.
  return {
    m: first === 1 ? 2 * s + 1 : 2 * s,
    n: last === 1 ? 2 * t : 2 * t + 1,
    sign: first === 1 ? -1 : 1,
  };
}

/** h(q) = ½ M† iA(q) M with γ = M Ψ: a = c + c†, b = −i(c − c†). */
function bogoliubovBlock(cell: number, bilinears: FreeFermions['bilinears']): Laurent[][] {
  const size = 2 * cell;
  const a: Laurent[][] = Array.from({ length: size }, () => Array.from({ length: size }, () => Laurent.zero));
  for (const { m, n, coefficient } of bilinears) {
    const [i, j] = [m % size, n % size];
    const d = Math.floor(n / size) - Math.floor(m / size);
    a[i]![j] = a[i]![j]!.plus(Laurent.of([[d, coefficient]]));
    a[j]![i] = a[j]![i]!.plus(Laurent.of([[-d, negate(coefficient)]]));
  }
  const half = rational(1n, 2n);
  // Entry of M from Dirac column k (c for k < cell) to Majorana row i, as a Gaussian number.
  const entry = (i: number, k: number): [Rational, Rational] | null => {
    if (i >> 1 !== k % cell) return null;
    return (i & 1) === 0 ? [ONE, ZERO] : [ZERO, k < cell ? negate(ONE) : ONE];
  };
  return Array.from({ length: size }, (_, k) =>
    Array.from({ length: size }, (_, l) => {
      let sum = Laurent.zero;
      for (let i = 0; i < size; i++)
        for (let j = 0; j < size; j++) {
          const [left, right] = [entry(i, k), entry(j, l)];
          if (left === null || right === null || a[i]![j]!.isZero()) continue;
          sum = sum.plus(
            a[i]![j]!.scaled(left[0], negate(left[1]))
              .scaled(...right)
              .scaled(ZERO, half),
          );
        }
      return sum;
    }),
  );
}

/** Closed forms for one band, two bands, and two pairs of opposite bands; else the polynomial itself. */
function dispersionOf(block: LaurentMatrix): Dispersion {
  const polynomial = characteristicPolynomial(block);
  const half = rational(1n, 2n);
  const quarter = rational(1n, 4n);
  let write: ((latex: boolean) => string[]) | undefined;
  if (block.length === 1) write = (latex) => [block[0]![0]!.toText(latex)];
  else if (block.length === 2) {
    const middle = polynomial[1]!.scaled(negate(half));
    const radicand = middle.times(middle).minus(polynomial[0]!);
    write = (latex) => plusMinus(middle.toText(latex), root(radicand, latex));
  } else if (block.length === 4 && polynomial[1]!.isZero() && polynomial[3]!.isZero()) {
    const middle = polynomial[2]!.scaled(negate(half));
    const radicand = polynomial[2]!.times(polynomial[2]!).scaled(quarter).minus(polynomial[0]!);
    write = (latex) =>
      plusMinus(middle.toText(latex), root(radicand, latex)).flatMap((square) => {
        const outer = latex ? `\\sqrt{${square}}` : `sqrt(${square})`;
        return square === '0' ? ['0'] : [outer, `-${outer}`];
      });
  }
  if (write !== undefined) return { kind: 'closed', text: write(false), latex: write(true), polynomial };
  return { kind: 'roots', text: [powers(polynomial, false)], latex: [powers(polynomial, true)], polynomial };
}

/** √f, simplified where f does not depend on q and is a square. */
function root(f: Laurent, latex: boolean): string {
  const constant = f.asConstant();
  const exact = constant === null ? undefined : squareRoot(constant);
  if (exact !== undefined) return textFromRational(exact);
  return latex ? `\\sqrt{${f.toText(true)}}` : `sqrt(${f.toText()})`;
}

function plusMinus(middle: string, size: string): string[] {
  if (size === '0') return [middle];
  if (middle === '0') return [size, `-${size}`];
  return [`${middle} + ${size}`, `${middle} - ${size}`];
}

function powers(polynomial: readonly Laurent[], latex: boolean): string {
  const name = latex ? '\\lambda' : 'λ';
  const terms: string[] = [];
  for (let k = polynomial.length - 1; k >= 0; k--) {
    if (polynomial[k]!.isZero()) continue;
    const power = k === 0 ? '' : k === 1 ? name : `${name}^${k}`;
    const factor = polynomial[k]!.toText(latex);
    terms.push(factor === '1' && k > 0 ? power : `(${factor})${power === '' ? '' : ` ${power}`}`);
  }
  return `${terms.join(' + ')} = 0`;
}

/**
 * All charges of range ≤ `range` that are bilinear in the same fermions, a basis; complete among bilinears, at a cost polynomial in the
 * range, so ranges far beyond an exhaustive search. Integer coefficients without a common factor; each has a longest string that no other has.
 *
 * Why there are so many: iB(q) with [A(q), B(q)] = 0 is conserved. All 2cos(dq)·A(q)^m, m odd, and 2i sin(dq)·A(q)^m, m even, are such
 * B, so two charges appear for about every range of a chain of one spin a cell.
 *
 * @throws InputError for a range that is no positive integer; LimitError for one too long to be rotated back
 */
export function bilinearCharges({ rotated, axes, rotation }: FreeFermions, range: number): Operator[] {
  if (!(Number.isInteger(range) && range >= 1))
    throw new InputError('bilinear charges', 'a range of one cell or more, a whole number', show(range));
  const { chain, density } = rotated;
  if (rotation !== null && range * chain.cell > MAX_ROTATED_SPINS)
    throw new LimitError(
      `bilinear charges: of a chain that had to be rotated up to ${MAX_ROTATED_SPINS} spins, range × cell; the rotated chain itself has none of this limit`,
    );
  const back = rotation === null ? null : inverseRotation(rotation);
  const words = bilinearWords(chain, range);
  const images = words.map((word) => chain.bracket(density, Operator.fromIntegers([[word, 1n]])));
  return relations(images).map((relation) => {
    const sum = Operator.fromTerms([...relation].map(([i, c]) => [words[i]!, c] as const));
    const longest = chain.rangeOf(sum);
    const [leading] = sum.filter((word) => chain.range(word) === longest).terms();
    const own = sum.primitive(leading![0]).mapWords((word) => renamed(word, axes, -1));
    if (back === null) return own;
    const turned = rotateOperator(own, back);
    return turned.primitive([...turned.terms()][0]![0]);
  });
}

/** Bilinear strings that start in cell 0, shortest first. */
function bilinearWords(chain: Chain, range: number): Word[] {
  const words: Word[] = [];
  for (let s = 0; s < chain.cell; s++) {
    words.push(2n << BigInt(2 * s));
    let middle = 0n;
    for (let t = s + 1; t < chain.cell * range; t++) {
      for (const first of [1n, 3n])
        for (const last of [1n, 3n]) words.push((first << BigInt(2 * s)) | middle | (last << BigInt(2 * t)));
      middle |= 2n << BigInt(2 * t);
    }
  }
  return words
    .map((word) => ({ word, range: chain.range(word) }))
    .sort((x, y) => x.range - y.range || spanOf(x.word) - spanOf(y.word))
    .map(({ word }) => word);
}

/**
 * The matrix A of H = (i/2) Σ A_mn γ_m γ_n on a ring of `cells` cells in one sector of P = ∏Z (after the rotation): integers over a common
 * denominator, antisymmetric. Fermions are antiperiodic for P = 1, periodic for P = −1. Energies of the ring: Σ s_k λ_k, s_k = ±1, with
 * ±iλ_k the eigenvalues of A, λ_k ≥ 0, and ∏ s_k = P (−1)^N sign Pf A for N spins; both signs where some λ_k = 0.
 *
 * @throws InputError for a ring shorter than the range of H
 */
export function ringMatrix(
  { rotated, bilinears }: FreeFermions,
  cells: number,
  parity: 1 | -1,
): { readonly matrix: readonly (readonly bigint[])[]; readonly denominator: bigint } {
  if (!(Number.isInteger(cells) && cells >= rotated.range))
    throw new InputError(
      'ring',
      `a whole number of cells, at least the range ${rotated.range} of H`,
      show(cells),
    );
  const { cell } = rotated.chain;
  const size = 2 * cell * cells;
  const { denominator } = rotated.density;
  const matrix = Array.from({ length: size }, () => Array.from({ length: size }, () => 0n));
  for (const { m, n, coefficient } of bilinears) {
    const value = multiply(coefficient, rational(denominator)).numerator;
    for (let j = 0; j < cells; j++) {
      const [k, l] = [m + 2 * cell * j, n + 2 * cell * j];
      // m stands in cell 0, so only n can be beyond the end, by less than one turn.
      const signed = l >= size && parity === 1 ? -value : value;
      matrix[k]![l % size]! += signed;
      matrix[l % size]![k]! -= signed;
    }
  }
  return { matrix, denominator };
}
