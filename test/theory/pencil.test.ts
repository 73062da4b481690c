/** The bounds for every range against exhaustive counts, against a second evaluation, and the traps. */
import { describe, expect, it } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { parseModel } from '../../src/model/formula.ts';
import type { Hamiltonian } from '../../src/model/hamiltonian.ts';
import { searchNow } from '../../src/search/search.ts';
import { decide, everyRangeBound } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
import { CellGrowth, injectivity } from '../../src/theory/growth.ts';
import { ladderBase } from '../../src/theory/ladder.ts';
import { boundsOf, dimensionAt, type Pencil } from '../../src/theory/pencil.ts';
import type { EveryRangeBound } from '../../src/theory/verdict.ts';
import { property } from '../support/random.ts';

function boundOf(h: Hamiltonian): EveryRangeBound {
  const bound = everyRangeBound(decompose(h)!);
  if ('reason' in bound) throw new Error(bound.reason);
  return bound;
}

function counts(h: Hamiltonian, range: number): number[] {
  const { dimensionByRange } = searchNow(h, { range });
  return dimensionByRange.map((d, j) => d - (dimensionByRange[j - 1] ?? 0));
}

const at = (bound: EveryRangeBound, range: number) =>
  bound.exceptional.find((e) => e.range === range)?.atMost ?? bound.generic;

/** For these the bound was found attained by two independent throw-away programs; the counts here are this library's search. */
const INJECTIVE: readonly (readonly [formula: string, cell: number, range: number])[] = [
  ['XX + YY + X', 1, 6],
  ['2 XX + 3 YY + 5 Z', 1, 6],
  ['XX + YY + 2 X + 3 Z', 1, 5],
  ['XX + YY + 1/3 ZZ + XY - YX', 1, 5],
  ['2 XX + 3 YY + 5 ZZ', 1, 6],
  ['2 XX + 3 YY + 5 ZZ + XY - YX', 1, 5],
  ['2 XX + 3 YY + 5 ZZ + X - Z', 1, 5],
  ['XX + YY + 3 ZZ + Y', 1, 5],
  ['XX + YY + ZZ + X + Y + Z', 1, 5],
  ['XX + YY', 1, 5],
  ['XY + YX', 1, 5],
  ['XY + 2 YX + Z', 1, 5],
  ['XZ + ZY + YX', 1, 5],
  ['XX + 2 XZ + 2 ZX + 3 YY', 1, 4],
  ['XIXI + YIYI + IXIX + IYIY + 3 ZZ', 2, 3],
  ['XIXI + YIYI + IXIX + IYIY + 3 ZZ + ZIZI', 2, 3],
  ['XX + 2 YY + 3 ZZ + YZ - ZY', 1, 5],
  ['XIXI + YIYI + ZIZI + IXIX + IYIY + IZIZ + XX + YY + ZZ', 2, 3],
  ['XIXI + YIYI + ZIZI + IXIX + IYIY + IZIZ + XX', 2, 3],
  ['XIXI + 2 YIYI + 3 ZIZI + IXIX + IYIY + 3 IZIZ + XZ', 2, 3],
];

describe('dim N(k) against exhaustive counts', () => {
  it.each(INJECTIVE)('%s, %i spins a cell, to range %i', (formula, cell, range) => {
    const h = parseModel(formula, { cell });
    const bound = boundOf(h);
    expect(bound.method).toBe('cells');
    const found = counts(h, range);
    for (let k = 3; k <= range; k++) expect([k, at(bound, k)]).toEqual([k, found[k - 1]]);
  });

  it('is a bound and no more: with unequal hopping one top part passes range 3, and no charge has it', () => {
    const h = parseModel('XIXI + YIYI + 2 IXIX + 2 IYIY + 3 ZZ', { cell: 2 });
    expect(at(boundOf(h), 3)).toBe(1);
    expect(counts(h, 3)).toEqual([2, 1, 0]);
    expect(decide(h).kind).toBe('bounded');
  });

  property('random symmetric and antisymmetric couplings and fields, one spin a cell', 24, (random) => {
    const terms: [bigint, bigint][] = [];
    const symmetric = random.chance(0.5);
    for (let a = 1n; a < 4n; a++) {
      if (random.chance(0.4)) terms.push([a, BigInt(random.nonZero(3))]);
      for (let b = 1n; b <= a; b++)
        if (random.chance(0.6)) {
          const value = BigInt(random.nonZero(3));
          terms.push([a | (b << 2n), value]);
          if (a !== b) terms.push([b | (a << 2n), symmetric ? value : -value]);
        }
    }
    const density = Operator.fromIntegers(terms);
    if (density.isZero()) return;
    const h = parseModel(density.toString());
    const model = decompose(h)!;
    const kernel = injectivity(model);
    if (model.bond.isZero() || kernel.left.length + kernel.right.length > 0) return;
    const bound = boundOf(h);
    const found = counts(h, 4);
    expect([at(bound, 3), at(bound, 4)]).toEqual([found[2], found[3]]);
  });

  // The counts of such cells take seconds: wide-cells.long.ts.
  it('three spins a cell: a tube of Heisenberg chains is injective and has top parts', () => {
    const legs = [0, 1, 2].flatMap((s) => ['X', 'Y', 'Z'].map((p) => `${'I'.repeat(s)}${p}II${p}`));
    const rungs = ['X', 'Y', 'Z'].flatMap((p) => [`${p}${p}`, `I${p}${p}`]);
    const h = parseModel([...legs, ...rungs].join(' + '), { cell: 3 });
    const model = decompose(h)!;
    expect(injectivity(model)).toEqual({ left: [], right: [] });
    expect(new CellGrowth(model).topParts().length).toBeGreaterThan(0);
  });
});

describe('the pencil', () => {
  property('bounds for all t agree with the rank at each t, planted integer roots included', 40, (random) => {
    const columns = random.integer(1, 3);
    const rows = random.integer(0, 4);
    const constant: bigint[][] = [];
    const linear: bigint[][] = [];
    for (let i = 0; i < rows; i++) {
      const slope = Array.from({ length: columns }, () => BigInt(random.integer(-2, 2)));
      const root = BigInt(random.integer(-3, 6));
      linear.push(slope);
      constant.push(slope.map((s) => (random.chance(0.6) ? -s * root : BigInt(random.integer(-3, 3)))));
    }
    const pencil: Pencil = { columns, constant, linear };
    const { generic, exceptional } = boundsOf(pencil, 0);
    for (let t = 0; t < 30; t++)
      expect([t, exceptional.find((e) => e.t === t)?.dimension ?? generic]).toEqual([
        t,
        dimensionAt(pencil, BigInt(t)),
      ]);
  });

  it('has β ≡ α/2 for the top part h itself, as the Jacobi identity says', () => {
    const growth = new CellGrowth(decompose(parseModel('2 XX + 3 YY + 5 ZZ + 7 X'))!);
    const { pencil } = growth.pencil();
    expect(pencil.columns).toBe(1);
    for (const [i, row] of pencil.constant.entries()) expect(row[0]).toBe(2n * pencil.linear[i]![0]!);
  });
});

describe('traps', () => {
  it('mixed-field Ising passes the range-3 condition and is not called integrable', () => {
    const h = parseModel('ZZ + 2 X + 3 Z');
    const growth = new CellGrowth(decompose(h)!);
    // Without injectivity the computation runs and says nothing: some top part goes through at range 3.
    expect(dimensionAt(growth.pencil().pencil, 0n)).toBeGreaterThan(0);
    expect(decide(h)).toMatchObject({ kind: 'none', from: 3, bound: { method: 'half steps' } });
  });

  it('a ladder that fails proves nothing: the Hubbard ladder has none and a charge of every range searched', () => {
    const h = parseModel('XIXI + YIYI + IXIX + IYIY + 3 ZZ', { cell: 2 });
    expect(ladderBase(h)).toBeUndefined();
    expect(decide(h)).toMatchObject({ kind: 'bounded', bound: { generic: 1 }, existence: null });
  });

  it('blocking destroys injectivity, so nearest-neighbour chains stay as they are', () => {
    const blocked = parseModel('2 XX + 3 YY + 5 ZZ + 2 IXX + 3 IYY + 5 IZZ', { cell: 2 });
    expect(decide(blocked).kind).toBe('undecided');
    expect(decompose(parseModel('2 XX + 3 YY + 5 ZZ'))!.group).toBe(1);
  });

  it('classical and decoupled chains are refused or counted as what they are', () => {
    expect(decide(parseModel('ZZ + Z')).kind).toBe('undecided');
    expect(decide(parseModel('X + Z')).kind).toBe('undecided');
  });

  it('uses a citation only where its own lemmas do not reach', () => {
    expect(decide(parseModel('ZZ + 1/2 ZIZ + X'))).toMatchObject({
      kind: 'by citation',
      citation: { theorem: { id: 'zigzag-non-integrable' } },
    });
    expect(decide(parseModel('YX + XY + 2 XIX + 3 Z'))).toMatchObject({
      kind: 'by citation',
      citation: { theorem: { id: 'zigzag-integrable' } },
    });
    expect(decide(parseModel('XX + YY + ZZ + XIX + YIY + ZIZ'))).toMatchObject({ kind: 'none', from: 4 });
  });

  it('says with every verdict what it does not show', () => {
    for (const formula of ['ZZ + X', 'ZZ + Z', 'XX + YY + X'])
      expect(decide(parseModel(formula)).cautions.join(' ')).toMatch(/quasilocal[\s\S]*chaos/);
  });
});
