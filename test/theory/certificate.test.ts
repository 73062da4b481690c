/** Every-range certificates: written by the theory layer, judged by the independent checker, refused when tampered with. */
import { describe, expect, it } from 'vitest';
import { checkNow } from '../../src/check/check.ts';
import { parseModel } from '../../src/model/formula.ts';
import { everyRangeCertificate } from '../../src/theory/certificate.ts';
import { everyRangeBound } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
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
    expect(() => everyRangeCertificate(parseModel('ZZ + X + Z'))).toThrow(/not injective/);
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
