import { describe, expect, it } from 'vitest';
import { parseModel } from '../../src/model/formula.ts';
import { labelCharges, namedSymmetries } from '../../src/physics/symmetries.ts';
import { searchNow } from '../../src/search/search.ts';

const labels = (formula: string, range: number, cell = 1) =>
  labelCharges(searchNow(parseModel(formula, { cell }), { range }));

describe('labelCharges', () => {
  it('XXX: spins, H, and what is new, all singlets but the spins', () => {
    const found = labels('XX + YY + ZZ', 4);
    expect(found.map((l) => l.kind)).toEqual(['spin', 'spin', 'spin', 'hamiltonian', 'new', 'new']);
    expect(found.map((l) => l.multiplet)).toEqual([1, 1, 1, 0, 0, 0]);
    expect(found[2]!.text).toBe('total spin along Z');
  });

  it('XX: everything is bilinear', () => {
    expect(labels('XX + YY', 4).map((l) => l.kind)).toEqual([
      'spin',
      'hamiltonian',
      ...Array.from({ length: 5 }, () => 'bilinear'),
    ]);
  });

  it('SU(4) ladder: spins of either leg, the rest of the cell symmetry, H', () => {
    // (1 + s·s′)(1 + t·t′): "SU(4) ladder" by common practice, no source.
    const formula =
      'XIXI + YIYI + ZIZI + IXIX + IYIY + IZIZ + XXXX + XYXY + XZXZ + YXYX + YYYY + YZYZ + ZXZX + ZYZY + ZZZZ';
    const kinds = labels(formula, 2, 2).map((l) => l.kind);
    expect(kinds.filter((k) => k === 'spin')).toHaveLength(6);
    expect(kinds.filter((k) => k === 'on-site')).toHaveLength(9);
    expect(kinds.at(-1)).toBe('hamiltonian');
  });

  it('three-spin chain ZZX: counts grow by strictly local symmetries', () => {
    // Counts [0,0,2,1,3,4,9,16] and the mechanism: "Free fermions in disguise", arXiv:1901.08078, 2019.
    const model = parseModel('ZZX');
    const result = searchNow(model, { range: 6 });
    const found = labelCharges(result);
    // XZZ is conserved at every site (each term of H shares two anticommuting letters with it, or none); all but one of the others are products.
    expect(found.map((l) => l.kind)).toEqual([
      'strictly-local',
      'hamiltonian',
      'product',
      'product',
      'product',
      'new',
      'product',
      'product',
      'product',
      'product',
    ]);
    expect(found[0]!.text).toContain('not with every other');
  });

  it('classical chain: products of strictly local charges', () => {
    const kinds = labels('ZZ + 1/3 Z', 4).map((l) => l.kind);
    expect(kinds).toContain('product');
  });
});

describe('namedSymmetries', () => {
  it('SU(2), parities, staggered charges', () => {
    expect(namedSymmetries(parseModel('XX + YY + ZZ'))).toMatchObject({ su2: [[0]], parities: ['X', 'Z'] });
    expect(namedSymmetries(parseModel('ZZ + X')).parities).toEqual(['X']);
    expect(namedSymmetries(parseModel('ZZ + X + Z'))).toMatchObject({ su2: [], parities: [], staggered: [] });
    // Computed, no source: J_a = −J_b with the field along the third axis conserves Σ(−1)^j Z_j.
    expect(namedSymmetries(parseModel('-XX + YY + 2 ZZ + 3 Z')).staggered.map(String)).toEqual(['Z']);
    // A two-leg Heisenberg ladder: the total spin, but not the spin of a leg; decoupled legs have both.
    const legs = 'XIXI + YIYI + ZIZI + IXIX + IYIY + IZIZ';
    expect(namedSymmetries(parseModel(`${legs} + XX + YY + ZZ`, { cell: 2 })).su2).toEqual([[0, 1]]);
    expect(namedSymmetries(parseModel(legs, { cell: 2 })).su2).toEqual([[0, 1], [0], [1]]);
  });
});
