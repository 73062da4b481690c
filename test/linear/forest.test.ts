import { describe, expect, test } from 'vitest';
import { primeField } from '../../src/linear/field.ts';
import { WeightedForest } from '../../src/linear/forest.ts';
import { echelonForm } from '../support/dense.ts';
import { property } from '../support/random.ts';

/** The forest's answer as equations: x_e − w·x_root = 0, or x_e = 0. */
function equationsOf(forest: WeightedForest): bigint[][] {
  const rows: bigint[][] = [];
  for (let e = 0; e < forest.size; e++) {
    const row = new Array<bigint>(forest.size).fill(0n);
    const root = forest.root(e);
    if (forest.isZero(e)) row[e] = 1n;
    else if (root !== e) {
      row[e] = 1n;
      row[root]! -= BigInt(forest.weight(e));
    }
    rows.push(row);
  }
  return rows;
}

describe('weighted union-find against dense elimination', () => {
  property('random ties and zeros describe the same space', 150, (random) => {
    const p = random.pick([3, 5, 101, 67_108_859]);
    const field = primeField(p);
    const size = random.integer(1, 14);
    const forest = new WeightedForest(size, field);
    const rows: bigint[][] = [];
    // Few factors over small fields, so cycles close both consistently and not.
    for (let i = random.below(20); i > 0; i--) {
      const row = new Array<bigint>(size).fill(0n);
      const a = random.below(size);
      const before = echelonForm(rows, BigInt(p)).length;
      let learnt: boolean | null = null;
      if (random.chance(0.1)) {
        row[a] = 1n;
        forest.setZero(a);
      } else {
        const b = random.below(size);
        const factor = random.chance(0.6) ? 1 : 1 + random.below(p - 1);
        row[a]! += 1n;
        row[b]! -= BigInt(factor);
        learnt = forest.tie(a, factor, b);
      }
      rows.push(row);
      if (learnt !== null) expect(learnt).toBe(echelonForm(rows, BigInt(p)).length > before);
    }
    expect(echelonForm(equationsOf(forest), BigInt(p))).toEqual(echelonForm(rows, BigInt(p)));
  });

  property('a planted solution survives, up to a factor a tree', 40, (random) => {
    const field = primeField(67_108_859);
    const size = 400;
    const planted = Array.from({ length: size }, () =>
      random.chance(0.1) ? 0 : 1 + random.below(field.p - 1),
    );
    const forest = new WeightedForest(size, field);
    for (let i = 0; i < 600; i++) {
      const [a, b] = [random.below(size), random.below(size)];
      if (planted[a] === 0) forest.setZero(a);
      else if (planted[b] !== 0) forest.tie(a, field.multiply(planted[a]!, field.inverse(planted[b]!)), b);
    }
    for (let e = 0; e < size; e++) {
      const root = forest.root(e);
      if (forest.isZero(e)) expect(planted[e]).toBe(0);
      else expect(field.multiply(forest.weight(e), planted[root]!)).toBe(planted[e]);
    }
  });

  test('a long chain of ties stays shallow and exact', () => {
    const field = primeField(101);
    const size = 200_000;
    const forest = new WeightedForest(size, field);
    let learnt = 0;
    for (let e = 1; e < size; e++) if (forest.tie(e, 2, e - 1)) learnt++;
    expect(learnt).toBe(size - 1);
    const root = forest.root(size - 1);
    expect(forest.root(0)).toBe(root);
    const ratio = field.multiply(forest.weight(size - 1), field.inverse(forest.weight(0)));
    let expected = 1;
    for (let e = 1; e < size; e++) expected = (expected * 2) % 101;
    expect(ratio).toBe(expected);
  });

  test('a cycle whose factors do not multiply to one is zero, and takes what is tied later with it', () => {
    const forest = new WeightedForest(4, primeField(7));
    expect(forest.tie(0, 2, 1)).toBe(true);
    expect(forest.tie(1, 4, 0)).toBe(false);
    expect(forest.tie(1, 3, 0)).toBe(true);
    expect(forest.isZero(0) && forest.isZero(1)).toBe(true);
    expect(forest.isZero(2)).toBe(false);
    expect(forest.tie(2, 5, 0)).toBe(true);
    expect(forest.isZero(2)).toBe(true);
    expect(forest.isZero(3)).toBe(false);
    expect(forest.tie(3, 2, 3)).toBe(true);
    expect(forest.isZero(3)).toBe(true);
  });

  test('no elements', () => {
    expect(new WeightedForest(0, primeField(3)).size).toBe(0);
  });
});
