/** A thousand points a family, against the plain search. */
import { describe, expect, it } from 'vitest';
import { FAMILIES } from '../../../src/model/catalogue/index.ts';
import { parseFamily } from '../../../src/model/formula.ts';
import { classifyNow } from '../../../src/theory/family/classify.ts';
import { answersOf } from '../../../src/theory/family/loci.ts';
import { checkAt, pointOf } from '../../support/families.ts';
import { Random } from '../../support/random.ts';

const POINTS = 1_000;
/** Ranges at which a thousand plain searches take minutes at most. Two-spin cells with rotation symmetry: range 2. */
const RANGES: Readonly<Record<string, number>> = { 'dimerised-heisenberg': 2, 'four-spin-ladder': 2 };

describe('a thousand points', () => {
  for (const { id, formula, cell, range } of FAMILIES) {
    it(id, () => {
      const result = classifyNow(parseFamily(formula, { cell }), { range: RANGES[id] ?? Math.min(range, 4) });
      const answers = answersOf(result);
      const random = new Random(2_026);
      const hit = new Set<number>();
      for (let i = 0; i < POINTS; i++) {
        const point = pointOf(result, random);
        checkAt(result, point, answers);
        hit.add(
          result.cases.findIndex(
            (c) =>
              c.equations.every((p) => p.evaluate(point).numerator === 0n) &&
              c.nonZero.every((p) => p.evaluate(point).numerator !== 0n),
          ),
        );
      }
      // Small sets were met too, not only the general case.
      expect(hit.size).toBe(result.cases.length);
    });
  }
});
