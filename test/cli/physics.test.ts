/** The commands on charges, run as a user runs them. */
import { execFile } from 'node:child_process';
import { mkdtempSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { expect, it } from 'vitest';

const ROOT = new URL('../..', import.meta.url).pathname;
const TSX = createRequire(import.meta.url).resolve('tsx/cli');

async function holdfast(...args: string[]): Promise<{ status: number; out: string; err: string }> {
  try {
    const { stdout, stderr } = await promisify(execFile)(process.execPath, [
      TSX,
      join(ROOT, 'src/cli/main.ts'),
      ...args,
    ]);
    return { status: 0, out: stdout, err: stderr };
  } catch (error) {
    const { code, stdout, stderr } = error as { code: number; stdout: string; stderr: string };
    return { status: code, out: stdout, err: stderr };
  }
}

it('answers in JSON with exact numbers', { timeout: 60_000 }, async () => {
  const picture = join(mkdtempSync(join(tmpdir(), 'bound-')), 'bound.svg');
  const [bound, residual, currents, algebra, fermions] = await Promise.all([
    holdfast(
      'bound',
      'ZZ + X + 1/2 Z',
      'X',
      '--range',
      '3',
      '--json',
      '--digits',
      '25',
      '--picture',
      picture,
    ),
    holdfast('residual', 'ZZ + g X', 'ZZ', '--set', 'g=2', '--range', '2', '--json'),
    holdfast('currents', 'XX + YY', '--range', '2', '--json'),
    holdfast('algebra', 'XX + YY + ZZ', '--range', '3', '--json'),
    holdfast('fermions', 'ZZ + 2 X', '--json'),
  ]);
  expect(JSON.parse(bound.out).bounds[2]).toEqual({
    range: 3,
    charges: 1,
    bound: '4/9',
    share: '4/9',
    decimal: `0.${'4'.repeat(25)}`,
  });
  expect(readFileSync(picture, 'utf8')).toMatch(/^<svg .*<\/svg>\n$/s);
  expect(JSON.parse(residual.out)).toMatchObject({
    conserved: false,
    correction: { range: 1, density: { X: '2' } },
  });
  expect(JSON.parse(currents.out).charges[0].current).toEqual({ cell: -1, operator: { XY: '2', YX: '-2' } });
  expect(JSON.parse(algebra.out)).toMatchObject({
    charges: [
      { label: { kind: 'spin' } },
      {},
      {},
      { label: { kind: 'hamiltonian' } },
      { label: { kind: 'new' } },
    ],
    symmetries: { su2: [[0]] },
  });
  expect(JSON.parse(fermions.out)).toMatchObject({
    bilinear: true,
    axes: ['X'],
    dispersion: { kind: 'closed' },
  });
});

it('refuses a missing second formula and a flow that is no charge', { timeout: 60_000 }, async () => {
  const [one, flow] = await Promise.all([
    holdfast('residual', 'ZZ', '--range', '2'),
    holdfast('currents', 'XX + 2 YY', '--range', '2', '--flow', '99'),
  ]);
  expect(one.status).toBe(2);
  expect(one.err).toContain('expected the model, then a candidate');
  expect(flow.status).toBe(2);
  expect(flow.err).toContain('--flow');
});
