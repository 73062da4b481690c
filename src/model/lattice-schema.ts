/** The JSON model of a lattice: as the JSON model of a chain, with a field `lattice`. Validated as strictly. */
import { z } from 'zod';
import type { Exact } from '../algebra/rational.ts';
import { InputError, show } from '../errors.ts';
import { MAX_CELL } from '../lattice/chain.ts';
import { INFINITE, MAX_CELLS } from '../lattice/lattice.ts';
import { parseBondModel, parseLatticeModel } from './lattice-formula.ts';
import type { LatticeModel } from './lattice-model.ts';
import { LATTICES, type LatticeName } from './lattices.ts';
import { MAX_FORMULA_LENGTH, MAX_NAME_LENGTH, MAX_PARAMETERS } from './limits.ts';
import { hasPrototypeKey, LINE, LINES, number, parseJson, pathOf, shown, wording } from './schema.ts';
import { PARAMETER_NAME } from './tokens.ts';

const cells = z.int().min(1).max(MAX_CELLS);

const extent = z.union([
  z.literal('infinite'),
  z.strictObject({ ring: cells }),
  z.strictObject({ open: cells }),
]);

const extents = z.array(extent).min(1).max(3).meta({ description: 'One entry a direction of the lattice.' });

const lattice = z.union([
  z.strictObject({
    name: z.enum(Object.keys(LATTICES) as [LatticeName, ...LatticeName[]]),
    extents: extents.optional(),
  }),
  z.strictObject({
    cell: z.int().min(1).max(MAX_CELL).optional().meta({ description: 'Spins in the repeating unit.' }),
    extents,
  }),
]);

export const latticeModelSchema = z.strictObject({
  $schema: z.string().max(1_000).regex(LINE, 'expected one line of text').optional(),
  name: z.string().min(1).max(200).regex(LINE, 'expected one line of text').optional(),
  note: z.string().max(10_000).regex(LINES, 'expected text').optional(),
  source: z.string().max(2_000).regex(LINE, 'expected one line of text').optional(),
  lattice,
  formula: z.string().min(1).max(MAX_FORMULA_LENGTH).meta({
    description:
      'On a named lattice, words: two letters act on all bonds, one on all spins. Else letters on sites, X_{0,0} X_{1,0}.',
  }),
  local: z
    .string()
    .min(1)
    .max(MAX_FORMULA_LENGTH)
    .optional()
    .meta({ description: 'Terms in one place, site by site; finite lattices without a name only.' }),
  parameters: z
    .record(z.string().max(MAX_NAME_LENGTH).regex(PARAMETER_NAME, 'expected the name of a parameter'), number)
    .refine((all) => Object.keys(all).length <= MAX_PARAMETERS, `at most ${MAX_PARAMETERS} parameters`)
    .optional(),
});

export type LatticeDocument = z.infer<typeof latticeModelSchema>;

/** The JSON Schema (draft 2020-12) of the JSON model of a lattice. */
export function latticeModelJsonSchema(): Record<string, unknown> {
  return {
    ...z.toJSONSchema(latticeModelSchema, { target: 'draft-2020-12' }),
    title: 'A spin-1/2 Hamiltonian on a lattice',
  };
}

/**
 * Reads the JSON model of a lattice; `parameters` add to those of the document, or replace them.
 *
 * @throws InputError with the path of the first fault, and as `parseLatticeModel`
 */
export function latticeModelFromJson(
  input: unknown,
  parameters: ReadonlyMap<string, Exact> = new Map(),
): LatticeModel {
  const value = typeof input === 'string' ? parseJson(input) : input;
  if (typeof value !== 'object' || value === null || Array.isArray(value) || !Object.hasOwn(value, 'lattice'))
    throw new InputError('model', 'a JSON object with "lattice" and "formula"', show(value));
  if (hasPrototypeKey((value as { parameters?: unknown }).parameters))
    throw new InputError('model.parameters', 'the name of a parameter', show('__proto__'));
  const result = latticeModelSchema.safeParse(value);
  if (!result.success) {
    const [issue] = result.error.issues;
    throw new InputError(`model${pathOf(issue!.path)}`, wording(issue!), shown(value, issue!));
  }
  const { lattice: where, formula, local, parameters: own = {} } = result.data;
  const all = new Map<string, Exact>([...Object.entries(own), ...parameters]);
  const given = where.extents?.map((e) => {
    if (e === 'infinite') return INFINITE;
    return 'ring' in e
      ? ({ kind: 'ring', cells: e.ring } as const)
      : ({ kind: 'open', cells: e.open } as const);
  });
  if ('name' in where) {
    if (local !== undefined)
      throw new InputError('model.local', 'a lattice without a name beside it', show(where.name));
    return parseBondModel(where.name, formula, {
      parameters: all,
      ...(given === undefined ? {} : { extents: given }),
    });
  }
  return parseLatticeModel(formula, {
    extents: given!,
    parameters: all,
    ...(where.cell === undefined ? {} : { cell: where.cell }),
    ...(local === undefined ? {} : { local }),
  });
}
