/**
 * A plan: one model with named parameters, the points at which they are taken, and what is done at each. Validated strictly, as JSON
 * models are; `docs/scans.md` describes it. The canonical plan is what results belong to: its SHA-256 marks them.
 */
import { z } from 'zod';
import { exact, textFromRational } from '../algebra/rational.ts';
import { InputError, show } from '../errors.ts';
import { MAX_CELL } from '../lattice/chain.ts';
import { MAX_FORMULA_LENGTH, MAX_MODEL_LENGTH, MAX_NAME_LENGTH, MAX_PARAMETERS } from '../model/limits.ts';
import {
  LINE,
  LINES,
  type ModelDocument,
  number,
  parseJson,
  pathOf,
  readModelDocument,
  shown,
  wording,
} from '../model/schema.ts';
import { parseSyntax } from '../model/syntax.ts';
import { PARAMETER_NAME } from '../model/tokens.ts';
import { refuseRepeatedKeys } from './keys.ts';
import { gridSize } from './points.ts';

/** Points that need no confirmation. */
export const UNCONFIRMED_POINTS = 10_000;
/** Most points of a plan. */
export const MAX_POINTS = 1_000_000;
/** Most values of one parameter on a grid. */
const MAX_VALUES = 100_000;
/** Largest range that a task may name; what fits is known only with the model. */
const MAX_RANGE = 9_999;

const name = z.string().max(MAX_NAME_LENGTH).regex(PARAMETER_NAME, 'expected the name of a parameter');
const range = z.int().min(1).max(MAX_RANGE);

// Which fields go together is said below: a union would name a fault of the branch that was not meant.
const axis = z.strictObject({
  name,
  values: z.array(number).min(1).max(MAX_VALUES).optional(),
  from: number.optional(),
  to: number.optional(),
  steps: z
    .int()
    .min(1)
    .max(MAX_VALUES - 1)
    .optional(),
});

const task = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('search'),
    range,
    charges: z.boolean().default(false),
    // Conserved sectors that are searched apart, each a part of its own.
    sectors: z.union([z.literal(1), z.literal(2), z.literal(4), z.literal(8)]).default(1),
    certificates: z.boolean().default(false),
  }),
  z.strictObject({
    kind: z.literal('decide'),
    range: range.nullable().default(null),
    waveNumbers: z.boolean().default(false),
    certificates: z.boolean().default(false),
  }),
  z.strictObject({
    kind: z.literal('residual'),
    candidate: z.string().min(1).max(MAX_FORMULA_LENGTH),
    range: range.nullable().default(null),
  }),
]);

const pointsPlan = z.strictObject({
  plan: z.literal('points'),
  $schema: z.string().max(1_000).regex(LINE, 'expected one line of text').optional(),
  name: z.string().min(1).max(200).regex(LINE, 'expected one line of text').nullish(),
  note: z.string().max(10_000).regex(LINES, 'expected text').optional(),
  model: z.looseObject({}),
  parameters: z.array(axis).max(MAX_PARAMETERS).default([]),
  points: z
    .union(
      [
        z.literal('grid'),
        z.strictObject({
          list: z.array(z.array(number)).min(1).max(MAX_POINTS).optional(),
          sample: z.int().min(1).max(MAX_POINTS).optional(),
          seed: z.int().min(0).optional(),
        }),
      ],
      {
        error: ({ input }) =>
          typeof input === 'object' && input !== null
            ? undefined
            : 'expected "grid", {"list": …} or {"sample": …, "seed": …}',
      },
    )
    .default('grid'),
  task,
  confirm: z.int().min(1).max(MAX_POINTS).optional(),
});

/** One parameter: its values on a grid, equally spaced ones with both ends, or a name alone where the points are listed. */
export type ScanAxis =
  | { readonly name: string; readonly values: readonly string[] }
  | { readonly name: string; readonly from: string; readonly to: string; readonly steps: number }
  | { readonly name: string };

export type ScanTask = z.infer<typeof task>;

/** A validated plan: numbers as exact text in lowest terms, defaults filled in, every field that bears on what is written. */
export interface PointsPlan {
  readonly plan: 'points';
  readonly name: string | null;
  readonly model: {
    readonly cell: number;
    readonly formula: string;
    /** Parameters with one value throughout, in alphabetical order. */
    readonly parameters: Readonly<Record<string, string>>;
  };
  readonly parameters: readonly ScanAxis[];
  readonly points:
    | 'grid'
    | { readonly list: readonly (readonly string[])[] }
    | { readonly sample: number; readonly seed: number };
  readonly task: ScanTask;
  /** The number of points. */
  readonly confirm: number;
}

/** A plan and its canonical text. */
export interface ReadPlan {
  readonly plan: PointsPlan;
  /** The canonical plan: the same text for every way to write the same plan. Ends with a line feed. */
  readonly text: string;
}

/** The kinds of plans that there are. */
const KINDS = ['points'];

/**
 * Reads a plan, from text or from a parsed value.
 *
 * @throws InputError with the path of the first fault: the form, a name twice, a parameter that nothing uses or that has no value, a
 *   point twice, more points than were confirmed
 */
export function readPlan(input: unknown): ReadPlan {
  if (typeof input === 'string') refuseRepeatedKeys(input, 'plan');
  const value = typeof input === 'string' ? parseJson(input, 'plan') : input;
  if (typeof value !== 'object' || value === null || Array.isArray(value))
    throw new InputError('plan', 'a JSON object', show(value));
  const kind = Object.hasOwn(value, 'plan') ? (value as { plan: unknown }).plan : undefined;
  if (!KINDS.includes(kind as string))
    throw new InputError('plan.plan', `one of ${KINDS.map((k) => show(k)).join(', ')}`, show(kind));
  const result = pointsPlan.safeParse(value);
  if (!result.success) {
    const issue = deepest(result.error.issues[0]!);
    throw new InputError(`plan${pathOf(issue.path)}`, wording(issue), shown(value, issue));
  }
  const { data } = result;
  const draft = {
    plan: 'points' as const,
    name: data.name ?? null,
    model: modelIn(data.model),
    parameters: data.parameters.map(axisFrom),
    points: pointsFrom(data.points),
    task: data.task,
  };
  checkNames(draft);
  const plan: PointsPlan = Object.freeze({ ...draft, confirm: confirmed(draft, data.confirm) });
  const text = `${JSON.stringify(plan)}\n`;
  if (text.length > MAX_MODEL_LENGTH)
    throw new InputError(
      'plan',
      `at most ${MAX_MODEL_LENGTH} characters in canonical form`,
      `${text.length}`,
    );
  return { plan, text };
}

/** SHA-256 of the canonical plan, 64 hexadecimal digits behind `sha256:`. */
export async function planHash({ text }: Pick<ReadPlan, 'text'>): Promise<string> {
  return sha256(text);
}

/** SHA-256 of a text in UTF-8, as `sha256:` and 64 hexadecimal digits. */
export async function sha256(text: string): Promise<string> {
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(text));
  return `sha256:${[...new Uint8Array(digest)].map((byte) => byte.toString(16).padStart(2, '0')).join('')}`;
}

function modelIn(value: unknown): PointsPlan['model'] {
  const model = within('plan.', () => readModelDocument(value));
  if (!('formula' in model))
    throw new InputError('plan.model', 'a formula with parameters', 'explicit terms, which have none');
  const fixed = Object.entries(model.parameters ?? {}).map(([key, v]) => [key, exactText(v)] as const);
  return {
    cell: cellOf(model),
    formula: model.formula,
    parameters: Object.fromEntries(fixed.sort(([a], [b]) => (a < b ? -1 : 1))),
  };
}

function cellOf({ cell = 1 }: ModelDocument): number {
  if (cell > MAX_CELL) throw new InputError('plan.model.cell', `at most ${MAX_CELL}`, show(cell));
  return cell;
}

function axisFrom(axis: z.infer<typeof pointsPlan>['parameters'][number], i: number): ScanAxis {
  const who = `plan.parameters[${i}]`;
  const { name, values, from, to, steps } = axis;
  const spaced = [from, to, steps].filter((field) => field !== undefined).length;
  if (values !== undefined ? spaced > 0 : spaced % 3 !== 0)
    throw new InputError(
      who,
      '"values", or "from", "to" and "steps"',
      values === undefined ? 'a part' : 'both',
    );
  if (values !== undefined) {
    const texts = values.map(exactText);
    const twice = repeated(texts);
    if (twice !== undefined) throw new InputError(`${who}.values`, 'every value once', `${twice} twice`);
    return { name, values: texts };
  }
  if (from === undefined || to === undefined || steps === undefined) return { name };
  const ends = { from: exactText(from), to: exactText(to) };
  if (ends.from === ends.to) throw new InputError(who, 'two different ends', `${ends.from} twice`);
  return { name, ...ends, steps };
}

function pointsFrom(points: z.infer<typeof pointsPlan>['points']): PointsPlan['points'] {
  if (points === 'grid') return points;
  const { list, sample, seed } = points;
  if (list !== undefined && sample === undefined && seed === undefined)
    return { list: list.map((row) => row.map(exactText)) };
  if (list === undefined && sample !== undefined && seed !== undefined) return { sample, seed };
  throw new InputError(
    'plan.points',
    '"list", or "sample" and "seed"',
    Object.keys(points).join(', ') || 'neither',
  );
}

function exactText(value: string | number): string {
  return textFromRational(exact(value));
}

/** Every name once, and every name known: the parameters of the formula and of a candidate are exactly those with values. */
function checkNames({ model, parameters, task }: Omit<PointsPlan, 'confirm'>): void {
  const names = parameters.map((axis) => axis.name);
  const twice = repeated(names);
  if (twice !== undefined) throw new InputError('plan.parameters', 'every name once', `${show(twice)} twice`);
  const fixed = Object.keys(model.parameters);
  const both = fixed.find((n) => names.includes(n));
  if (both !== undefined)
    throw new InputError(
      'plan.parameters',
      'names without a value in the model',
      `${show(both)}, which has one`,
    );
  const used = within('plan.model.', () => parseSyntax(model.formula)).names;
  const inCandidate =
    task.kind === 'residual'
      ? within('plan.task.candidate: ', () => parseSyntax(task.candidate)).names
      : new Map<string, number>();
  const unknown = [...names, ...fixed].find((n) => !used.has(n) && !inCandidate.has(n));
  if (unknown !== undefined)
    throw new InputError(
      'plan.parameters',
      'parameters of the formula',
      `${show(unknown)}, which it does not use`,
    );
  const missing = [...used.keys(), ...inCandidate.keys()].find(
    (n) => !names.includes(n) && !fixed.includes(n),
  );
  if (missing !== undefined)
    throw new InputError('plan.parameters', 'every parameter of the formula', `no ${show(missing)}`);
}

/** The number of points: within the limits, and confirmed where there are many. */
function confirmed({ parameters, points }: Omit<PointsPlan, 'confirm'>, confirm: number | undefined): number {
  const listed = points !== 'grid' && 'list' in points;
  parameters.forEach((axis, i) => {
    if (!('values' in axis) && !('steps' in axis) && !listed)
      throw new InputError(`plan.parameters[${i}]`, '"values", or "from", "to" and "steps"', 'neither');
    if (('values' in axis || 'steps' in axis) && listed)
      throw new InputError(`plan.parameters[${i}]`, 'a name alone, since the points are listed', 'values');
  });
  let count: bigint;
  if (listed) {
    points.list.forEach((row, i) => {
      if (row.length !== parameters.length)
        throw new InputError(
          `plan.points.list[${i}]`,
          `${parameters.length} values, one a parameter`,
          `${row.length}`,
        );
    });
    const twice = repeated(points.list.map((row) => row.join(', ')));
    if (twice !== undefined) throw new InputError('plan.points.list', 'every point once', `${twice} twice`);
    count = BigInt(points.list.length);
  } else {
    count = gridSize(parameters);
    if (points !== 'grid') {
      if (BigInt(points.sample) > count)
        throw new InputError(
          'plan.points.sample',
          `at most the ${count} points that the values allow`,
          `${points.sample}`,
        );
      count = BigInt(points.sample);
    }
  }
  if (count > BigInt(MAX_POINTS))
    throw new InputError(
      'plan.points',
      `at most ${MAX_POINTS.toLocaleString('en')} points`,
      count.toLocaleString('en'),
    );
  if (confirm !== undefined && BigInt(confirm) !== count)
    throw new InputError('plan.confirm', `the number of points, ${count}`, `${confirm}`);
  if (confirm === undefined && count > BigInt(UNCONFIRMED_POINTS))
    throw new InputError(
      'plan.points',
      `at most ${UNCONFIRMED_POINTS.toLocaleString('en')} points, or "confirm": ${count} beside them`,
      `${count.toLocaleString('en')} points`,
    );
  return Number(count);
}

function repeated(list: readonly string[]): string | undefined {
  const seen = new Set<string>();
  return list.find((entry) => seen.size === seen.add(entry).size);
}

/** A fault of a part, said with its place in the plan. */
function within<T>(place: string, read: () => T): T {
  try {
    return read();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    throw new InputError(`${place}${error.who}`, error.expected, error.got, error.source);
  }
}

/** Of a union without words of its own: the first fault of the branch that was meant, one that knows all keys and got furthest. */
function deepest(issue: z.core.$ZodIssue): z.core.$ZodIssue {
  if (issue.code !== 'invalid_union' || issue.message !== 'Invalid input' || issue.errors.length === 0)
    return issue;
  const strange = (branch: readonly z.core.$ZodIssue[]) => branch.some((i) => i.code === 'unrecognized_keys');
  const meant = issue.errors.filter((branch) => !strange(branch));
  const firsts = (meant.length > 0 ? meant : issue.errors).map((branch) => deepest(branch[0]!));
  const best = firsts.reduce((a, b) => (b.path.length > a.path.length ? b : a));
  return { ...best, path: [...issue.path, ...best.path] };
}

/** The JSON Schema (draft 2020-12) of plans. */
export function planJsonSchema(): Record<string, unknown> {
  return {
    ...z.toJSONSchema(pointsPlan, { target: 'draft-2020-12', io: 'input' }),
    title: 'A plan for a scan: one model, the points of its parameters, and what is done at each',
  };
}
