/**
 * Every range, at a point of each set of a family.
 *
 * The number of charges up to any one range can only grow on closed sets, and a set whose equations are all solved for parameters is
 * irreducible. So what a verdict for every range excludes at one point is excluded, range by range, at general points of the set; charges
 * that exist at the point need not exist elsewhere.
 */
import type { Rational } from '../../algebra/rational.ts';
import { type Family, familyAt } from '../../model/formula.ts';
import { decide } from '../decide.ts';
import type { EveryRangeVerdict } from '../verdict.ts';
import type { Answer, Locus } from './loci.ts';

export interface LocusVerdict {
  readonly locus: Locus;
  readonly point: readonly Rational[];
  readonly verdict: EveryRangeVerdict;
}

/** One verdict a set, equivalent sets not repeated; none where no rational point is known or H vanishes. Cost: `decide` a set. */
export function* everyRangeOf(family: Family, answers: readonly Answer[]): Generator<LocusVerdict> {
  for (const { loci } of answers)
    for (const locus of loci) {
      const { point, where } = locus.general;
      if (point === null || where.carried.length > 0) continue;
      if (family.terms.every(([, p]) => p.evaluate(point).numerator === 0n)) continue;
      yield { locus, point, verdict: decide(familyAt(family, point)) };
    }
}
