/** The forest with parameters: after any history, every equation that was used holds for all values of roots and parameters. */
import { describe, expect } from 'vitest';
import { AffineForest } from '../../src/linear/affine-forest.ts';
import { primeField } from '../../src/linear/field.ts';
import { PRIMES, product } from '../support/echelon.ts';
import { property } from '../support/random.ts';

interface Equation {
  readonly elements: readonly number[];
  readonly factors: readonly number[];
  readonly offset: readonly number[];
}

describe('union-find with parameters', () => {
  property('every equation used holds, whatever the free values are', 150, (random) => {
    const p = random.pick(PRIMES);
    const size = random.integer(2, 12);
    const forest = new AffineForest(size, primeField(p));
    const used: Equation[] = [];
    const nonZero = () => random.integer(1, p - 1);
    const offset = () => Array.from({ length: forest.parameters }, () => random.below(p));
    let free = size;
    for (let step = random.below(2 * size); step > 0; step--) {
      const roots = Array.from({ length: size }, (_, e) => e).filter((e) => forest.isRoot(e));
      if (roots.length === 0) break;
      const a = random.pick(roots);
      const others = roots.filter((e) => e !== a);
      if (random.chance(0.2)) forest.promote(a);
      else if (others.length > 0 && random.chance(0.7)) {
        const b = random.pick(others);
        const equation = { elements: [a, b], factors: [nonZero(), nonZero()], offset: offset() };
        forest.tie(a, equation.factors[0]!, b, equation.factors[1]!, equation.offset);
        used.push(equation);
        free--;
      } else {
        const equation = { elements: [a], factors: [nonZero()], offset: offset() };
        forest.settle(a, equation.factors[0]!, equation.offset);
        used.push(equation);
        free--;
      }
      // Looking elements up shortens paths, and must not change what they are.
      if (random.chance(0.5)) forest.find(random.below(size));
    }
    const rootValue = Array.from({ length: size }, () => random.below(p));
    const parameter = Array.from({ length: forest.parameters }, () => random.below(p));
    const valueAt = (element: number): number => {
      forest.find(element);
      const own = forest.root < 0 ? 0 : product([forest.weight], [rootValue[forest.root]!], p);
      return (own + product([...forest.offset], parameter.slice(0, forest.offset.length), p)) % p;
    };
    for (const { elements, factors, offset: rest } of used) {
      const total =
        product([...factors], elements.map(valueAt), p) +
        product([...rest], parameter.slice(0, rest.length), p);
      expect(total % p).toBe(0);
    }
    // Each equation took away one free value: roots and parameters are what is left.
    const roots = Array.from({ length: size }, (_, e) => e).filter((e) => forest.isRoot(e)).length;
    expect(roots + forest.parameters).toBe(free);
  });
});
