import { describe, expect, it } from 'vitest';
import { parseDensity, parseModel, searchNow } from '../../src/index.ts';
import { groupTerms, symmetriesOf } from '../../src/report/grouping.ts';
import { foldGroups, printCharge, printDensity, printResult } from '../../src/report/text.ts';
import { CAUTIONS } from '../../src/report/verdict.ts';
import { property } from '../support/random.ts';

const xyz = parseModel('2 XX + 3 YY + 5 ZZ');

describe('densities', () => {
  it('are printed as the paper does: Q3 of the XYZ chain', () => {
    // "Structure of the conservation laws in integrable spin chains", hep-th/9411045 (1995), with Jx, Jy, Jz = 2, 3, 5.
    const q3 = searchNow(xyz, { range: 3 }).charges.at(-1)!;
    expect(printDensity(xyz, q3.density)).toBe('10 (XYZ - ZYX) - 6 (XZY - YZX) - 15 (YXZ - ZXY)');
  });

  property('read back as what they are', 200, (random) => {
    const cell = random.integer(1, 3);
    const h = random.hamiltonian({ cell, terms: random.integer(1, 12) });
    expect(h.chain.normalise(parseDensity(printDensity(h, h.density), { cell }))).toEqual(h.density);
  });

  it('pull out a common factor', () => {
    const h = parseModel('1/2 XX + 3 X - 1/4 Z');
    expect(printDensity(h, h.density)).toBe('1/4 (2 XX + 12 X - Z)');
    const single = parseModel('-2/3 XX');
    expect(printDensity(single, single.density)).toBe('-2/3 XX');
  });
});

describe('symmetries', () => {
  it('are found, signs of a rotation included', () => {
    expect(symmetriesOf(parseModel('XX + YY + ZZ'))).toHaveLength(12);
    expect(symmetriesOf(xyz)).toHaveLength(2);
    // A quarter turn about X takes Y to Z and Z to −Y, which leaves the antisymmetric exchange as it is.
    expect(symmetriesOf(parseModel('YZ - ZY')).map((s) => s.letters)).toContain('XZY');
    expect(symmetriesOf(parseModel('X + 2 Z'))).toHaveLength(2);
  });

  it('gather the strings of the isotropic chain into orbits', () => {
    const h = parseModel('XX + YY + ZZ');
    const q3 = searchNow(h, { range: 3 }).charges.at(-1)!;
    const { groups } = groupTerms(h, q3.density);
    expect(groups).toHaveLength(1);
    expect(groups[0]).toMatchObject({ pattern: '***', range: 3, orbits: 1 });
  });
});

describe('folding', () => {
  const result = searchNow(xyz, { range: 6 });

  it('loses no string: what is shown and what is counted add up', () => {
    for (const charge of result.charges)
      for (const fold of [1, 5, 20, 1000]) {
        const { shown, rest } = foldGroups(groupTerms(xyz, charge.density), fold);
        const count = (groups: typeof rest) => groups.reduce((sum, g) => sum + g.terms.length, 0);
        expect(count(shown.groups) + count(rest)).toBe(charge.density.size);
        const text = printCharge(charge, xyz, { fold });
        if (rest.length > 0)
          expect(text).toContain(`and ${count(rest)} string${count(rest) === 1 ? '' : 's'} more`);
        else expect(text).not.toContain('more');
      }
  });

  it('keeps lines within the width, and says everything', () => {
    const text = printResult(result, { width: 60, fold: 10 });
    for (const line of text.split('\n')) expect(line.length, line).toBeLessThanOrEqual(60);
    const plain = text.replace(/\s+/g, ' ');
    expect(plain).toContain('Exactly 5 independent charges of range ≤ 6; the list is complete.');
    expect(plain).toContain('rings of 13 cells or more');
    for (const caution of CAUTIONS) expect(plain).toContain(caution);
  });

  it('says the same with colour as without', () => {
    // biome-ignore lint/suspicious/noControlCharactersInRegex: the escape sequences are what is tested
    const stripped = printResult(result, { colour: true }).replace(/\u001b\[\d+m/g, '');
    expect(stripped).toBe(printResult(result));
  });
});

describe('verdicts', () => {
  it('tell the cases apart', () => {
    const first = (formula: string, range: number) =>
      printResult(searchNow(parseModel(formula), { range })).split('\n')[0];
    expect(first('XX + 2 YY + 3 ZZ + X + Z', 4)).toBe(
      'H is the only charge of range ≤ 4; there is no other.',
    );
    expect(first('XX + YY + ZXZ + X', 1)).toBe('No charge of range ≤ 1 exists.');
    expect(first('XX + YY + Z', 3)).toMatch(/^Exactly 5 independent charges/);
  });
});
