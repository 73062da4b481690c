/**
 * The JSON model: a Hamiltonian with its parameters in a file. Validated strictly: unknown keys, floats and over-long values are
 * refused with their path, keys of the document are never used as properties of anything. Described in `docs/model.md`.
 */
import { z } from 'zod';
import {
  type Exact,
  exact,
  MAX_NUMBER_LENGTH,
  type Rational,
  textFromRational,
} from '../algebra/rational.ts';
import { textFromWord, type Word, wordFromText } from '../algebra/word.ts';
import { InputError, show } from '../errors.ts';
import { Chain, MAX_CELL } from '../lattice/chain.ts';
import { type Family, type Parameters, parseFamily, parseModel } from './formula.ts';
import { type Hamiltonian, hamiltonianOf } from './hamiltonian.ts';
import {
  MAX_FORMULA_LENGTH,
  MAX_MODEL_LENGTH,
  MAX_NAME_LENGTH,
  MAX_PARAMETERS,
  MAX_TERMS,
  MAX_WORD_LENGTH,
  operatorOf,
} from './limits.ts';
import { PARAMETER_NAME } from './tokens.ts';

const EXACT = 'expected an exact number: an integer, or a text such as "1/3" or "0.35"';
/** Printable text: control characters would reach terminals and pages. */
export const LINE = /^[^\p{Cc}]*$/u;
export const LINES = /^(?:[^\p{Cc}]|[\n\t])*$/u;

export const number = z
  .union(
    [
      z
        .string()
        .max(MAX_NUMBER_LENGTH)
        .regex(/^[+-]?(?:\d+(?:\/0*[1-9]\d*)?|\d*\.\d+)$/, EXACT),
      z.int(),
    ],
    { error: EXACT },
  )
  .meta({
    description: 'An exact number: an integer, or a text such as "1/3" or "0.35". No other JSON numbers.',
  });

const word = z
  .string()
  .max(MAX_WORD_LENGTH)
  .regex(/^[IXYZ]+$/, `expected a word of letters I, X, Y, Z`)
  .meta({
    description: 'A Pauli string along the spins, for example XZIY. Translates by whole cells are the same.',
  });

const common = {
  $schema: z.string().max(1_000).regex(LINE, 'expected one line of text').optional(),
  name: z.string().min(1).max(200).regex(LINE, 'expected one line of text').optional(),
  note: z.string().max(10_000).regex(LINES, 'expected text').optional(),
  source: z.string().max(2_000).regex(LINE, 'expected one line of text').optional(),
  cell: z
    .int()
    .min(1)
    .max(MAX_CELL)
    .optional()
    .meta({ description: 'Spins in the repeating unit; 1 when absent.' }),
};

const formulaModel = z.strictObject({
  ...common,
  formula: z.string().min(1).max(MAX_FORMULA_LENGTH),
  parameters: z
    .record(z.string().max(MAX_NAME_LENGTH).regex(PARAMETER_NAME, 'expected the name of a parameter'), number)
    .refine((all) => Object.keys(all).length <= MAX_PARAMETERS, `at most ${MAX_PARAMETERS} parameters`)
    .meta({ maxProperties: MAX_PARAMETERS })
    .optional(),
});

const termsModel = z.strictObject({
  ...common,
  terms: z
    .array(z.strictObject({ word, coefficient: number }))
    .min(1)
    .max(MAX_TERMS),
});

/** The zod schema: a formula with parameters, or explicit terms. */
export const modelSchema = z.union([formulaModel, termsModel]);

export type ModelDocument = z.infer<typeof modelSchema>;

/** The JSON Schema (draft 2020-12) of the JSON model. */
export function modelJsonSchema(): Record<string, unknown> {
  return {
    ...z.toJSONSchema(modelSchema, { target: 'draft-2020-12' }),
    title: 'A translation-invariant spin-1/2 Hamiltonian on a chain of cells',
  };
}

/**
 * Validates a JSON model, from text or from an already parsed value. The words of a formula are not read yet.
 *
 * @throws InputError with the path of the first fault
 */
export function readModelDocument(input: unknown): ModelDocument {
  const value = typeof input === 'string' ? parseJson(input) : input;
  if (typeof value !== 'object' || value === null || Array.isArray(value))
    throw new InputError('model', 'a JSON object with "formula" or "terms"', show(value));
  const hasFormula = Object.hasOwn(value, 'formula');
  if (hasFormula === Object.hasOwn(value, 'terms'))
    throw new InputError('model', '"formula" or "terms"', hasFormula ? 'both' : 'neither');
  // zod passes over a key of this name in a record; refuse it instead.
  if (hasFormula && hasPrototypeKey((value as { parameters?: unknown }).parameters))
    throw new InputError('model.parameters', 'the name of a parameter', show('__proto__'));
  const result = (hasFormula ? formulaModel : termsModel).safeParse(value);
  if (result.success) return result.data;
  const [issue] = result.error.issues;
  throw new InputError(`model${pathOf(issue!.path)}`, wording(issue!), shown(value, issue!));
}

/** A JSON model to a Hamiltonian; `parameters` add to those of the document, or replace them. */
export function modelFromDocument(
  document: ModelDocument,
  parameters: ReadonlyMap<string, Exact> = new Map(),
): Hamiltonian {
  if ('formula' in document) return parseModel(document.formula, formulaOptions(document, parameters));
  refuseParameters(parameters);
  const chain = new Chain(document.cell ?? 1);
  return hamiltonianOf(chain, operatorOf('model', document.terms.map(termOf)));
}

/** A JSON model whose formula may leave parameters free. */
export function familyFromDocument(
  document: ModelDocument,
  parameters: ReadonlyMap<string, Exact> = new Map(),
): Family {
  if ('formula' in document) return parseFamily(document.formula, formulaOptions(document, parameters));
  throw new InputError('model', 'a formula with free parameters', 'explicit terms');
}

/**
 * Reads a JSON model, from text or from an already parsed value.
 *
 * @throws InputError with the path in the document, or the position in its formula
 */
export function modelFromJson(input: unknown): Hamiltonian {
  return modelFromDocument(readModelDocument(input));
}

/** The explicit form of a model, canonical: words in alphabetical order, coefficients as exact text. */
export function jsonFromModel(
  { chain, density }: Hamiltonian,
  about: { readonly name?: string; readonly note?: string; readonly source?: string } = {},
): ModelDocument {
  return {
    ...about,
    cell: chain.cell,
    terms: [...density.terms()].map(([w, c]) => ({
      word: textFromWord(w),
      coefficient: textFromRational(c),
    })),
  };
}

export function parseJson(text: string, who = 'model'): unknown {
  if (text.length > MAX_MODEL_LENGTH)
    throw new InputError(who, `at most ${MAX_MODEL_LENGTH} characters`, `${text.length}`);
  try {
    return JSON.parse(text);
  } catch (error) {
    throw new InputError(who, 'JSON', (error as Error).message);
  }
}

export function hasPrototypeKey(value: unknown): boolean {
  return typeof value === 'object' && value !== null && Object.hasOwn(value, '__proto__');
}

function formulaOptions(
  document: Extract<ModelDocument, { formula: string }>,
  parameters: ReadonlyMap<string, Exact>,
): { cell: number; parameters: Parameters } {
  return {
    cell: document.cell ?? 1,
    parameters: new Map<string, Exact>([...Object.entries(document.parameters ?? {}), ...parameters]),
  };
}

function refuseParameters(parameters: ReadonlyMap<string, Exact>): void {
  const [name] = parameters.keys();
  if (name !== undefined)
    throw new InputError('parameters', 'none for a model of explicit terms', show(name));
}

function termOf(term: { word: string; coefficient: string | number }): [Word, Rational] {
  return [wordFromText(term.word), exact(term.coefficient)];
}

export function pathOf(path: readonly PropertyKey[]): string {
  return path.map((key) => (typeof key === 'number' ? `[${key}]` : `.${String(key)}`)).join('');
}

export function wording(issue: z.core.$ZodIssue): string {
  if (issue.code === 'unrecognized_keys') return 'no other keys';
  if (issue.code === 'invalid_key') return 'the name of a parameter';
  return issue.message
    .replace(/^(?:(?:Invalid input|Too small|Too big): )?expected /, '')
    .replace(/, received .*$/, '');
}

/** What stands at the path of an issue; reads own properties only. */
export function shown(root: unknown, issue: z.core.$ZodIssue): string {
  if (issue.code === 'unrecognized_keys') return issue.keys.map((key) => show(key)).join(', ');
  let value = root;
  for (const key of issue.path) {
    if (typeof value !== 'object' || value === null || !Object.hasOwn(value, key)) return 'nothing';
    value = (value as Record<PropertyKey, unknown>)[key];
  }
  return show(value);
}
