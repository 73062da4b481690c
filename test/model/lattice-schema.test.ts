import { describe, expect, it } from 'vitest';
import { parseBondModel, parseLatticeModel } from '../../src/model/lattice-formula.ts';
import { latticeModelFromJson, latticeModelJsonSchema } from '../../src/model/lattice-schema.ts';

describe('the JSON model of a lattice', () => {
  it('reads named lattices and free ones', () => {
    expect(
      latticeModelFromJson({
        lattice: { name: 'triangular' },
        formula: 'XX + J YY',
        parameters: { J: '1/2' },
      }),
    ).toEqual(parseBondModel('triangular', 'XX + 1/2 YY'));
    const document = {
      name: 'end field',
      lattice: { extents: [{ open: 6 }] },
      formula: 'X_0 X_1 + Y_0 Y_1',
      local: '1/3 Z_0',
    };
    expect(latticeModelFromJson(JSON.stringify(document))).toEqual(
      parseLatticeModel('XX + YY', { extents: [{ kind: 'open', cells: 6 }], local: '1/3 Z_0' }),
    );
  });

  it.each([
    [{ lattice: { name: 'moebius' }, formula: 'XX' }, /model\.lattice/],
    [{ lattice: { extents: [{ open: 0 }] }, formula: 'X_0' }, /model\.lattice/],
    [
      { lattice: { extents: ['infinite', 'infinite', 'infinite', 'infinite'] }, formula: 'X_0' },
      /model\.lattice/,
    ],
    [{ lattice: { name: 'square' }, formula: 'XX', extra: 1 }, /other keys/],
    [{ lattice: { name: 'square' }, formula: 'XX', local: 'Z_0' }, /model\.local/],
    [{ lattice: { name: 'square' }, formula: 'J XX', parameters: { J: 0.5 } }, /parameters/],
    [JSON.parse('{"lattice":{"name":"square"},"formula":"XX","parameters":{"__proto__":1}}'), /parameter/],
    [{ formula: 'XX' }, /lattice/],
    ['[', /JSON/],
  ])('refuses %j', (input, message) => {
    expect(() => latticeModelFromJson(input)).toThrow(message);
  });

  it('has a schema that names what it takes', () => {
    expect(latticeModelJsonSchema()).toMatchObject({ required: ['lattice', 'formula'] });
  });
});
