/** Laws of a classified family, at given points: for tests that run few and tests that run many. */
import { expect } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { type Rational, rational, textFromRational } from '../../src/algebra/rational.ts';
import { familyAt } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { completePoint, contains } from '../../src/theory/family/case.ts';
import type { FamilyResult } from '../../src/theory/family/classify.ts';
import { type Answer, answersOf } from '../../src/theory/family/loci.ts';
import type { Random } from './random.ts';

/** Small values, so that parameters vanish and coincide often, or a point of a case picked at random, so that small sets are met. */
export function pointOf(result: FamilyResult, random: Random): Rational[] {
  const draw = () => (random.chance(0.7) ? rational(BigInt(random.integer(-2, 2))) : random.rational());
  const free = result.family.parameters.map(draw);
  if (random.chance(0.4)) return free;
  const { where } = random.pick(result.cases);
  const atDenominators = where.solved.some((s) => s.denominator.evaluate(free).numerator === 0n);
  return atDenominators ? free : completePoint(where, free);
}

/** Exactly one case contains the point; the plain search agrees with it; its charges, there, are charges. */
export function checkAt(
  result: FamilyResult,
  point: readonly Rational[],
  answers: readonly Answer[] = answersOf(result),
): void {
  const where = `at ${point.map(textFromRational)}`;
  const cases = result.cases.filter((c) => contains(c.where, point));
  expect(cases.length, where).toBe(1);
  const [found] = cases;
  if (result.family.terms.every(([, p]) => p.evaluate(point).numerator === 0n)) return;
  const h = familyAt(result.family, point);
  const plain = searchNow(h, { range: result.range });
  expect(found!.dimensionByRange, where).toEqual(plain.dimensionByRange);
  const charges = found!.charges.map(({ range, density }) => {
    const q = Operator.fromTerms(density.map(([word, p]) => [word, p.evaluate(point)] as const));
    expect(h.chain.rangeOf(q), where).toBe(range);
    expect(h.chain.bracket(h.density, q).isZero(), where).toBe(true);
    return q;
  });
  // As many as the dimension says, unless the case says that it does not write them out.
  if (charges.length > 0) expect(charges.length, where).toBe(plain.charges.length);
  // The table of answers, read as it says: the last line that applies.
  const lines = answers.filter(({ loci }) =>
    loci
      .flatMap((l) => [l, ...l.equivalent])
      .some(
        (l) =>
          l.equations.every((p) => p.evaluate(point).numerator === 0n) &&
          l.except.every((p) => p.evaluate(point).numerator !== 0n),
      ),
  );
  expect(lines.at(-1)!.dimensionByRange, where).toEqual(plain.dimensionByRange);
}
