/**
 * The boost ladder: `Q_2 = H`, `Q_{n+1} = [B, Q_n]` with `B = Σ_j j·(density of H) + Y`, charges of every range when `[[B, H], H] = 0`
 * ("Integrability from a single conservation law in quantum spin chains", arXiv:2508.20713, Phys. Rev. B 114, 055108).
 *
 * Which density of H one takes matters: densities differ by total differences, and these add a translation-invariant Y to B.
 * Here Y is any one-cell operator, which covers every way to share the field between neighbouring bonds; the condition is
 * linear in it and solved exactly. A one-cell charge within H is removed first: it moves nothing and spoils the condition.
 */
import { Operator } from '../algebra/operator.ts';
import { gcd } from '../algebra/rational.ts';
import { HoldfastError, InputError, show, VerificationError } from '../errors.ts';
import type { Chain } from '../lattice/chain.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import { type Boost, type PackedDensity, pack, pass, passing, unpack } from './boost.ts';
import { orthogonalBasis, projection } from './orthogonal.ts';

/** No boost operator of this form; proves nothing about the charges of the model. */
export class NoLadderError extends HoldfastError {
  override name = 'NoLadderError';
}

export interface LadderBase {
  readonly boost: Boost;
  /** H without its one-cell charge, integer coefficients. */
  readonly start: Operator;
  /** The one-cell charge that was removed, zero where there was none. */
  readonly removed: Operator;
}

/** The boost operator for which `[[B, H], H] = 0`, or undefined where no Y does it. */
export function ladderBase({ chain, density, range }: Hamiltonian): LadderBase | undefined {
  if (range < 2) return undefined;
  const removed = oneCellChargeIn(chain, density);
  const rest = density.minus(removed);
  const start = Operator.fromIntegers(rest.numerators);
  const plain: Boost = { chain, h: start, shift: Operator.zero, factor: 1n };
  const first = pass(plain, pack(chain, start), 'boost').boosted!;
  const letters = Array.from({ length: 4 ** chain.cell - 1 }, (_, i) =>
    Operator.fromIntegers([[BigInt(i + 1), 1n]]),
  );
  const steps = [unpack(first), ...letters.map((y) => chain.bracket(y, start))];
  const rows = new Map<bigint, number>();
  const builder = new MatrixBuilder();
  steps.forEach((step, column) => {
    for (const [word, value] of chain.bracket(start, step).numerators) {
      if (!rows.has(word)) rows.set(word, rows.size);
      builder.add(rows.get(word)!, column, value);
    }
  });
  // Column 0 stands first, so a solution with it is the one vector that leads there.
  const [solution] = exactNullSpace(builder.finish(steps.length));
  if (solution?.columns[0] !== 0) return undefined;
  const factor = solution.values[0]!;
  const shift = Operator.fromIntegers(
    solution.columns.slice(1).map((c, i) => [BigInt(c), solution.values[i + 1]!] as const),
  );
  // The charge that was removed has to commute with every rung: it does with h and with what is left of the field.
  if (!chain.bracket(removed, shift).isZero()) return undefined;
  return { boost: { chain, h: start, shift, factor }, start, removed };
}

/** The part of the field that is a charge of its own: its projection to the one-cell charges. */
function oneCellChargeIn(chain: Chain, density: Operator): Operator {
  const field = density.filter((word) => chain.range(word) === 1);
  if (field.isZero()) return field;
  const builder = new MatrixBuilder();
  const rows = new Map<bigint, number>();
  const letters = 4 ** chain.cell;
  for (let a = 1; a < letters; a++)
    for (const [word, value] of chain.bracket(density, Operator.fromIntegers([[BigInt(a), 1n]])).numerators) {
      if (!rows.has(word)) rows.set(word, rows.size);
      builder.add(rows.get(word)!, a - 1, value);
    }
  const charges = exactNullSpace(builder.finish(letters - 1)).map(({ columns, values }) =>
    Operator.fromIntegers(columns.map((c, i) => [BigInt(c + 1), values[i]!] as const)),
  );
  return projection(orthogonalBasis(charges), field);
}

export interface Rung {
  readonly range: number;
  /** Terms of the charge. */
  readonly size: number;
  /** Primitive, re-checked exactly: it commutes with H. */
  readonly packed: PackedDensity;
  readonly milliseconds: number;
}

export interface LadderOptions {
  /** The longest charge, in cells. */
  readonly range: number;
}

/** Between two rungs: the range of the last one, its terms, and the share of its products that are done. */
export interface LadderProgress {
  readonly range: number;
  readonly done: number;
  readonly terms: number;
}

/**
 * The charges of a ladder, range by range, each as soon as it is re-checked. Cost: proportional to the answer, times the terms of H and the range.
 *
 * @throws InputError for a range below 2; NoLadderError where no boost operator was found (which proves nothing);
 * VerificationError should a rung not commute with H; LimitError where its strings do not pack
 */
export function* ladder(model: Hamiltonian, options: LadderOptions): Generator<Rung> {
  for (const step of climbing(model, options)) if ('packed' in step) yield step;
}

/** As `ladder`, with progress every few milliseconds, so that a caller can give way or stop. */
export function* climbing(model: Hamiltonian, { range }: LadderOptions): Generator<Rung | LadderProgress> {
  if (!(Number.isInteger(range) && range >= 2))
    throw new InputError('ladder', 'a range of two cells or more, a whole number', show(range));
  const base = ladderBase(model);
  if (base === undefined)
    throw new NoLadderError(
      'ladder: no boost operator with a one-cell correction satisfies [[B, H], H] = 0. This proves nothing about the charges of the model.',
    );
  const { boost, start, removed } = base;
  let current = primitive(pack(boost.chain, start));
  let started = performance.now();
  // Ising-type chains have two rungs a range: their strings grow by half steps.
  let doubled = false;
  let previous = 0;
  for (;;) {
    const { range: here, coefficients } = current;
    doubled ||= here === previous;
    const last = here >= range && (!doubled || here === previous);
    const steps = passing(boost, current, last ? 'check' : 'boost');
    let step = steps.next();
    for (; !step.done; step = steps.next())
      yield { range: here, done: step.value, terms: coefficients.length };
    const { conserved, boosted } = step.value;
    if (!conserved) throw new VerificationError(`ladder: the rung of range ${here} does not commute with H`);
    if (!commutesWith(boost.chain, removed, current))
      throw new VerificationError(
        `ladder: the rung of range ${here} does not commute with the charge in the field`,
      );
    yield {
      range: here,
      size: coefficients.length,
      packed: current,
      milliseconds: performance.now() - started,
    };
    started = performance.now();
    if (last || boosted === undefined || boosted.coefficients.length === 0) return;
    // Two steps without growth: a classical chain, whose rungs would go on for ever.
    if (boosted.range < here || (boosted.range === here && here === previous)) return;
    if (boosted.range > range) return;
    previous = here;
    current = primitive(boosted);
  }
}

function commutesWith(chain: Chain, charge: Operator, q: PackedDensity): boolean {
  if (charge.isZero()) return true;
  const h = Operator.fromIntegers(charge.numerators);
  return pass({ chain, h, shift: Operator.zero, factor: 1n }, q, 'check').conserved;
}

function primitive(q: PackedDensity): PackedDensity {
  let common = 0n;
  for (const c of q.coefficients) {
    common = gcd(common, c);
    if (common === 1n) return q;
  }
  return { ...q, coefficients: q.coefficients.map((c) => c / common) };
}
