/**
 * Charges of a wave number as Hermitian operators with a longer period.
 *
 * With Q = Σ_g χ(g) g(q) also Q† is conserved, so Re(Q) = (Q + Q†)/2 and Re(ωQ) are; for ω ≠ ±1 the two span the same as Q and
 * Q†. Their coefficients Re(χ(g) c) lie in the real part of Q(ω): rational for orders 1, 2, 3, 4 and 6 if c is, algebraic otherwise.
 */
import { type Cyclotomic, CyclotomicField } from '../../algebra/cyclotomic.ts';
import { gcd, type Rational } from '../../algebra/rational.ts';
import { letterAt, spanOf, type Word } from '../../algebra/word.ts';
import { Box } from '../../lattice/lattice.ts';
import type { LatticeCharge, LatticeResult } from './result.ts';

/** A density of a longer period; summed over its translates by the period in every direction that has one. */
export interface RealDensity {
  readonly box: Box;
  /** Cells; 0 in directions without translations. */
  readonly period: readonly number[];
  /** Real elements of Q(ω), not zero. */
  readonly terms: readonly (readonly [Word, Cyclotomic])[];
  /** The same where every coefficient is rational, else null. */
  readonly rational: readonly (readonly [Word, Rational])[] | null;
}

/** One density for ω = ±1, two for others: Re(Q) and Re(ωQ). One that vanishes is left out. */
export function realForms(result: LatticeResult, charge: LatticeCharge): RealDensity[] {
  const { box, translations, model } = result;
  const { order, steps, exponents } = translations;
  const field = new CyclotomicField(order);
  const times = exponents.map((e) => order / Number(gcd(BigInt(order), BigInt(e))));
  const period = steps.map((step, d) => step * times[d]!);
  const wide = new Box(
    box.cell,
    box.low,
    box.size.map((size, d) =>
      model.lattice.extents[d]!.kind === 'infinite' ? size + (times[d]! - 1) * steps[d]! : size,
    ),
  );
  const moves = times.reduce<number[][]>(
    (all, n) => all.flatMap((move) => Array.from({ length: n }, (_, t) => [...move, t])),
    [[]],
  );
  const forms: RealDensity[] = [];
  for (let turn = 0; turn < (order <= 2 ? 1 : 2); turn++) {
    const sum = new Map<Word, Cyclotomic>();
    for (const move of moves) {
      const phase = field.power(move.reduce((e, t, d) => e + t * exponents[d]!, turn));
      for (const [word, c] of charge.terms) {
        const value = field.real(field.multiply(phase, c));
        const moved =
          move.every((t) => t === 0) && sameShape(box, wide) ? word : moveWord(word, move, result, wide);
        const before = sum.get(moved);
        sum.set(moved, before === undefined ? value : field.add(before, value));
      }
    }
    const terms = [...sum].filter(([, c]) => !field.isZero(c));
    if (terms.length === 0) continue;
    const rational = terms.map(([word, c]) => [word, field.asRational(c)] as const);
    forms.push({
      box: wide,
      period,
      terms,
      rational: rational.every((t): t is readonly [Word, Rational] => t[1] !== undefined) ? rational : null,
    });
  }
  return forms;
}

function sameShape(a: Box, b: Box): boolean {
  return a.size.every((s, d) => s === b.size[d]);
}

function moveWord(
  word: Word,
  move: readonly number[],
  { box, translations, model }: LatticeResult,
  wide: Box,
): Word {
  let moved = 0n;
  for (let spin = 0; spin < spanOf(word); spin++) {
    const letter = letterAt(word, spin);
    if (letter === 0) continue;
    const site = box.siteAt(spin);
    const cell = site.cell.map((c, d) => {
      const extent = model.lattice.extents[d]!;
      const to = c + move[d]! * translations.steps[d]!;
      return extent.kind === 'infinite' ? to : to % extent.cells;
    });
    moved |= BigInt(letter) << BigInt(2 * wide.indexOf({ cell, spin: site.spin }));
  }
  return moved;
}
