import { describe, expect, test } from 'vitest';
import { primeField } from '../../src/linear/field.ts';
import { WeightedForest } from '../../src/linear/forest.ts';
import { echelonForm } from '../support/dense.ts';
import { property } from '../support/random.ts';

/** A forest of elements 1 … size with the zero root beyond them. */
function forestOf(size: number, p: number): WeightedForest {
  return new WeightedForest(size, size + 1, primeField(p));
}

/** x_a = factor · x_b; whether it told something new. */
function equate(forest: WeightedForest, a: number, factor: number, b: number): boolean {
  const before = forest.uses;
  forest.tie(a, 1, b, forest.field.p - factor);
  return forest.uses > before;
}

/** The forest's answer as equations: x_e − w·x_root = 0, or x_e = 0. */
function equationsOf(forest: WeightedForest, size: number): bigint[][] {
  const rows: bigint[][] = [];
  for (let e = 1; e <= size; e++) {
    const row = new Array<bigint>(size).fill(0n);
    const root = forest.root(e);
    if (root === forest.zero) row[e - 1] = 1n;
    else if (root !== e) {
      row[e - 1] = 1n;
      row[root - 1]! -= BigInt(forest.rootWeight);
    }
    rows.push(row);
  }
  return rows;
}

describe('weighted union-find against dense elimination', () => {
  property('random ties and zeros describe the same space', 150, (random) => {
    const p = random.pick([3, 5, 101, 67_108_859]);
    const size = random.integer(1, 14);
    const forest = forestOf(size, p);
    const rows: bigint[][] = [];
    // Few factors over small fields, so cycles close both consistently and not.
    for (let i = random.below(20); i > 0; i--) {
      const row = new Array<bigint>(size).fill(0n);
      const a = random.below(size);
      const before = echelonForm(rows, BigInt(p)).length;
      let learnt: boolean | null = null;
      if (random.chance(0.1)) {
        row[a] = 1n;
        forest.setZero(a + 1);
      } else {
        const b = random.below(size);
        const factor = random.chance(0.6) ? 1 : 1 + random.below(p - 1);
        row[a]! += 1n;
        row[b]! -= BigInt(factor);
        learnt = factor === 0 ? null : equate(forest, a + 1, factor, b + 1);
      }
      rows.push(row);
      if (learnt !== null) expect(learnt).toBe(echelonForm(rows, BigInt(p)).length > before);
    }
    expect(echelonForm(equationsOf(forest, size), BigInt(p))).toEqual(echelonForm(rows, BigInt(p)));
  });

  property('a planted solution survives, up to a factor a tree', 40, (random) => {
    const field = primeField(67_108_859);
    const size = 400;
    const planted = Array.from({ length: size }, () =>
      random.chance(0.1) ? 0 : 1 + random.below(field.p - 1),
    );
    const forest = forestOf(size, field.p);
    for (let i = 0; i < 600; i++) {
      const [a, b] = [random.below(size), random.below(size)];
      if (planted[a] === 0) forest.setZero(a + 1);
      else if (planted[b] !== 0)
        equate(forest, a + 1, field.multiply(planted[a]!, field.inverse(planted[b]!)), b + 1);
    }
    for (let e = 0; e < size; e++) {
      const root = forest.root(e + 1);
      if (root === forest.zero) expect(planted[e]).toBe(0);
      else expect(field.multiply(forest.rootWeight, planted[root - 1]!)).toBe(planted[e]);
    }
  });

  test('a long chain of ties stays shallow and exact', () => {
    const size = 200_000;
    const forest = forestOf(size, 101);
    const { field } = forest;
    for (let e = 2; e <= size; e++) equate(forest, e, 2, e - 1);
    expect(forest.uses).toBe(size - 1);
    const root = forest.root(size);
    const last = forest.rootWeight;
    expect(forest.root(1)).toBe(root);
    const ratio = field.multiply(last, field.inverse(forest.rootWeight));
    let expected = 1;
    for (let e = 2; e <= size; e++) expected = (expected * 2) % 101;
    expect(ratio).toBe(expected);
  });

  test('a cycle whose factors do not multiply to one is zero, and takes what is tied later with it', () => {
    const forest = forestOf(4, 7);
    expect(equate(forest, 1, 2, 2)).toBe(true);
    expect(equate(forest, 2, 4, 1)).toBe(false);
    expect(equate(forest, 2, 3, 1)).toBe(true);
    expect(forest.isZero(1) && forest.isZero(2)).toBe(true);
    expect(forest.isZero(3)).toBe(false);
    expect(equate(forest, 3, 5, 1)).toBe(true);
    expect(forest.isZero(3)).toBe(true);
    expect(forest.isZero(4)).toBe(false);
    expect(equate(forest, 4, 2, 4)).toBe(true);
    expect(forest.isZero(4)).toBe(true);
  });

  test('no elements', () => {
    expect(forestOf(0, 3).uses).toBe(0);
  });
});
