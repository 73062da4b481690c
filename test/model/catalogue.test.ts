import { readdirSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import type { Rational } from '../../src/algebra/rational.ts';
import { InputError } from '../../src/errors.ts';
import type { FamilyEntry } from '../../src/model/catalogue/entry.ts';
import { CATALOGUE, catalogueEntry, catalogueModel, FAMILIES } from '../../src/model/catalogue/index.ts';
import { familyAt, parseFamily } from '../../src/model/formula.ts';
import { type Hamiltonian, hamiltonianOf } from '../../src/model/hamiltonian.ts';
import { searchNow } from '../../src/search/search.ts';
import { property, type Random } from '../support/random.ts';

const folder = new URL('../../src/model/catalogue/', import.meta.url);
const files = (path: string) =>
  readdirSync(new URL(path, folder))
    .filter((name) => name.endsWith('.ts') && !['index.ts', 'entry.ts', 'sources.ts'].includes(name))
    .map((name) => name.replace('.ts', ''))
    .sort();

/** Numbers of charges of range exactly 1, 2, …, by the search. */
function counts(h: Hamiltonian, range: number): number[] {
  const { dimensionByRange } = searchNow(h, { range });
  return dimensionByRange.map((d, j) => d - (dimensionByRange[j - 1] ?? 0));
}

test('the index lists every file, under its name', () => {
  expect(CATALOGUE.map((e) => e.id).sort()).toEqual(files('.'));
  expect(FAMILIES.map((e) => e.id).sort()).toEqual(files('./families/'));
});

test('an entry by its id', () => {
  expect(catalogueModel(catalogueEntry('xyz'), { Jx: 1, Jy: 1, Jz: 1 }).density.toString()).toBe(
    catalogueModel(catalogueEntry('heisenberg')).density.toString(),
  );
  expect(() => catalogueEntry('constructor')).toThrow(InputError);
});

describe.each(CATALOGUE)('$id', (entry) => {
  test('the search finds the counts', () => {
    expect(counts(catalogueModel(entry), entry.computedCounts.length)).toEqual(entry.computedCounts);
  });

  test('a published status names its source', () => {
    if (entry.published.length === 0)
      expect(entry.status === 'open' || entry.caution !== undefined).toBe(true);
    if (entry.status === 'non-integrable') expect(entry.published.length).toBeGreaterThan(0);
    for (const { source } of entry.published) expect(source.year).toBeGreaterThan(1900);
  });

  // An entry must agree with its status as far as it was counted: H alone is no charge beyond the symmetries.
  test('counts fit the status', () => {
    const { range } = catalogueModel(entry);
    const beyond = entry.computedCounts.slice(Math.max(2, range)).some((c) => c > 0);
    if (entry.status === 'integrable') expect(beyond).toBe(true);
    if (entry.status === 'non-integrable') expect(beyond).toBe(false);
  });
});

// Couplings of a classical chain, from the caution of its entry; computed twice independently.
test.each([
  ['1', [1, 1, 4, 14]],
  ['2', [1, 1, 6, 14]],
  ['0', [1, 3, 8, 28]],
])('the classical Ising chain with g = %s', (g, expected) => {
  expect(counts(catalogueModel(catalogueEntry('classical-ising'), { g }), 4)).toEqual(expected);
});

describe.each(FAMILIES)('family $id', (entry: FamilyEntry) => {
  const family = parseFamily(entry.formula, { cell: entry.cell });
  /** The value of a polynomial in the parameters, read through the formula notation: the coefficient of X. */
  const valueAt = (text: string, point: readonly Rational[]): boolean => {
    const parameters = new Map(family.parameters.map((name, v) => [name, point[v]!]));
    const names = family.parameters.filter((name) => text.includes(name));
    const polynomial = parseFamily(`(${text}) X`, {});
    const values = polynomial.parameters.map((name) => parameters.get(name)!);
    expect(names).toEqual(expect.arrayContaining([...polynomial.parameters]));
    return polynomial.terms[0]![1].evaluate(values).numerator === 0n;
  };
  const small = (random: Random): Rational => ({ numerator: BigInt(random.integer(-1, 2)), denominator: 1n });

  property(`charges appear exactly on the locus (${entry.id})`, 1, (random) => {
    const seen = { on: 0, off: 0 };
    for (let tries = 0; tries < 4_000 && (seen.on < 4 || seen.off < 4); tries++) {
      const point = family.parameters.map(() => small(random));
      if (entry.assuming.some((text) => valueAt(text, point))) continue;
      const on = entry.exceptionalWhere.every((text) => valueAt(text, point));
      if (seen[on ? 'on' : 'off'] >= 4) continue;
      seen[on ? 'on' : 'off']++;
      const count = counts(familyAt(family, point), entry.range).at(-1)!;
      expect([point, count > 0]).toEqual([point, on]);
    }
    expect(seen).toEqual({ on: 4, off: 4 });
  });
});

test('models are data: a Hamiltonian is made from the entry, not kept in it', () => {
  const h = catalogueModel(catalogueEntry('xx'));
  expect(hamiltonianOf(h.chain, Operator.of({ XX: 1, YY: 1 }))).toEqual(h);
});
