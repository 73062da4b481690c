import { describe, expect, it } from 'vitest';
import type { Polynomial } from '../../../src/algebra/polynomial.ts';
import { CancelledError, InputError, LimitError } from '../../../src/errors.ts';
import { FAMILIES } from '../../../src/model/catalogue/index.ts';
import { parseFamily } from '../../../src/model/formula.ts';
import { exclude, imposeAll, reduceOn } from '../../../src/theory/family/case.ts';
import {
  classify,
  classifyNow,
  type FamilyResult,
  type FamilyState,
} from '../../../src/theory/family/classify.ts';
import { everyRangeOf } from '../../../src/theory/family/every-range.ts';
import { answersOf, symmetriesOf } from '../../../src/theory/family/loci.ts';
import { checkAt, pointOf } from '../../support/families.ts';
import { property, type Random } from '../../support/random.ts';

const XYZ_IN_A_FIELD = parseFamily('Jx XX + Jy YY + Jz ZZ + hx X + hy Y + hz Z');
const xyz = classifyNow(XYZ_IN_A_FIELD, { range: 3 });
const xyzAnswers = answersOf(xyz);

/** A polynomial in the parameters of a family, written as a formula. */
function polynomial(text: string, names: readonly string[]): Polynomial {
  // Zero times every parameter fixes their order.
  const terms = parseFamily(`${names.map((n) => `${n} X`).join(' + ')} + (${text}) Z`).terms;
  return terms.find(([word]) => word === 2n)![1];
}

describe('a classified family', () => {
  property('agrees with the plain search at points of XYZ in a field', 60, (random) => {
    checkAt(xyz, pointOf(xyz, random), xyzAnswers);
  });

  property('agrees with the plain search on random families', 8, (random) => {
    const family = randomFamily(random);
    const result = classifyNow(family, { range: random.integer(2, 3) });
    const answers = answersOf(result);
    for (let i = 0; i < 6; i++) checkAt(result, pointOf(result, random), answers);
  });

  it('agrees where conditions are not linear', () => {
    // Real zeros at a = ±√2 only, away from every rational point; a² + b² + 1 has none, and a² + ab + b² one.
    const result = classifyNow(parseFamily('XX + YY + ZZ + (a^2 - 2) (X + b Z)'), { range: 3 });
    const root = result.cases.find((c) => c.equations.some((p) => p.toString(['a', 'b']) === 'a^2 - 2'));
    expect(root?.dimensionByRange).toEqual([3, 4, 5]);
    expect(root?.point).toBeNull();
    const never = classifyNow(parseFamily('XX + YY + 2 ZZ + (a^2 + b^2 + 1) X'), { range: 3 });
    expect(never.cases.map((c) => c.dimensionByRange)).toEqual([[0, 1, 1]]);
    const once = classifyNow(parseFamily('XX + YY + 2 ZZ + (a^2 + a b + b^2) X'), { range: 3 });
    expect(once.cases.map((c) => `${c.dimensionByRange}`).sort()).toEqual(['0,1,1', '1,2,3']);
    expect(once.cases.find((c) => c.equations.length === 2)?.point?.map((r) => r.numerator)).toEqual([
      0n,
      0n,
    ]);
  });

  it('has no point in two cases', () => {
    for (const a of xyz.cases)
      for (const b of xyz.cases)
        if (a !== b) {
          const both = imposeAll(a.where, b.equations).flatMap((c) => {
            let rest: typeof c | undefined = c;
            for (const p of b.nonZero) rest = rest && exclude(rest, p);
            return rest === undefined ? [] : [rest];
          });
          expect(both.length).toBe(0);
        }
  });

  it('knows the classification of symmetric nearest-neighbour chains, as far as range 3 shows it', () => {
    // "Complete classification of integrability and non-integrability for spin-1/2 chain with symmetric nearest-neighbor
    // interaction", arXiv:2411.02162 (2024), for three non-zero couplings: the loci of a range-3 charge.
    const names = XYZ_IN_A_FIELD.parameters;
    const lines = xyzAnswers.map((a) => [
      `${a.dimensionByRange}`,
      ...a.loci.map((l) => `${l.equations.map((p) => p.toString(names))} +${l.equivalent.length}`),
    ]);
    expect(lines[0]).toEqual(['0,1,1', ' +0']);
    expect(lines[1]).toEqual(['0,1,2', 'hx,hy,hz +0']);
    expect(lines[2]!.length).toBe(3);
    expect(xyzAnswers[2]!.loci.map((l) => l.equivalent.length)).toEqual([0, 2]);
    expect(xyzAnswers.every((a) => a.loci.every((l) => l.except.length === 0))).toBe(true);
  });
});

describe('published and computed loci of the catalogue', () => {
  // Sources beside the entries in src/model/catalogue/families. The range-3 search of cells of two spins takes longer: test/long.
  for (const entry of FAMILIES.filter((f) => f.cell === 1)) {
    it(entry.id, () => {
      const family = parseFamily(entry.formula, { cell: entry.cell });
      const result = entry.id === 'xyz-in-a-field' ? xyz : classifyNow(family, { range: entry.range });
      expectLocus(result, entry);
    });
  }
});

function expectLocus(
  result: FamilyResult,
  { exceptionalWhere, assuming, range }: (typeof FAMILIES)[number],
): void {
  const names = result.family.parameters;
  const assumed = assuming.map((text) => polynomial(text, names));
  const vanishing = exceptionalWhere.map((text) => polynomial(text, names));
  const general = result.cases.find((c) => c.equations.length === 0)!.dimensionByRange[range - 1]!;
  let seen = 0;
  for (const c of result.cases) {
    let where: typeof c.where | undefined = c.where;
    for (const p of assumed) where = where && exclude(where, p);
    if (where === undefined) continue;
    const more = c.dimensionByRange[range - 1]! > general;
    const inside = vanishing.every((p) => reduceOn(where!, p).isZero());
    expect(inside, c.equations.map((p) => p.toString(names)).join(', ')).toBe(more);
    // A case is inside or outside as a whole.
    if (!inside) expect(imposeAll(where, vanishing)).toEqual([]);
    if (inside) seen++;
  }
  expect(seen).toBeGreaterThan(0);
}

function randomFamily(random: Random) {
  const words = ['XX', 'YY', 'ZZ', 'XY', 'ZX', 'X', 'Z', 'XIX', 'ZZZ'];
  const coefficients = ['a', 'b', '(a - b)', '(a + 1)', '2 a', 'b^2', '(a b - 1)', '1', '3', '(a^2 - b)'];
  for (;;) {
    const terms = random.shuffle(words).slice(0, random.integer(2, 4));
    const formula = terms.map((word) => `${random.pick(coefficients)} ${word}`).join(' + ');
    if (/a/.test(formula)) return parseFamily(formula);
  }
}

describe('every range, at a point of each set', () => {
  it('knows the non-interacting, the integrable and the non-integrable sets of XYZ in a field', () => {
    // arXiv:2411.02162 (2024): of the sets without free spins, the integrable ones are those with more than H up to range 3.
    const verdicts = [...everyRangeOf(XYZ_IN_A_FIELD, xyzAnswers)];
    expect(verdicts.length).toBeGreaterThan(8);
    for (const { locus, verdict } of verdicts) {
      const counts = locus.general.dimensionByRange;
      if (counts[2] === 1) expect(verdict.kind).toBe('none');
      if (counts[0] === 0 && counts[2]! > 1)
        expect(verdict).toMatchObject({ kind: 'complete', perRange: counts[2]! - counts[1]! });
    }
    expect(verdicts[0]!.locus.equations).toEqual([]);
  });
});

describe('symmetries of a family', () => {
  it('are exchanges of axes with their parameters, and signs', () => {
    const renamings = symmetriesOf(XYZ_IN_A_FIELD);
    // 6 exchanges × 8 signs of the field × the sign of H, less the identity.
    expect(renamings.length).toBe(95);
    expect(symmetriesOf(parseFamily('a XX + 2 a YY + b Z')).every((r) => r.image[0] === 0)).toBe(true);
  });
});

describe('a run', () => {
  it('refuses what it cannot take', async () => {
    expect(() => classifyNow(parseFamily('XX + Z'), { range: 3 })).toThrow(InputError);
    expect(() => classifyNow(parseFamily('a XX'), { range: 0 })).toThrow(InputError);
    expect(() => classifyNow(parseFamily('a XX + Z'), { range: 9 })).toThrow(LimitError);
    expect(() => parseFamily('XX / a + Z')).toThrow(InputError);
  });

  it('stops on abort, and goes on from a state', async () => {
    const family = parseFamily('ZZ + g X + h Z');
    const whole = classifyNow(family, { range: 3 });
    const control = new AbortController();
    let state: FamilyState | undefined;
    const run = classify(family, {
      range: 3,
      signal: control.signal,
      onState(s) {
        state = s;
        if (s.closed.length === 2) control.abort();
      },
    });
    await expect(run).rejects.toThrow(CancelledError);
    const rest = classifyNow(family, { range: 3, resume: state! });
    expect(rest.cases).toEqual(whole.cases);
    await expect(classify(family, { range: 3 })).resolves.toMatchObject({ range: 3 });
  });

  it('reports open and closed cases, and stops when the report throws', () => {
    const counts: number[] = [];
    classifyNow(parseFamily('ZZ + g X'), { range: 3, onProgress: ({ closed }) => void counts.push(closed) });
    expect(counts.length).toBeGreaterThan(2);
    expect([...counts].sort((a, b) => a - b)).toEqual(counts);
    const stop = new Error('stop');
    expect(() =>
      classifyNow(parseFamily('ZZ + g X'), {
        range: 3,
        onProgress: () => {
          throw stop;
        },
      }),
    ).toThrow(stop);
  });
});
