/** Every-range certificates: written by the theory layer, judged by the independent checker, refused when tampered with. */
import { describe, expect, it } from 'vitest';
import type { Operator } from '../../src/algebra/operator.ts';
import { checkNow } from '../../src/check/check.ts';
import { HalfSteps } from '../../src/check/half-steps.ts';
import { parseModel } from '../../src/model/formula.ts';
import { everyRangeCertificate } from '../../src/theory/certificate.ts';
import { everyRangeBound } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
import { HalfStepGrowth, halfSteps } from '../../src/theory/half-steps.ts';
import { property } from '../support/random.ts';

const MODELS: readonly (readonly [formula: string, atMost: number])[] = [
  ['2 XX + 3 YY + 5 ZZ + Z', 0],
  ['XX + YY + X', 0],
  ['2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z', 0],
  ['2/3 XX + 3 YY + 5 ZZ + XY - YX', 0],
  ['2 XX + 3 YY + 5 ZZ', 1],
  ['XX + YY + Z', 2],
];

describe('every-range certificates', () => {
  it.each(MODELS)('%s: at most %i of every range, accepted', (formula, atMost) => {
    const verdict = checkNow(everyRangeCertificate(parseModel(formula)));
    expect(verdict).toMatchObject({ status: 'accepted', kind: 'every-range' });
    expect(verdict.status === 'accepted' && verdict.statement).toMatch(
      atMost === 0 ? /no translation-invariant/ : new RegExp(`at most ${atMost} dimension`),
    );
  });

  it('is rejected when it claims too little, about another model, or with false evidence', () => {
    const one = everyRangeCertificate(parseModel('2 XX + 3 YY + 5 ZZ'));
    const none = everyRangeCertificate(parseModel('2 XX + 3 YY + 5 ZZ + Z'));
    const noneStatement = /"claim":\{.*?"assumes"/.exec(none)![0];
    const forged = [
      // No charge where there is one: no minor to show.
      one.replace(/"claim":\{.*?"assumes"/, noneStatement),
      one.replace(/"claim":\{.*?"assumes"/, noneStatement).replace('"minors":[]', '"minors":[[[0],[0]]]'),
      // The proof of one model does not prove another.
      none.replace('["Z","1"],', ''),
      none.replace('["Z","1"]', '["X","1"]'),
      none.replace(/"minors":.*\]\}\}/, '"minors":[]}}'),
      none.replace(/"functionals":\[\[\["(\w+)","/, '"functionals":[[["$1","7'),
      none.replace(/"topParts":\[.*?\]\]\]/, '"topParts":[]').replace(/"free":\[.*?\]/, '"free":[]'),
      none.replace(/"prime":\d+/, '"prime":67108857'),
      none.replace('"from":3', '"from":2'),
    ];
    forged.forEach((text, i) => {
      expect([i, text === one || text === none]).toEqual([i, false]);
      expect([i, checkNow(text).status]).toEqual([i, expect.stringMatching(/rejected|malformed/)]);
    });
  });

  it('does not certify chains that are not injective, in the writer or in the checker', () => {
    expect(() => everyRangeCertificate(parseModel('ZZ + Z'))).toThrow(/not injective/);
    const empty = everyRangeCertificate(parseModel('2 XX + 3 YY + 5 ZZ + Z'));
    const ising = empty.replace(/"terms":\[\["XX".*?\]\]\}/, '"terms":[["X","2"],["Z","3"],["ZZ","1"]]}');
    expect(checkNow(ising)).toMatchObject({ status: 'rejected', reason: expect.stringMatching(/injective/) });
  });

  property(
    'random chains: whatever is written is accepted, and claims the bound of the pencil',
    25,
    (random) => {
      const terms = ['XX', 'YY', 'ZZ', 'XY', 'YX', 'XZ', 'X', 'Y', 'Z']
        .filter(() => random.chance(0.5))
        .map((word) => `${random.nonZero(3)} ${word}`);
      if (terms.length === 0) return;
      const h = parseModel(terms.join(' + ').replaceAll('+ -', '- '));
      const model = decompose(h)!;
      const bound = everyRangeBound(model);
      if ('reason' in bound || bound.method !== 'cells') return;
      const text = everyRangeCertificate(h);
      expect(checkNow(text)).toMatchObject({ status: 'accepted' });
      const { claim } = JSON.parse(text) as { claim: { atMost: number } };
      expect(claim.atMost).toBe(Math.max(bound.generic, ...bound.exceptional.map((e) => e.atMost)));
    },
  );
});

describe('every-range certificates of two spins a cell', () => {
  const hubbard = parseModel('XIXI + YIYI + IXIX + IYIY + 3 ZZ', { cell: 2 });
  const broken = parseModel('XIXI + YIYI + IXIX + IYIY + 3 ZZ + ZI + 2 IZ + XI', { cell: 2 });

  it.each([
    [hubbard, 1],
    [broken, 0],
    [parseModel('XIXI + 2 YIYI + 3 ZIZI + 4 IXIX + 5 IYIY + 7 IZIZ + XX + YIIX', { cell: 2 }), 0],
  ] as const)('%s: at most %i of every range, accepted', (h, atMost) => {
    const verdict = checkNow(everyRangeCertificate(h));
    expect(verdict).toMatchObject({ status: 'accepted', kind: 'every-range-modular' });
    const bound = everyRangeBound(decompose(h)!);
    expect('generic' in bound && bound.generic).toBe(atMost);
    expect(verdict.status === 'accepted' && verdict.statement).toMatch(
      atMost === 0 ? /no translation-invariant/ : /at most 1 dimension/,
    );
  });

  it('is rejected when it claims too little, about another model, or with false evidence', () => {
    const one = everyRangeCertificate(hubbard);
    const none = everyRangeCertificate(broken);
    const noneStatement = /"claim":\{.*?"assumes"/.exec(none)![0];
    const forged = [
      one.replace(/"claim":\{.*?"assumes"/, noneStatement),
      // With the field of the other model gone, there is a charge of every range.
      none.replace(/"terms":\[\["IX.*?\]\]\}/, /"terms":\[\["IX.*?\]\]\}/.exec(one)![0]),
      none.replace('"root":"-2"', '"root":"-1"'),
      none.replace('"root":"-2"', '"root":"2"'),
      none.replace('"root":"-2"', `"root":"${67108859 - 2}"`),
      none.replace('"root":"-2"', `"root":"-${67108859 + 2}"`),
      none.replace(/"witnesses":.*\]\}\}/, '"witnesses":[]}}'),
      none.replace(/"parts":\[.*?\]/, '"parts":["0","0","0","0"]'),
      none.replace(/"x":\[\["(\w+)","/, '"x":[["$1","7'),
      none.replace(/"topParts":\[.*?\]\]\]/, '"topParts":[]').replace(/"free":\[.*?\]/, '"free":[]'),
      none.replace(/"prime":\d+/, '"prime":67108857'),
      none.replace(/"prime":\d+/, '"prime":3'),
      none.replace('"every-range-modular"', '"every-range"'),
    ];
    forged.forEach((text, i) => {
      expect([i, text === one || text === none]).toEqual([i, false]);
      expect([i, checkNow(text).status]).toEqual([i, expect.stringMatching(/rejected|malformed/)]);
    });
  });

  property(
    'random ladders: whatever is written is accepted, and claims the bound of the pencil',
    8,
    (random) => {
      const legs = ['XIXI', 'YIYI', 'ZIZI', 'IXIX', 'IYIY', 'IZIZ'].map(
        (word) => `${random.nonZero(3)} ${word}`,
      );
      const others = ['XX', 'YY', 'ZZ', 'XIIY', 'IZXI', 'XI', 'IZ', 'ZX']
        .filter(() => random.chance(0.4))
        .map((word) => `${random.nonZero(3)} ${word}`);
      const h = parseModel([...legs, ...others].join(' + ').replaceAll('+ -', '- '), { cell: 2 });
      const bound = everyRangeBound(decompose(h)!);
      if ('reason' in bound || bound.method !== 'cells') return;
      const text = everyRangeCertificate(h);
      expect(checkNow(text)).toMatchObject({ status: 'accepted' });
      const { claim } = JSON.parse(text) as { claim: { atMost: number } };
      expect(claim.atMost).toBe(Math.max(bound.generic, ...bound.exceptional.map((e) => e.atMost)));
    },
  );
});

describe('every-range certificates by half steps', () => {
  it.each([
    ['ZZ + X', 2],
    ['3 ZZ + X', 2],
    ['XX + 2 Z + Y', 2],
    ['ZZ + X + Z', 0],
    ['2 ZZ + 3 X + 5 Y + 7 Z', 0],
    ['1/2 YY + 2/3 X + Y', 0],
  ] as const)('%s: at most %i of every range from 5 on, accepted', (formula, atMost) => {
    const h = parseModel(formula);
    const verdict = checkNow(everyRangeCertificate(h));
    expect(verdict).toMatchObject({ status: 'accepted', kind: 'half-steps' });
    const bound = everyRangeBound(decompose(h)!);
    expect('generic' in bound && [bound.from, bound.generic]).toEqual([5, atMost]);
    expect(verdict.status === 'accepted' && verdict.statement).toMatch(
      atMost === 0 ? /for every k of 5 or more, there is no/ : /at most 2 dimensions/,
    );
  });

  it('is rejected when it claims too little, about another model, or with false evidence', () => {
    const two = everyRangeCertificate(parseModel('ZZ + X'));
    const none = everyRangeCertificate(parseModel('ZZ + X + Z'));
    const noneStatement = /"claim":\{.*?"assumes"/.exec(none)![0];
    const field = (terms: string) => none.replace(/"terms":\[\["X".*?\]\]\}/, `"terms":[${terms}]}`);
    const forged = [
      two.replace(/"claim":\{.*?"assumes"/, noneStatement),
      // The transverse field alone leaves two charges of every range; the longitudinal one has no half steps.
      field('["X","1"],["ZZ","1"]'),
      field('["Z","1"],["ZZ","1"]'),
      field('["X","1"],["Z","1"],["ZX","1"]'),
      field('["X","1"],["XX","1"],["Z","1"],["ZZ","1"]'),
      none.replace('"from":5', '"from":3'),
      none.replace('"atMost":0', '"atMost":1'),
      none.replace('"root":"-5"', '"root":"-4"'),
      none.replace('"root":"-5"', '"root":"5"'),
      none.replace(/"witnesses":.*\]\}\}/, '"witnesses":[]}}'),
      none.replace(/"x":\[\["(\w+)","/, '"x":[["$1","7'),
      none.replace(/"topParts":\[.*?\]\]\]/, '"topParts":[]').replace(/"free":\[.*?\]/, '"free":[]'),
      none.replace(/"prime":\d+/, '"prime":67108857'),
      none.replace('"half-steps"', '"every-range-modular"'),
    ];
    forged.forEach((text, i) => {
      expect([i, text === two || text === none]).toEqual([i, false]);
      expect([i, checkNow(text).status]).toEqual([i, expect.stringMatching(/rejected|malformed/)]);
    });
  });

  property('random fields and bonds along an axis: accepted, with the bound of the pencil', 20, (random) => {
    const bond = random.pick(['XX', 'YY', 'ZZ']);
    const fields = ['X', 'Y', 'Z'].filter(() => random.chance(0.7)).map((w) => `${random.nonZero(5)} ${w}`);
    const h = parseModel([`${random.nonZero(5)} ${bond}`, ...fields].join(' + ').replaceAll('+ -', '- '));
    const bound = everyRangeBound(decompose(h)!);
    if ('reason' in bound) return;
    const text = everyRangeCertificate(h);
    expect(checkNow(text)).toMatchObject({ status: 'accepted' });
    const { claim } = JSON.parse(text) as { claim: { atMost: number } };
    expect(claim.atMost).toBe(bound.generic);
  });

  it('the checker grows strings as the theory layer does', () => {
    for (const formula of ['2 ZZ + 3 X + 5 Y + 7 Z', '3 XX + Y']) {
      const model = decompose(parseModel(formula))!;
      const steps = halfSteps(model);
      if (!steps.ok) throw new Error(steps.reason);
      const own = new HalfStepGrowth(steps.letters);
      const density = ({ numerators }: Operator) =>
        new Map([...numerators].map(([word, value]) => [Number(word), value] as const));
      const checker = new HalfSteps(density(model.bond), density(model.field), 67108859);
      for (const length of [3, 4, 5, 6])
        expect(checker.strings(length)).toHaveLength(own.strings(length).length);
    }
  });

  it('refuses a bond along no axis', () => {
    expect(() => everyRangeCertificate(parseModel('XX + 2 XY + 2 YX + 4 YY + Z'))).toThrow(/along X, Y or Z/);
  });
});
