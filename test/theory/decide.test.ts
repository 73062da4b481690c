/** Verdicts for every range against the published classification, exhaustive counts, and the known traps. */
import { describe, expect, it } from 'vitest';
import { parseModel } from '../../src/model/formula.ts';
import { decide } from '../../src/theory/decide.ts';
import { property } from '../support/random.ts';

/**
 * "Complete classification of integrability and non-integrability for spin-1/2 chain with symmetric nearest-neighbor interaction",
 * arXiv:2411.02162 (2024); the table from memory. Couplings Jx, Jy, Jz and a field, as a predicate for: charges of every range.
 */
function isIntegrable(j: readonly number[], h: readonly number[]): boolean {
  const zero = [0, 1, 2].filter((a) => j[a] === 0);
  const noField = h.every((x) => x === 0);
  if (zero.length === 0) {
    if (noField || (j[0] === j[1] && j[1] === j[2])) return true;
    // Two equal up to a rotation by π about an axis, which flips the sign of two couplings; fields on the third axis only.
    return [0, 1, 2].some((c) => {
      const [a, b] = [(c + 1) % 3, (c + 2) % 3];
      return j[a] === j[b] && h[a] === 0 && h[b] === 0;
    });
  }
  if (zero.length === 1) return [0, 1, 2].every((a) => a === zero[0] || h[a] === 0);
  if (zero.length === 2) {
    const axis = [0, 1, 2].find((a) => j[a] !== 0)!;
    return h[axis] === 0 || [0, 1, 2].every((a) => a === axis || h[a] === 0);
  }
  return true;
}

function formulaOf(j: readonly number[], h: readonly number[]): string {
  const letters = ['X', 'Y', 'Z'];
  return [
    ...j.map((c, a) => (c === 0 ? '' : `${c} ${letters[a]}${letters[a]}`)),
    ...h.map((c, a) => (c === 0 ? '' : `${c} ${letters[a]}`)),
  ]
    .filter((t) => t !== '')
    .join(' + ')
    .replaceAll('+ -', '- ');
}

interface Couplings {
  readonly j: readonly number[];
  readonly h: readonly number[];
}

function expectedKind({ j, h }: Couplings): string {
  const rank = j.filter((v) => v !== 0).length;
  // All terms commute: classical, and no method of this kind applies.
  if (rank === 0 || (rank === 1 && h.every((v, a) => v === 0 || j[a] !== 0))) return 'undecided';
  return isIntegrable(j, h) ? 'complete' : 'none';
}

function* allCouplings(): Generator<Couplings> {
  const values = [-2, -1, 0, 1, 2];
  const fields = [0, 1, 2];
  for (const x of values)
    for (const y of values)
      for (const z of values)
        for (const a of fields)
          for (const b of fields)
            for (const c of fields)
              if ([x, y, z, a, b, c].some((v) => v !== 0)) yield { j: [x, y, z], h: [a, b, c] };
}

describe('the classification of symmetric nearest-neighbour chains', () => {
  it('agrees on all couplings J ∈ {−2 … 2}³, h ∈ {0, 1, 2}³ but the zero one', () => {
    // A permutation of the axes is a rotation, or a rotation and the transpose; either maps charges to charges, range by range. One
    // member of each orbit is decided; every choice is compared with the table.
    const decided = new Map<string, string>();
    const mismatches: string[] = [];
    let choices = 0;
    for (const couplings of allCouplings()) {
      choices++;
      const pairs = [0, 1, 2]
        .map((a) => [couplings.j[a]!, couplings.h[a]!] as const)
        .sort((p, q) => p[0] - q[0] || p[1] - q[1]);
      const formula = formulaOf(
        pairs.map((p) => p[0]),
        pairs.map((p) => p[1]),
      );
      if (!decided.has(formula)) decided.set(formula, decide(parseModel(formula)).kind);
      if (decided.get(formula) !== expectedKind(couplings))
        mismatches.push(`${formulaOf(couplings.j, couplings.h)}: ${decided.get(formula)}`);
    }
    expect(choices).toBe(3374);
    expect(mismatches).toEqual([]);
  }, 120_000);

  property('agrees on couplings taken as they come, axes in any order', 40, (random) => {
    const j = [0, 1, 2].map(() => random.integer(-2, 2));
    const h = [0, 1, 2].map(() => random.integer(0, 2));
    if ([...j, ...h].every((v) => v === 0)) return;
    expect(decide(parseModel(formulaOf(j, h))).kind).toBe(expectedKind({ j, h }));
  });
});
