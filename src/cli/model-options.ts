/** The options by which every subcommand is handed its model: a formula, a JSON model, or standard input. */
import { createReadStream } from 'node:fs';
import type { ParseArgsConfig } from 'node:util';
import type { Exact } from '../algebra/rational.ts';
import { InputError, show } from '../errors.ts';
import type { Family } from '../model/formula.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { MAX_MODEL_LENGTH } from '../model/limits.ts';
import {
  familyFromDocument,
  type ModelDocument,
  modelFromDocument,
  readModelDocument,
} from '../model/schema.ts';
import type { CommandInput } from './command.ts';

export const MODEL_OPTIONS = {
  cell: { type: 'string' },
  set: { type: 'string', multiple: true },
  model: { type: 'string' },
} satisfies ParseArgsConfig['options'];

/** The lines about the model on a subcommand's help page. */
export const MODEL_HELP = `Model:
  FORMULA               the density of H, exact: "XX + YY + 1/2 ZZ + h X"; "-" reads it from standard input
  --set NAME=VALUE      the value of a parameter, an integer, a fraction or a decimal; once a parameter
  --cell N              spins in the repeating unit (1): words run along the spins, H sums translates by N spins
  --model FILE          a JSON model instead of a formula; "-" reads it from standard input`;

type ModelInput = Pick<CommandInput, 'values' | 'positionals'>;

/** The Hamiltonian a command line names. @throws InputError for none, two, an unreadable file, or anything wrong in it */
export async function modelFromOptions(input: ModelInput): Promise<Hamiltonian> {
  return modelFromDocument(await documentFromOptions(input), settings(input));
}

/** As `modelFromOptions`; parameters without a value stay free. */
export async function familyFromOptions(input: ModelInput): Promise<Family> {
  return familyFromDocument(await documentFromOptions(input), settings(input));
}

/** The JSON model a command line names, without the values of `--set`. */
export async function documentFromOptions({ values, positionals }: ModelInput): Promise<ModelDocument> {
  const file = values['model'] as string | undefined;
  const cell = cellOf(values['cell'] as string | undefined);
  const [formula, another] = positionals;
  if (another !== undefined) throw new InputError('command line', 'one formula, in quotes', show(another));
  if ((formula === undefined) === (file === undefined))
    throw new InputError(
      'command line',
      'a formula or --model FILE',
      formula === undefined ? 'neither' : 'both',
    );
  if (file === undefined && formula !== '-') return { formula: formula!, ...cell };
  const text = await readText(file ?? '-');
  if (file === undefined && !text.trimStart().startsWith('{')) return { formula: text, ...cell };
  const document = readModelDocument(text);
  if (cell.cell === undefined) return document;
  if (document.cell !== undefined && document.cell !== cell.cell)
    throw new InputError('--cell', `the cell of the JSON model, ${document.cell}`, `${cell.cell}`);
  return { ...document, ...cell };
}

function cellOf(text: string | undefined): { cell?: number } {
  if (text === undefined) return {};
  if (!/^\d{1,3}$/.test(text)) throw new InputError('--cell', 'a whole number of spins', show(text));
  return { cell: Number(text) };
}

/** The values of `--set`. */
export function settings({ values }: ModelInput): Map<string, Exact> {
  const parameters = new Map<string, Exact>();
  for (const setting of (values['set'] ?? []) as readonly string[]) {
    const equals = setting.indexOf('=');
    if (equals < 1) throw new InputError('--set', 'name=value', show(setting));
    const name = setting.slice(0, equals).trim();
    if (parameters.has(name)) throw new InputError('--set', 'every parameter once', `${show(name)} twice`);
    parameters.set(name, setting.slice(equals + 1));
  }
  return parameters;
}

/** A file, or standard input for `-`, as text; stops at the limit of a model instead of filling memory. */
export async function readText(path: string, option = '--model'): Promise<string> {
  const who = path === '-' ? 'standard input' : path;
  const chunks: Buffer[] = [];
  let length = 0;
  const take = (chunk: Buffer): void => {
    length += chunk.length;
    if (length > MAX_MODEL_LENGTH) throw new InputError(who, `at most ${MAX_MODEL_LENGTH} bytes`, 'more');
    chunks.push(chunk);
  };
  try {
    const stream = path === '-' ? process.stdin : createReadStream(path);
    for await (const chunk of stream) take(chunk as Buffer);
  } catch (error) {
    if (error instanceof InputError) throw error;
    throw new InputError(option, 'a readable file', `${show(path)}: ${(error as Error).message}`);
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks));
  } catch {
    throw new InputError(who, 'text in UTF-8', 'other bytes');
  }
}
