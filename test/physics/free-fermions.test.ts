import { describe, expect, it } from 'vitest';
import type { Operator } from '../../src/algebra/operator.ts';
import { rational } from '../../src/algebra/rational.ts';
import { LimitError } from '../../src/errors.ts';
import { parseModel } from '../../src/model/formula.ts';
import { hamiltonianOf } from '../../src/model/hamiltonian.ts';
import {
  bilinearCharges,
  type FreeFermions,
  freeFermions,
  ringMatrix,
} from '../../src/physics/free-fermions.ts';
import { characteristicPolynomial } from '../../src/physics/laurent.ts';
import { inverseRotation, rotateOperator, rotationToZ } from '../../src/physics/rotation.ts';
import { Span } from '../../src/physics/span.ts';
import { searchNow } from '../../src/search/search.ts';
import { eigenvalues, realMatrix, sectorMatrix } from '../support/diagonalise.ts';
import { property } from '../support/random.ts';

const model = (formula: string, cell = 1) => parseModel(formula, { cell });

/** Sign of the Pfaffian, by skew elimination with pivots. */
function pfaffianSign(matrix: readonly (readonly number[])[]): number {
  const a = matrix.map((row) => [...row]);
  const n = a.length;
  let sign = 1;
  for (let k = 0; k < n; k += 2) {
    let best = k + 1;
    for (let j = k + 2; j < n; j++) if (Math.abs(a[k]![j]!) > Math.abs(a[k]![best]!)) best = j;
    if (best !== k + 1) {
      [a[k + 1], a[best]] = [a[best]!, a[k + 1]!];
      for (const row of a) [row[k + 1], row[best]] = [row[best]!, row[k + 1]!];
      sign = -sign;
    }
    const pivot = a[k]![k + 1]!;
    if (Math.abs(pivot) < 1e-9) return 0;
    if (pivot < 0) sign = -sign;
    for (let i = k + 2; i < n; i++)
      for (let j = k + 2; j < n; j++)
        a[i]![j]! -= (a[i]![k]! * a[k + 1]![j]! - a[i]![k + 1]! * a[k]![j]!) / -pivot;
  }
  return sign;
}

/** All energies of one parity sector from filled modes. */
function filledModes(fermions: FreeFermions, cells: number, parity: 1 | -1): number[] {
  const { matrix, denominator } = ringMatrix(fermions, cells, parity);
  const a = matrix.map((row) => row.map((v) => Number(v) / Number(denominator)));
  const n = a.length / 2;
  const square = a.map((row) =>
    Float64Array.from(a, (other) => row.reduce((sum, v, k) => sum + v * other[k]!, 0)),
  );
  // −A² has every λ² twice.
  const modes = eigenvalues(square)
    .filter((_, i) => i % 2 === 0)
    .map((v) => Math.sqrt(Math.max(0, v)));
  const wanted = parity * (n % 2 === 0 ? 1 : -1) * pfaffianSign(a);
  const zero = modes.findIndex((v) => v < 1e-6);
  const energies: number[] = [];
  for (let signs = 0; signs < 2 ** n; signs++) {
    let [energy, product] = [0, 1];
    for (let k = 0; k < n; k++) {
      const s = (signs >> k) & 1 ? -1 : 1;
      energy += s * modes[k]!;
      product *= s;
    }
    if (zero >= 0 ? product === 1 : product === wanted) energies.push(energy);
  }
  return energies.sort((x, y) => x - y);
}

describe('freeFermions', () => {
  it('XX chain end to end: block, dispersion, charges', () => {
    const xx = freeFermions(model('XX + YY'))!;
    expect(xx.axes).toEqual(['Z']);
    expect(xx.conservesNumber).toBe(true);
    // 2|cos q|·2 a mode: "Two soluble models of an antiferromagnetic chain", Ann. Phys. 16, 407 (1961), in Pauli units.
    expect(xx.dispersion.text.map((t) => t.replace('-', ''))).toEqual(['2 cos(q)']);
    // Two bilinear charges a range from 2 on and Z: the counts of an exhaustive search.
    expect(bilinearCharges(xx, 20)).toHaveLength(39);
  });

  it.each([
    ['ZZ + 3 X', ['X'], ['sqrt(10 + 6 cos(q))', '-sqrt(10 + 6 cos(q))']],
    ['XX + 3 Z', ['Z'], ['sqrt(10 - 6 cos(q))', '-sqrt(10 - 6 cos(q))']],
    ['XZX + Z', ['Z'], ['sqrt(2 - 2 cos(2q))', '-sqrt(2 - 2 cos(2q))']],
  ])('%s: axis and dispersion', (formula, axes, text) => {
    const found = freeFermions(model(formula))!;
    expect(found.axes).toEqual(axes);
    expect(found.dispersion.text.map((t) => t.replaceAll(/[+-] (?=\d+ cos)/g, '± '))).toEqual(
      text.map((t) => t.replaceAll(/[+-] (?=\d+ cos)/g, '± ')),
    );
  });

  it('says no where H is not bilinear', () => {
    for (const formula of ['XX + YY + ZZ', 'XX + YY + X', 'ZZ + X + Z', 'XIX + Z'])
      expect(freeFermions(model(formula))).toBeNull();
    expect(freeFermions(model('XIXI + YIYI + IXIX + IYIY', 2))).toBeNull();
  });

  it.each([
    ['XX + YY', 1, 4],
    ['XX + 1/2 YY + 2/3 Z', 1, 4],
    ['ZZ + X', 1, 4],
    ['XZX + 2 YY + Z', 1, 4],
    ['XX + YY + 1/2 (IXXI + IYYI)', 2, 2],
  ])('%s: bilinear charges are what the search finds', (formula, cell, range) => {
    const h = model(formula, cell);
    const charges = bilinearCharges(freeFermions(h)!, range);
    const span = new Span();
    for (const q of charges) {
      expect(h.chain.bracket(h.density, q).isZero()).toBe(true);
      expect(span.add(q)).toBeNull();
    }
    // For these chains nothing but bilinears is conserved up to this range.
    const found = searchNow(h, { range });
    expect(found.charges).toHaveLength(charges.length);
    for (const { density } of found.charges) expect(span.coordinates(density)).not.toBeNull();
  });

  it.each([
    ['XX + 1/2 YY + 2/3 Z', 1],
    ['XY + 2 YX + XX + Z', 1],
    ['XX + YY + 1/2 (IXXI + IYYI) + IZ', 2],
    ['2 XX + YY + XZXI + 1/2 IYZY + 3 ZI', 2],
  ] as const)('%s, cell %d: every eigenvalue of h(q) is a mode of the ring', (formula, cell) => {
    const found = freeFermions(model(formula, cell))!;
    const cells = 6;
    const polynomial = characteristicPolynomial(found.block);
    for (const parity of [1, -1] as const) {
      const { matrix, denominator } = ringMatrix(found, cells, parity);
      const a = matrix.map((row) => row.map((v) => Number(v) / Number(denominator)));
      const squares = eigenvalues(
        a.map((row) => Float64Array.from(a, (other) => row.reduce((sum, v, k) => sum + v * other[k]!, 0))),
      );
      // Σ λ^{2m} over all eigenvalues of iA, and by Newton's identities over the roots at the allowed q.
      for (const m of [2, 4]) {
        let roots = 0;
        for (let j = 0; j < cells; j++) {
          const q = (Math.PI * (2 * j + (parity === 1 ? 1 : 0))) / cells;
          const e = polynomial.map((c) => c.valueAt(q)[0]).reverse();
          const sums: number[] = [e.length - 1];
          for (let k = 1; k <= m; k++) {
            let sum = -(k < e.length ? k * e[k]! : 0);
            for (let i = 1; i < k; i++) sum -= (e[i] ?? 0) * sums[k - i]!;
            sums.push(sum);
          }
          roots += sums[m]!;
        }
        const direct = squares.reduce((sum, v) => sum + v ** (m / 2), 0);
        expect(Math.abs(roots - direct)).toBeLessThan(1e-7 * (1 + direct));
      }
    }
  });

  /* Both parity sectors of periodic rings against dense matrices: every level, to 1e-6. */
  it.each([
    ['XX + YY', 1, 10],
    ['XX + 1/2 YY + 2/3 Z', 1, 9],
    ['XX + 1/2 YY + 2/3 Z', 1, 8],
    ['ZZ + 1/3 X', 1, 8],
    ['XZX + 2 YY + 1/2 Z', 1, 8],
    ['XX + YY - YZY + Z', 1, 7],
    ['XX + YY + 1/2 (IXXI + IYYI) + IZ', 2, 4],
    // A ladder: rungs XX, and legs joined across the other spin by a cluster term.
    ['2 XX + YY + XZXI + 1/2 IYZY + 3 ZI', 2, 4],
    ['XY + 2 YX + Z', 1, 7],
  ] as const)('%s, cell %d, ring of %d: levels are sums over filled modes', (formula, cell, cells) => {
    const found = freeFermions(model(formula, cell))!;
    for (const parity of [1, -1] as const) {
      const exact = eigenvalues(sectorMatrix(found.rotated.density, cell, cells, parity));
      const filled = filledModes(found, cells, parity);
      // Imaginary entries double the matrix, and with it every level.
      const levels = exact.length === filled.length ? exact : exact.filter((_, i) => i % 2 === 0);
      expect(levels).toHaveLength(filled.length);
      let worst = 0;
      for (const [i, level] of levels.entries()) worst = Math.max(worst, Math.abs(level - filled[i]!));
      expect(worst).toBeLessThan(1e-6);
    }
  });

  /** The chain of a formula with its Z axis turned to a direction of rational length. */
  const turned = (formula: string, direction: readonly [number, number, number]) => {
    const rotation = rotationToZ(direction.map((c) => rational(BigInt(c))))!;
    const h = model(formula);
    return hamiltonianOf(h.chain, rotateOperator(h.density, inverseRotation(rotation)));
  };

  it.each([
    ['XX + YY', [1, 2, 2]],
    ['XX + 1/2 YY + 2/3 Z', [2, -3, 6]],
    ['XX + 3 Z', [3, 0, 4]],
    ['XZX + 2 YY + Z', [1, 2, 2]],
    ['XY + 2 YX + XX', [4, 4, -7]],
    ['XZX + YZY', [2, 1, 2]],
    ['XX', [3, 4, 0]],
  ] as const)(
    '%s with Z along (%j): the same bands, and the charges that a search finds',
    (formula, axis) => {
      const h = turned(formula, axis);
      const found = freeFermions(h)!;
      // The angle about the axis is open, and Z may come out reversed: then particles are holes, and q is −q.
      const plain = freeFermions(model(formula))!;
      const bands = (f: FreeFermions, q: number) =>
        characteristicPolynomial(f.block).map((c) =>
          (c.valueAt(q)[0] + 0).toFixed(9).replace(/^-(0\.0+)$/, '$1'),
        );
      for (const q of [0.7, 2.1]) expect([bands(plain, q), bands(plain, -q)]).toContainEqual(bands(found, q));
      const span = new Span();
      for (const q of bilinearCharges(found, 3)) {
        expect(h.chain.bracket(h.density, q).isZero()).toBe(true);
        expect(span.add(q)).toBeNull();
      }
      expect(bilinearCharges(found, 3)).toHaveLength(bilinearCharges(plain, 3).length);
    },
  );

  it('a rotated ring has the levels of filled modes, both sectors together', () => {
    const h = turned('XX + 1/2 YY + 2/3 Z', [3, 0, 4]);
    const found = freeFermions(h)!;
    expect(found.rotation).not.toBeNull();
    const levels = eigenvalues(realMatrix(h.density, 1, 8));
    const filled = [...filledModes(found, 8, 1), ...filledModes(found, 8, -1)].sort((a, b) => a - b);
    expect(filled).toHaveLength(levels.length);
    let worst = 0;
    for (const [i, level] of levels.entries()) worst = Math.max(worst, Math.abs(level - filled[i]!));
    expect(worst).toBeLessThan(1e-6);
  });

  it('says no where the rotation is irrational or nothing helps, and refuses charges too long to turn back', () => {
    // Field along (1, 1, 0), whose length is no rational number.
    expect(freeFermions(model('ZZ + X + Y'))).toBeNull();
    expect(freeFermions(turned('XX + YY + ZZ + Z', [1, 2, 2]))).toBeNull();
    expect(() => bilinearCharges(freeFermions(turned('XX + YY', [1, 2, 2]))!, 9)).toThrow(LimitError);
  });
});

describe('rotations', () => {
  property('are proper, go back, and keep commutators', 30, (random) => {
    const vector = random
      .pick([
        [1, 2, 2],
        [2, 3, 6],
        [-3, 0, 4],
        [0, 0, -1],
        [1, 4, 8],
      ])
      .map((c) => rational(BigInt(c)));
    const rotation = rotationToZ(vector)!;
    const [a, b] = [random.operator(3, 3), random.operator(3, 3)];
    const turn = (x: Operator) => rotateOperator(x, rotation);
    expect(rotateOperator(turn(a), inverseRotation(rotation)).equals(a)).toBe(true);
    // Only proper rotations are automorphisms of the algebra: a reflection would turn the sign.
    expect(turn(a.bracket(b)).equals(turn(a).bracket(turn(b)))).toBe(true);
  });
});
