/** Charges that are published term by term: each commutes with H exactly, and is a combination of those that are found. */
import { describe, expect, it } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import type { Exact } from '../../src/algebra/rational.ts';
import { parseModel } from '../../src/model/formula.ts';
import type { Hamiltonian } from '../../src/model/hamiltonian.ts';
import { searchNow } from '../../src/search/search.ts';

/** Is `q` a combination of the operators? Gaussian elimination over the rationals, on any string of what is left. */
function isCombination(q: Operator, operators: readonly Operator[]): boolean {
  const reduced: { readonly pivot: bigint; readonly operator: Operator }[] = [];
  const reduce = (operator: Operator): Operator =>
    reduced.reduce((rest, { pivot, operator: known }) => {
      const [a, b] = [rest.coefficient(pivot), known.coefficient(pivot)];
      return rest.minus(
        known.times({ numerator: a.numerator * b.denominator, denominator: a.denominator * b.numerator }),
      );
    }, operator);
  for (const operator of operators) {
    const rest = reduce(operator);
    const [pivot] = rest.numerators.keys();
    if (pivot !== undefined) reduced.push({ pivot, operator: rest });
  }
  return reduce(q).isZero();
}

function expectFound(h: Hamiltonian, q: Operator, range: number): void {
  const density = h.chain.normalise(q);
  expect(h.chain.rangeOf(density)).toBe(range);
  expect(h.chain.bracket(h.density, density).isZero()).toBe(true);
  const charges = searchNow(h, { range }).charges.map((charge) => charge.density);
  expect(isCombination(density, charges)).toBe(true);
  // The same with one coefficient changed is neither conserved nor found.
  const [word] = density.numerators.keys();
  const changed = density.plus(Operator.fromIntegers([[word!, 1n]]));
  expect(h.chain.bracket(h.density, changed).isZero()).toBe(false);
  expect(isCombination(changed, charges)).toBe(false);
}

/** Structure of the conservation laws in integrable spin chains, hep-th/9411045, Ann. Phys. 243, 299 (1995); signs computed. */
describe('XX, XY and transverse Ising chains: a XX + b YY + h Z', () => {
  const string = (letter: string, n: number): Operator =>
    n === 1 ? Operator.of({ Z: -1 }) : Operator.of({ [`${letter}${'Z'.repeat(n - 2)}${letter}`]: 1 });

  it.each([
    { a: 1, b: 1, h: 0 },
    { a: 1, b: 1, h: '7/3' },
    { a: 2, b: 3, h: 5 },
    { a: 1, b: 0, h: '2/5' },
    { a: '1/2', b: -3, h: 0 },
  ])('a = $a, b = $b, h = $h', ({ a, b, h }) => {
    const model = parseModel('a XX + b YY + h Z', { parameters: { a, b, h } });
    for (let n = 2; n <= 5; n++) {
      const even = [
        string('X', n + 1).times(a),
        string('Y', n + 1).times(b),
        string('X', n).plus(string('Y', n)).times(h).times(-1),
        string('X', n - 1).times(b),
        string('Y', n - 1).times(a),
      ].reduce((sum, part) => sum.plus(part));
      expectFound(model, even, n + 1);
      const between = 'Z'.repeat(n - 2);
      expectFound(model, Operator.of({ [`X${between}Y`]: 1, [`Y${between}X`]: -1 }), n);
    }
  });
});

/** Quantum integrals of motion for the Heisenberg spin chain, hep-th/9403149, Mod. Phys. Lett. A 9, 2197 (1994). */
describe('XXX chain: sums over clusters with Catalan coefficients', () => {
  const letters = ['X', 'Y', 'Z'];

  /** ((s₁ × s₂) × s₃ …)·s_n on sites i₁ < … < i_n, as words. */
  function nested(sites: readonly number[]): Map<string, number> {
    const put = (word: string, site: number, letter: string) => word.padEnd(site, 'I') + letter;
    let vector: Map<string, number>[] = letters.map((l) => new Map([[put('', sites[0]!, l), 1]]));
    for (const site of sites.slice(1, -1))
      vector = letters.map((_, c) => {
        const component = new Map<string, number>();
        // (u × s)_c = u_a s_b − u_b s_a, with (a, b, c) cyclic.
        const [a, b] = [(c + 1) % 3, (c + 2) % 3];
        for (const [word, value] of vector[a]!) component.set(put(word, site, letters[b]!), value);
        for (const [word, value] of vector[b]!) component.set(put(word, site, letters[a]!), -value);
        return component;
      });
    const product = new Map<string, number>();
    vector.forEach((component, c) => {
      for (const [word, value] of component) product.set(put(word, sites.at(-1)!, letters[c]!), value);
    });
    return product;
  }

  /** F_{n,l}: all clusters of n sites with l holes between the first, on site 0, and the last. */
  function clusters(n: number, holes: number): Operator {
    const sum: [string, number][] = [];
    const last = n + holes - 1;
    const choose = (from: number, chosen: readonly number[]): void => {
      if (chosen.length === n - 2) {
        sum.push(...nested([0, ...chosen, last]));
        return;
      }
      for (let site = from; site < last; site++) choose(site + 1, [...chosen, site]);
    };
    choose(1, []);
    return Operator.of(Object.fromEntries(sum));
  }

  function binomial(n: number, k: number): number {
    let value = 1;
    for (let i = 1; i <= k; i++) value = (value * (n - k + i)) / i;
    return value;
  }

  function charge(n: number): Operator {
    let q = clusters(n, 0);
    for (let k = 1; k <= Math.floor(n / 2) - 1; k++)
      for (let l = 1; l <= k; l++)
        q = q.plus(clusters(n - 2 * k, l).times((l * binomial(2 * k - l, k)) / (2 * k - l)));
    return q;
  }

  const h = parseModel('XX + YY + ZZ');

  it('has the published numbers of strings, and commutes with H', () => {
    const found = [2, 3, 4, 5, 6, 7, 8].map(charge);
    expect(found.map((q) => q.size)).toEqual([3, 6, 15, 36, 90, 222, 549]);
    for (const q of found) expect(h.chain.bracket(h.density, q).isZero()).toBe(true);
    const largest = found.map((q) =>
      [...q.numerators.values()].reduce((m, v) => (v > m ? v : v < -m ? -v : m), 0n),
    );
    expect(largest).toEqual([1n, 1n, 1n, 1n, 1n, 1n, 2n]);
  });

  it.each([2, 3, 4, 5, 6, 7])('is found, range %i', (n) => expectFound(h, charge(n), n));
});

/** Range 3: published many times since the 1970s, no one source. Range 4: computed beforehand by two independent programs. */
describe('XYZ chain', () => {
  it.each([
    [2, 3, 5],
    ['1/2', -3, '7/5'],
    [1, 1, '1/3'],
  ] as const)('J = %s, %s, %s', (x, y, z) => {
    const h = parseModel('Jx XX + Jy YY + Jz ZZ', { parameters: { Jx: x, Jy: y, Jz: z } });
    const J: Record<string, Exact> = { X: x, Y: y, Z: z };
    const term = (word: string, sign: 1 | -1, ...factors: string[]): Operator =>
      factors.reduce((q, axis) => q.times(J[axis]!), Operator.of({ [word]: sign }));
    const third = [
      ...[
        ['X', 'Y', 'Z'],
        ['Y', 'Z', 'X'],
        ['Z', 'X', 'Y'],
      ].flatMap(([a, b, c]) => [term(`${a}${b}${c}`, 1, a!, c!), term(`${c}${b}${a}`, -1, a!, c!)]),
    ].reduce((sum, part) => sum.plus(part));
    expect(third.size).toBe(6);
    expectFound(h, third, 3);

    const axes = ['X', 'Y', 'Z'];
    const pairs = axes.flatMap((a) =>
      axes.filter((b) => b !== a).map((b) => [a, b, axes.find((c) => c !== a && c !== b)!]),
    );
    const fourth = [
      ...pairs.map(([a, b]) => term(`${a}${b}${a}${b}`, 1, 'X', 'Y', 'Z')),
      ...pairs.map(([a, b, c]) => term(`${a}${b}${b}${a}`, -1, a!, a!, c!)),
      ...axes.map((a) => term(`${a}I${a}`, 1, 'X', 'Y', 'Z')),
      ...pairs.map(([a, b]) => term(`${a}${a}`, -1, a!, b!, b!)),
    ].reduce((sum, part) => sum.plus(part));
    expect(fourth.size).toBe(18);
    expectFound(h, fourth, 4);
  });
});

/** Phys. Rev. Lett. 56, 2453 (1986); written for a ladder of spins and its coefficients computed beforehand. */
describe('Hubbard chain as a ladder, spins s and t in each cell', () => {
  it.each(['3', '-1/2', '7'])('U = %s', (U) => {
    const h = parseModel('XIX + YIY + IXIX + IYIY + U ZZ', { cell: 2, parameters: { U } });
    const hop = Operator.of({ XIZIY: 1, YIZIX: -1, IXIZIY: 1, IYIZIX: -1 });
    const interaction = Operator.of({
      XZY: 1,
      YZX: -1,
      XIYZ: 1,
      YIXZ: -1,
      ZXIY: 1,
      ZYIX: -1,
      IXZY: 1,
      IYZX: -1,
    });
    const q = hop.minus(interaction.times(U));
    expect(q.size).toBe(12);
    expectFound(h, q, 3);
  });
});
