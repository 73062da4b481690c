/** What the search finds, a certificate states, and the checker accepts: over the catalogue and random models. */
import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { certificateNow, certificateOf } from '../../src/certificate/certificate.ts';
import { independentRows } from '../../src/certificate/core.ts';
import { VERSION } from '../../src/certificate/version.ts';
import { checkNow } from '../../src/check/check.ts';
import { CancelledError, LimitError, VerificationError } from '../../src/errors.ts';
import { primeField } from '../../src/linear/field.ts';
import { CATALOGUE, catalogueModel } from '../../src/model/catalogue/index.ts';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';

describe.each(CATALOGUE)('$id', (entry) => {
  test('its certificate is accepted, under the hash of its bytes', () => {
    const h = catalogueModel(entry);
    const result = searchNow(h, { range: Math.min(entry.computedCounts.length, h.chain.cell === 1 ? 5 : 3) });
    const text = certificateNow(result);
    expect(checkNow(text)).toMatchObject({
      status: 'accepted',
      id: createHash('sha256').update(text).digest('hex'),
    });
  });
});

property('the certificate of a random model is accepted', 60, (random) => {
  const cell = random.integer(1, 2);
  const h = random.hamiltonian({ cell, range: random.integer(1, 3), terms: random.integer(1, 6) });
  const range = random.integer(1, cell === 1 ? 5 : 2);
  const result = searchNow(h, { range });
  const text = certificateNow(result);
  expect(checkNow(text)).toMatchObject({ status: 'accepted' });
  expect(JSON.parse(text)).toMatchObject({ claim: { range, dimensions: [...result.dimensionByRange] } });
});

test('the same result gives the same bytes, in one go or giving way', async () => {
  const result = searchNow(parseModel('XX + 1/2 YY + 2/3 Z'), { range: 6 });
  const shares: number[] = [];
  const text = await certificateOf(result, { onProgress: (share) => shares.push(share) });
  expect(text).toBe(certificateNow(result));
  expect(shares.every((share) => share >= 0 && share <= 1)).toBe(true);
});

test('a signal stops the writing', async () => {
  const result = searchNow(parseModel('XX + YY'), { range: 3 });
  await expect(certificateOf(result, { signal: AbortSignal.abort() })).rejects.toThrow(CancelledError);
});

test('refuses at once what no checker takes', () => {
  const result = searchNow(parseModel('XX + YY'), { range: 3 });
  expect(() => certificateNow({ ...result, range: 14 })).toThrow(LimitError);
  expect(() => independentRows([], 70_000, 70_000, primeField(65_537)).next()).toThrow(LimitError);
});

test('a result that is wrong gets no certificate', () => {
  const result = searchNow(parseModel('XX + YY'), { range: 3 });
  expect(() => certificateNow({ ...result, charges: result.charges.slice(1) })).toThrow(VerificationError);
});

test('the version is that of the package', () => {
  const manifest = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8')) as {
    version: string;
  };
  expect(VERSION).toBe(manifest.version);
});
