/**
 * Ising-type chains, `H = Σ J a⊗a + w`: growth at an end alternates between the bond and the field, half a step each, and the pencil
 * of these half steps bounds the charges of every range. `docs/theory.md`, section 5.
 *
 * A last letter on site b counts as position 2b where it commutes with a (in K), as 2b + 1 where it does not (in C); a first letter as
 * 2b or 2b − 1. The half-length ℓ is the difference, `G_ℓ` the densities of half-length exactly ℓ.
 */

import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import type { BondsAndFields } from './decompose.ts';
import type { Sign } from './growth.ts';
import { type Combination, type Letters, lettersOf } from './letters.ts';
import { type Pencil, pencilFromRelations, type Witness, witnessesOf, ZERO_PENCIL } from './pencil.ts';

/** A density: strings as numbers in base `letters.count`, first site lowest, first letter not the identity. */
export type Density = Map<number, bigint>;

/** Half-length at which the inner part becomes linear in ℓ. */
export const CORE_LENGTH = 6;

/** First range whose two half-lengths 2k − 2 and 2k − 1 both are at least 7. */
export const HALF_STEP_RANGE = 5;

export class HalfStepGrowth {
  readonly #omega: bigint;
  readonly #bondFactor: bigint;
  readonly #fieldFactor: bigint;

  constructor(
    readonly letters: Letters,
    omega: Sign = 1,
  ) {
    this.#omega = BigInt(omega);
    // Bonds take two table entries and fields one table entry and coordinates over the denominator: both by the same scale.
    this.#bondFactor = letters.coupling.numerator;
    this.#fieldFactor = letters.coupling.denominator;
  }

  #inC(letter: number): boolean {
    return letter > this.letters.kept;
  }

  /** Letters of a string, first site first. */
  #split(string: number): number[] {
    const { count } = this.letters;
    const sites: number[] = [];
    for (let rest = string; rest > 0; rest = Math.floor(rest / count)) sites.push(rest % count);
    return sites;
  }

  /** Left and right position, the first of the given sites being site `from`. */
  #ends(sites: readonly number[], from: number): { left: number; right: number; first: number } | undefined {
    let first = 0;
    while (sites[first] === 0) first++;
    let last = sites.length - 1;
    while (last >= 0 && sites[last] === 0) last--;
    if (last < first) return undefined;
    return {
      first,
      left: 2 * (first + from) - (this.#inC(sites[first]!) ? 1 : 0),
      right: 2 * (last + from) + (this.#inC(sites[last]!) ? 1 : 0),
    };
  }

  halfLength(string: number): number {
    const { left, right } = this.#ends(this.#split(string), 0)!;
    return right - left;
  }

  /** Strings of half-length exactly ℓ. */
  strings(length: number): number[] {
    const { count } = this.letters;
    const found: number[] = [];
    for (const sites of [Math.floor(length / 2), Math.floor(length / 2) + 1]) {
      if (sites < 1) continue;
      const inner = sites > 2 ? count ** (sites - 2) : 1;
      for (let last = 1; last < count; last++)
        for (let middle = 0; middle < inner; middle++)
          for (let first = 1; first < count; first++) {
            const string = sites === 1 ? first : first + count * middle + last * count ** (sites - 1);
            if (sites === 1 && last > 1) continue;
            if (this.halfLength(string) === length) found.push(string);
          }
    }
    return [...new Set(found)];
  }

  /**
   * Every term of `i[string, H]/2`, scaled, with the displacement of its ends: outputs with left position lower by `dLeft` and right
   * position higher by `dRight` (0 or 1 each; what falls back at an end is of no interest and left out).
   */
  *#terms(
    string: number,
  ): Generator<{ output: number; value: bigint; dLeft: number; dRight: number; moved: number }> {
    const { count, commutators, anticommutators, axis, field } = this.letters;
    const own = this.#split(string);
    const before = this.#ends(own, 0)!;
    // One site of room on either side.
    const sites = [0, ...own, 0];
    const emit = function* (
      this: HalfStepGrowth,
      changed: readonly (readonly [site: number, letter: number])[],
      value: bigint,
    ): Generator<{ output: number; value: bigint; dLeft: number; dRight: number; moved: number }> {
      const image = [...sites];
      for (const [site, letter] of changed) image[site] = letter;
      const after = this.#ends(image, -1);
      if (after === undefined) return;
      const dLeft = before.left - after.left;
      const dRight = after.right - before.right;
      if (dLeft < 0 || dRight < 0) return;
      let output = 0;
      for (let s = image.length - 1; s >= after.first; s--) output = output * count + image[s]!;
      yield { output, value, dLeft, dRight, moved: after.first - 1 };
    }.bind(this);
    for (let s = 0; s + 1 < sites.length; s++) {
      const [x, y] = [sites[s]! * count, sites[s + 1]! * count];
      for (const [a, p] of axis)
        for (const [b, q] of axis)
          for (const [left, right] of [
            [commutators[x + a]!, anticommutators[y + b]!],
            [anticommutators[x + a]!, commutators[y + b]!],
          ] as readonly (readonly [Combination, Combination])[])
            for (const [l, u] of left)
              for (const [r, v] of right)
                yield* emit(
                  [
                    [s, l],
                    [s + 1, r],
                  ],
                  p * q * u * v * this.#bondFactor,
                );
    }
    for (let s = 1; s + 1 < sites.length; s++)
      for (const [b, q] of field)
        for (const [l, u] of commutators[sites[s]! * count + b]!)
          yield* emit([[s, l]], q * u * this.#fieldFactor);
  }

  /** Adds the column of `R − ωA` of one string. */
  addColumn(builder: MatrixBuilder, column: number, string: number): void {
    for (const { output, value, dLeft, dRight, moved } of this.#terms(string))
      if (dLeft + dRight === 1) builder.add(output, column, moved < 0 ? value * this.#omega : value);
  }

  /** `R q`: what grows at the right end alone. */
  right(q: Density): Density {
    return this.#collect(q, (dLeft, dRight) => dLeft === 0 && dRight === 1);
  }

  /** The part of `[q, H]` that keeps the half-length. */
  inner(q: Density): Density {
    return this.#collect(q, (dLeft, dRight) => dLeft === 0 && dRight === 0);
  }

  #collect(q: Density, keep: (dLeft: number, dRight: number) => boolean): Density {
    const sum: Density = new Map();
    for (const [string, c] of q)
      for (const { output, value, dLeft, dRight } of this.#terms(string))
        if (keep(dLeft, dRight)) sum.set(output, (sum.get(output) ?? 0n) + c * value);
    for (const [string, value] of sum) if (value === 0n) sum.delete(string);
    return sum;
  }

  /** V_3 = ker(R − ωA) on G_3. */
  topParts(): Density[] {
    const strings = this.strings(3);
    const builder = new MatrixBuilder();
    strings.forEach((string, column) => {
      this.addColumn(builder, column, string);
    });
    return exactNullSpace(builder.finish(strings.length)).map(
      ({ columns, values }) => new Map(columns.map((c, i) => [strings[c]!, values[i]!])),
    );
  }

  /** α = R D_6 and β = D_7 − R D_6 of a top part: the pencil at half-length ℓ is α + (ℓ − 6) β. */
  parts(f: Density): { alpha: Density; beta: Density } {
    const f6 = this.right(this.right(this.right(f)));
    const alpha = this.right(this.inner(f6));
    const beta = new Map(this.inner(this.right(f6)));
    for (const [string, value] of alpha) beta.set(string, (beta.get(string) ?? 0n) - value);
    return { alpha, beta };
  }

  /** Why the pencil loses rank at t, x of half-length 6: see `witnessesOf`. */
  witnesses(topParts: readonly Density[], t: bigint): Witness[] {
    return witnessesOf(
      topParts.map((f) => {
        const { alpha, beta } = this.parts(f);
        return [...alpha, ...[...beta].map(([string, value]) => [string, t * value] as const)];
      }),
      this.strings(CORE_LENGTH),
      (builder, column, string) => this.addColumn(builder, column, string),
    );
  }

  /** The pencil `R D_6 + (ℓ − 6)(D_7 − R D_6)` modulo `(R − ωA) G_6`, for ℓ ≥ 7. */
  pencil(): { topParts: Density[]; pencil: Pencil } {
    const topParts = this.topParts();
    const r = topParts.length;
    if (r === 0) return { topParts, pencil: ZERO_PENCIL };
    const builder = new MatrixBuilder();
    topParts.forEach((f, i) => {
      const { alpha, beta } = this.parts(f);
      for (const [string, value] of alpha) builder.add(string, i, value);
      for (const [string, value] of beta) builder.add(string, r + i, value);
    });
    const strings = this.strings(CORE_LENGTH);
    strings.forEach((string, i) => {
      this.addColumn(builder, 2 * r + i, string);
    });
    const relations = exactNullSpace(builder.finish(2 * r + strings.length));
    return { topParts, pencil: pencilFromRelations(relations, r) };
  }
}

/**
 * The half steps of a model, or the reason why it has none: the bond is not `J a⊗a`, or a letter of K does not grow by the field.
 */
export function halfSteps(
  model: BondsAndFields,
): { ok: true; letters: Letters } | { ok: false; reason: string } {
  const letters = lettersOf(model);
  if (letters === undefined) return { ok: false, reason: 'the bond is not of the form J a⊗a' };
  const { count, kept, commutators, field } = letters;
  const builder = new MatrixBuilder();
  for (let k = 1; k <= kept; k++)
    for (const [b, q] of field)
      for (const [l, u] of commutators[k * count + b]!) if (l > kept) builder.add(l, k - 1, q * u);
  if (exactNullSpace(builder.finish(kept)).length > 0)
    return {
      ok: false,
      reason: 'an operator of one cell commutes with the bond and does not grow by the field either',
    };
  return { ok: true, letters };
}
