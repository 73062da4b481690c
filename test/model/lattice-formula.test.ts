import { describe, expect, it } from 'vitest';
import { INFINITE } from '../../src/lattice/lattice.ts';
import { parseBondModel, parseLatticeModel } from '../../src/model/lattice-formula.ts';
import { latticeResultToJson, printLatticeResult } from '../../src/report/lattice.ts';
import { searchLattice } from '../../src/search/background.ts';
import { searchLatticeNow } from '../../src/search/lattice/search.ts';

const plane = [INFINITE, INFINITE];

describe('formulas on lattices', () => {
  it('site by site and bond by bond are one model', () => {
    const sites = parseLatticeModel('X_{0,0} X_{1,0} + X_{0,0} X_{0,1} + g Z_{0,0}', {
      extents: plane,
      parameters: { g: '1/2' },
    });
    const bonds = parseBondModel('square', 'XX + 1/2 Z');
    const charges = (model: typeof sites) => searchLatticeNow(model, { window: [2, 2] }).charges;
    expect(charges(sites)).toEqual(charges(bonds));
    expect(sites.denominator).toBe(2n);
  });

  it('reads spins of a cell as a last letter or number, and negative neighbours through the block', () => {
    const model = parseLatticeModel('X_{1,0,a} X_{0,1,b}', { extents: plane, cell: 2 });
    expect(model.repeated[0]!.sites).toEqual([
      { cell: [1, 0], spin: 0 },
      { cell: [0, 1], spin: 1 },
    ]);
  });

  it('puts local terms where they stand', () => {
    const model = parseLatticeModel('XX', {
      extents: [{ kind: 'open', cells: 5 }],
      local: 'Z_4 + 1/3 X_2 X_3',
    });
    expect(model.local.map((t) => [t.sites.map((s) => s.cell[0]), t.coefficient])).toEqual([
      [[4], 3n],
      [[2, 3], 1n],
    ]);
  });

  it.each([
    ['a word on a plane', () => parseLatticeModel('XX', { extents: plane }), /subscript/],
    ['a coordinate too few', () => parseLatticeModel('X_0 X_1', { extents: plane }), /2 cell numbers.*\n/],
    [
      'a spin that is not in the cell',
      () => parseLatticeModel('X_{0,0,c}', { extents: plane, cell: 2 }),
      /cell of 2/,
    ],
    [
      'a bond that leaves the lattice',
      () => parseLatticeModel('X_0 X_1', { extents: [{ kind: 'open', cells: 3 }], local: 'Z_2 Z_3' }),
      /cells 0 to 2/,
    ],
    ['three letters on a bond', () => parseBondModel('square', 'XXX'), /two letters/],
  ])('refuses %s', (_, act, message) => {
    expect(act).toThrow(message);
  });
});

describe('in a thread, and printed', () => {
  it('gives the same result, and text and JSON from it', async () => {
    const model = parseLatticeModel('ZXZ', { extents: [INFINITE] });
    const options = { window: 4, wave: '1/3' } as const;
    const result = await searchLattice(model, options);
    expect(result.charges).toEqual(searchLatticeNow(model, options).charges);
    expect(printLatticeResult(result)).toContain('Y_0 X_1 X_2 Z_3 + (1 + w) Z_0 X_1 X_2 Y_3');
    const json = JSON.parse(JSON.stringify(latticeResultToJson(result)));
    expect(json).toMatchObject({ dimension: 7, wave: ['1/3'], order: 3, period: [1], window: [4] });
    expect(json.charges[0].real).toHaveLength(2);
  });

  it('stops on an abort, and refuses what does not fit', async () => {
    const model = parseLatticeModel('XX + ZZ + X', { extents: [INFINITE] });
    const controller = new AbortController();
    const running = searchLattice(model, { window: 9, signal: controller.signal });
    controller.abort();
    await expect(running).rejects.toThrow('cancelled');
    await expect(searchLattice(model, { window: 9, memory: 1e6 })).rejects.toThrow('needs about');
  });
});
