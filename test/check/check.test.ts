/** The checker on hostile input: everything is refused with a reason, in bounded time and memory. */
import { createHash } from 'node:crypto';
import { describe, expect, test } from 'vitest';
import { certificateNow } from '../../src/certificate/certificate.ts';
import { check, checkNow } from '../../src/check/check.ts';
import { isPrime } from '../../src/check/modular.ts';
import { sha256 } from '../../src/check/sha256.ts';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';

const certificate = (formula: string, range: number) =>
  certificateNow(searchNow(parseModel(formula), { range }));
const XYZ = certificate('XX + 2 YY + 3 ZZ', 4);
const ISING = certificate('ZZ + 2 X + 3 Z', 4);
/** Sweeps alone do not finish this one: it has pivot rows. */
const CORE = certificate('2 XX + 3 YY + 5 ZZ', 5);

// biome-ignore lint/suspicious/noExplicitAny: documents are bent out of shape on purpose
type Loose = any;

/** The original with one change, in canonical form again. */
function changed(original: string, change: (document: Loose) => unknown): string {
  const document = JSON.parse(original);
  change(document);
  return `${JSON.stringify(document)}\n`;
}

test('the certificates bent below have what is bent', () => {
  expect(JSON.parse(CORE).evidence.pivots.length).toBeGreaterThan(2);
});

describe('not a certificate', () => {
  test.each<[string, string, RegExp]>([
    ['empty', '', /not JSON/],
    ['truncated', XYZ.slice(0, -20), /cut short/],
    ['without its line feed', XYZ.slice(0, -1), /canonical/],
    ['with white space', XYZ.replace(',"version"', ', "version"'), /canonical/],
    ['a field twice', XYZ.replace('"version":1', '"version":1,"version":1'), /canonical/],
    ['a field twice, first one false', XYZ.replace('"range":4', '"range":9,"range":4'), /canonical/],
    ['fields in another order', changed(XYZ, (d) => [d.charges, delete d.charges]), /fields/],
    [
      'reordered',
      XYZ.replace('"version":1,"kind":"exhaustive"', '"kind":"exhaustive","version":1'),
      /this order/,
    ],
    ['a field too many', changed(XYZ, (d) => Object.assign(d, { more: 1 })), /fields/],
    [
      'a polluted prototype',
      XYZ.replace('{"certificate"', '{"__proto__":{"tool":"x"},"certificate"'),
      /fields/,
    ],
    [
      'fields in the prototype only',
      '{"__proto__":{"certificate":"conserved quantities of a spin chain"}}\n',
      /fields/,
    ],
    ['an escape', XYZ.replace('holdfast', '\\u0068oldfast'), /escape/],
    ['beyond ASCII', XYZ.replace('holdfast', 'h\u00f6ldfast'), /ASCII/],
    ['too deep', `${'['.repeat(1e6)}\n`, /deeper/],
    ['too deep, closed', `${'['.repeat(1e5)}${']'.repeat(1e5)}\n`, /deeper/],
    ['too long', `"${'x'.repeat(2 ** 26)}"\n`, /longer/],
    ['a float', XYZ.replace('"version":1', '"version":1.0'), /canonical/],
    ['a fraction', XYZ.replace('"version":1', '"version":1.5'), /natural/],
    ['an exponent', XYZ.replace('"version":1', '"version":1e400'), /natural/],
    ['negative zero', XYZ.replace('"version":1', '"version":-0'), /natural/],
    ['a huge number', XYZ.replace('"version":1', '"version":9007199254740993'), /natural/],
    ['null', 'null\n', /object/],
    ['a list', '[]\n', /object/],
    ['a number', '7\n', /object/],
    ['an unknown version', changed(XYZ, (d) => Object.assign(d, { version: 2 })), /version/],
    ['an unknown kind', changed(XYZ, (d) => Object.assign(d, { kind: 'constructor' })), /kind/],
    ['another document', changed(XYZ, (d) => Object.assign(d, { certificate: 'of birth' })), /certificate/],
    ['a tool that is no name', changed(XYZ, (d) => Object.assign(d, { tool: '}' })), /tool/],
    ['no model terms', changed(XYZ, (d) => Object.assign(d.model, { terms: [] })), /no term/],
    ['a number for a coefficient', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: 1 })), /string/],
    ['a zero coefficient', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '0' })), /fraction/],
    [
      'a charge scaled by zero',
      changed(XYZ, (d) => Object.assign(d.charges[1].terms[0], { 1: '-0' })),
      /fraction/,
    ],
    ['not in lowest terms', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '2/4' })), /lowest/],
    ['over one', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '2/1' })), /lowest/],
    ['over zero', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '2/0' })), /fraction/],
    ['a decimal', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '0.5' })), /fraction/],
    ['leading zeros', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '01' })), /fraction/],
    [
      'endless digits',
      changed(XYZ, (d) => Object.assign(d.model.terms[0], { 1: '1'.repeat(20_000) })),
      /digits/,
    ],
    ['a term twice', changed(XYZ, (d) => d.model.terms.unshift(d.model.terms[0])), /rising/],
    ['terms out of order', changed(XYZ, (d) => d.model.terms.reverse()), /rising/],
    ['the identity', changed(XYZ, (d) => d.model.terms.unshift(['II', '1'])), /not the identity/],
    ['an idle first cell', changed(XYZ, (d) => d.model.terms.unshift(['IX', '1'])), /not the identity/],
    ['small letters', changed(XYZ, (d) => Object.assign(d.model.terms[0], { 0: 'xx' })), /letters/],
    ['a string longer than the charge', changed(XYZ, (d) => d.charges[0].terms.push(['ZZZ', '1'])), /cells/],
    ['a pivot beyond every output', changed(ISING, (d) => d.evidence.pivots.push('XXXXXXX')), /cells/],
    [
      'a sweep beyond every output',
      changed(XYZ, (d) => Object.assign(d.evidence.sweeps[0], { 0: 6 })),
      /sweep/,
    ],
    ['no range', changed(XYZ, (d) => Object.assign(d.claim, { range: 0 })), /range/],
  ])('%s', (_, text, reason) => {
    const verdict = checkNow(text);
    expect(verdict).toMatchObject({ status: 'malformed', reason: expect.stringMatching(reason) });
  });

  test('nothing was polluted', () => {
    expect(({} as Record<string, unknown>)['tool']).toBeUndefined();
  });
});

const RECOUNT = (d: Loose) => {
  d.claim.dimensions = d.claim.dimensions.map(
    (_: number, j: number) => d.charges.filter((q: Loose) => q.range <= j + 1).length,
  );
  d.claim.statement = d.claim.statement.replace(/exactly \d+/, `exactly ${d.charges.length}`);
};

describe('rejected', () => {
  test.each<[string, string, RegExp]>([
    ['a composite modulus', changed(XYZ, (d) => Object.assign(d.evidence, { prime: 8191 * 8191 })), /prime/],
    ['a Carmichael number', changed(XYZ, (d) => Object.assign(d.evidence, { prime: 561 })), /prime/],
    ['a wrong count', changed(XYZ, (d) => d.claim.dimensions[3]++), /statement|dimension/],
    ['a count too few', changed(XYZ, (d) => d.claim.dimensions.pop()), /one dimension/],
    ['a smaller ring', changed(XYZ, (d) => d.claim.rings--), /ring/],
    [
      'another sentence',
      changed(XYZ, (d) => Object.assign(d.claim, { statement: 'It is integrable.' })),
      /statement/,
    ],
    ['a caution left out', changed(XYZ, (d) => d.claim.assumes.pop()), /assumptions/],
    ['a wrong model range', changed(XYZ, (d) => d.model.range++), /range of the model|ring/],
    ['a dependent charge', changed(XYZ, (d) => [d.charges.push(d.charges[2]), RECOUNT(d)]), /depends/],
    [
      'a zero charge',
      changed(XYZ, (d) => [d.charges.push({ range: 4, terms: [] }), RECOUNT(d)]),
      /no term of its range/,
    ],
    [
      'a charge that does not commute',
      changed(XYZ, (d) => [d.charges.push({ range: 4, terms: [['XXXX', '1']] }), RECOUNT(d)]),
      /charge 4 does not commute/,
    ],
    ['charges not sorted by range', changed(XYZ, (d) => d.charges.reverse()), /sorted/],
    ['a charge left out', changed(XYZ, (d) => [d.charges.pop(), RECOUNT(d)]), /bounds do not meet/],
    [
      'a charge of higher range declared higher still',
      changed(XYZ, (d) => [Object.assign(d.charges[1], { range: 4 }), RECOUNT(d)]),
      /no term/,
    ],
    ['a missing last row', changed(CORE, (d) => d.evidence.pivots.pop()), /bounds do not meet/],
    [
      'a row twice',
      changed(CORE, (d) => Object.assign(d.evidence.pivots, { 1: d.evidence.pivots[0] })),
      /depends/,
    ],
    [
      'no evidence',
      changed(XYZ, (d) => Object.assign(d.evidence, { sweeps: [], pivots: [] })),
      /bounds do not meet/,
    ],
    ['a sweep that uses less', changed(XYZ, (d) => d.evidence.sweeps[0][1]++), /sweep 1 uses/],
    ['a sweep twice', changed(XYZ, (d) => d.evidence.sweeps.push(d.evidence.sweeps[0])), /uses 0/],
    [
      'evidence for another Hamiltonian',
      changed(XYZ, (d) => Object.assign(d.evidence, JSON.parse(ISING).evidence)),
      /sweep|depends|bounds/,
    ],
    ['another Hamiltonian', changed(XYZ, (d) => Object.assign(d.model, JSON.parse(ISING).model)), /commute/],
    [
      'more than this checker can hold',
      changed(XYZ, (d) => {
        d.claim.range = 16;
        d.claim.rings = 33;
        while (d.claim.dimensions.length < 16) d.claim.dimensions.push(3);
        d.claim.statement = d.claim.statement
          .replace('at least 9', 'at least 33')
          .replace('most 4', 'most 16');
      }),
      /limits/,
    ],
  ])('%s', (_, text, reason) => {
    expect(checkNow(text)).toMatchObject({ status: 'rejected', reason: expect.stringMatching(reason) });
  });
});

test('the same verdict giving way, and progress from 0 to 1', async () => {
  const shares: number[] = [];
  const text = certificate('2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z', 7);
  expect(await check(text, { onProgress: (share) => shares.push(share) })).toEqual(checkNow(text));
  expect(shares.every((share, i) => share >= (shares[i - 1] ?? 0) && share <= 1)).toBe(true);
});

test('a signal stops the check', async () => {
  await expect(check(XYZ, { signal: AbortSignal.abort() })).rejects.toThrow();
});

// FIPS 180-4 (2015) names the function; node:crypto is the other implementation.
property('SHA-256 as in node:crypto', 80, (random, run) => {
  const text = Array.from({ length: run < 70 ? run + 50 : random.below(3_000) }, () =>
    String.fromCharCode(random.integer(0, 127)),
  ).join('');
  expect(sha256(text)).toBe(createHash('sha256').update(text).digest('hex'));
});

// Sequence A000040: 3,512 primes lie below 2^15 (from memory; the sieve beside it counts them again).
test('primes, against a sieve', () => {
  const composite = new Uint8Array(2 ** 15);
  let count = 0;
  for (let n = 2; n < composite.length; n++) {
    expect(isPrime(n)).toBe(composite[n] === 0);
    if (composite[n] === 1) continue;
    count++;
    for (let m = 2 * n; m < composite.length; m += n) composite[m] = 1;
  }
  expect(count).toBe(3_512);
  expect([0, 1].some(isPrime)).toBe(false);
});
