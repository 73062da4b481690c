/** The options of a search that leave the uniform infinite chain. */
import type { ParseArgsConfig } from 'node:util';
import { InputError, show } from '../errors.ts';
import { type Extent, INFINITE } from '../lattice/lattice.ts';
import { parseBondModel, parseLatticeModel } from '../model/lattice-formula.ts';
import type { LatticeModel } from '../model/lattice-model.ts';
import { latticeModelFromJson } from '../model/lattice-schema.ts';
import { LATTICES, type LatticeName } from '../model/lattices.ts';
import type { LatticeOptions } from '../search/lattice/search.ts';
import type { CommandInput } from './command.ts';
import { documentFromOptions, readText, settings } from './model-options.ts';

export const LATTICE_OPTIONS = {
  wave: { type: 'string' },
  'all-waves': { type: 'boolean' },
  period: { type: 'string' },
  open: { type: 'string' },
  ring: { type: 'string' },
  local: { type: 'string' },
  window: { type: 'string' },
  lattice: { type: 'string' },
} satisfies ParseArgsConfig['options'];

export const LATTICE_HELP = `Beyond the uniform infinite chain:
  --period P            charges invariant under translation by P cells only
  --wave M/N            charges that translation by a period multiplies by e^(2πi M/N)
  --all-waves           at which of all wave numbers there are charges, and how many; exact
  --open L              an open chain of L cells; each place has coefficients of its own
  --ring L              a ring of L cells, also a short one; --period 0 asks for no invariance
  --local FORMULA       with --open or --ring: terms in one place, "1/2 Z_0 + X_3 X_4"
  --window A,B[,C]      a plane or space: strings within so many cells; sites as in "X_{0,0} X_{1,0}"
  --lattice NAME        ${Object.keys(LATTICES).join(', ')}: words of two letters act on
                        all bonds, of one letter on all spins`;

type Input = Pick<CommandInput, 'values' | 'positionals'>;

export function asksForLattice({ values }: Input): boolean {
  return Object.keys(LATTICE_OPTIONS).some((name) => values[name] !== undefined);
}

/** @param range of --range, for one direction */
export async function latticeFromOptions(
  input: Input,
  range: number | undefined,
): Promise<{ model: LatticeModel; options: LatticeOptions }> {
  const { values } = input;
  const text = (name: Exclude<keyof typeof LATTICE_OPTIONS, 'all-waves'>) =>
    values[name] as string | undefined;
  const window = text('window') === undefined ? undefined : numbers('--window', text('window')!);
  if ((window === undefined) === (range === undefined))
    throw new InputError(
      'command line',
      '--range K or --window A,B',
      window === undefined ? 'neither' : 'both',
    );
  const [period, wave] = [text('period'), text('wave')];
  const asked = {
    ...(period === undefined ? {} : { period: numbers('--period', period) }),
    ...(wave === undefined ? {} : { wave: wave.split(',') }),
  };
  const file = values['model'] as string | undefined;
  if (file !== undefined) {
    const json = await readText(file);
    if (/"lattice"\s*:/.test(json)) {
      for (const option of ['open', 'ring', 'local', 'lattice'] as const)
        if (text(option) !== undefined)
          throw new InputError(`--${option}`, 'the lattice of the JSON model alone', 'both');
      const model = latticeModelFromJson(json, settings(input));
      return { model, options: { window: window ?? [range!], ...asked } };
    }
    if (file === '-') throw new InputError('--model', 'a file, or a model with "lattice"', 'standard input');
  }
  const name = text('lattice');
  if (name !== undefined && !Object.hasOwn(LATTICES, name))
    throw new InputError('--lattice', Object.keys(LATTICES).join(', '), show(name));
  const sizes = window ?? [range!];
  const dimension = name === undefined ? sizes.length : LATTICES[name as LatticeName].dimension;
  const [open, ring] = [text('open'), text('ring')];
  if (open !== undefined && ring !== undefined)
    throw new InputError('command line', '--open or --ring', 'both');
  const finite = open ?? ring;
  const lengths = finite === undefined ? [] : numbers(open === undefined ? '--ring' : '--open', finite);
  if (lengths.length > 0 && lengths.length !== dimension)
    throw new InputError('command line', `${dimension} lengths in cells`, `${lengths.length}`);
  const extents: Extent[] = Array.from({ length: dimension }, (_, d) =>
    finite === undefined ? INFINITE : { kind: open === undefined ? 'ring' : 'open', cells: lengths[d]! },
  );
  const document = await documentFromOptions(input);
  if (!('formula' in document))
    throw new InputError('command line', 'a formula for a search beyond the chain', 'a list of terms');
  const parameters = new Map([...Object.entries(document.parameters ?? {}), ...settings(input)]);
  const local = text('local');
  if (name !== undefined && local !== undefined)
    throw new InputError('--local', 'a formula site by site', 'one beside --lattice');
  const model =
    name === undefined
      ? parseLatticeModel(document.formula, {
          extents,
          parameters,
          ...(document.cell === undefined ? {} : { cell: document.cell }),
          ...(local === undefined ? {} : { local }),
        })
      : parseBondModel(name as LatticeName, document.formula, { extents, parameters });
  return {
    model,
    options: {
      window: sizes,
      ...asked,
    },
  };
}

function numbers(who: string, text: string): number[] {
  if (!/^\d{1,4}(,\d{1,4}){0,2}$/.test(text))
    throw new InputError(who, 'whole numbers of cells with commas between them', show(text));
  return text.split(',').map(Number);
}
