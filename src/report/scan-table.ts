/** The results of a scan: one line a point as CSV or JSON, and a summary. The same bytes whatever the shards were. */
import { rationalFromText } from '../algebra/rational.ts';
import type { Collected } from '../scan/merge.ts';
import type { PointsPlan, ScanTask } from '../scan/plan.ts';
import type { Outcome, PointAnswer } from '../scan/record.ts';
import { EVERY_RANGE_CAUTIONS } from '../theory/verdict.ts';
import { decimalText } from './decimal.ts';
import { CAUTIONS } from './verdict.ts';

/** A scan that is ready to be shown. */
export interface ScanResults {
  readonly plan: PointsPlan;
  /** `sha256:` and the digest of the canonical plan. */
  readonly hash: string;
  readonly collected: Collected;
  /** Certificates that a checker did not accept, or that do not belong to their point: the reason, by point. */
  readonly rejected: ReadonlyMap<number, string>;
}

/** Decimals of the columns beside the exact values; for plots only. */
const DECIMALS = 12;

const COLUMNS: Readonly<Record<ScanTask['kind'], readonly string[]>> = {
  search: ['charges', 'minimum ring'],
  decide: ['verdict', 'from', 'per range', 'at most', 'exceptional', 'theorem', 'wave numbers', 'searched'],
  residual: ['conserved', 'squared norm', 'correction range', 'squared distance'],
};

/**
 * The table as CSV (RFC 4180, lines end with a line feed): a line for every point of the plan. Exact values as text, `p/q`; beside them
 * decimals for plotting.
 */
export function* scanCsv({ plan, collected, rejected }: ScanResults): Generator<string> {
  const names = plan.parameters.map((axis) => axis.name);
  const { task } = plan;
  const ranges = task.kind === 'search' ? Array.from({ length: task.range }, (_, j) => `range ${j + 1}`) : [];
  yield csvLine([
    'point',
    ...names,
    ...names.map((name) => `${name} decimal`),
    'status',
    'answer',
    ...ranges,
    ...COLUMNS[task.kind],
    'certificate',
    'reason',
  ]);
  for (let point = 0; point < collected.points.count; point++) {
    const at = collected.points.at(point);
    const outcome = collected.outcomes.get(point);
    const answer = outcome?.status === 'done' ? outcome.answer : undefined;
    const cells = answer === undefined ? [] : cellsOf(answer);
    yield csvLine([
      String(point + 1),
      ...at,
      ...at.map(decimal),
      statusOf(outcome),
      labelOf(outcome),
      ...Array.from({ length: ranges.length + COLUMNS[task.kind].length }, (_, i) => cells[i] ?? ''),
      certificateOf(outcome, rejected.get(point)),
      reasonOf(outcome) ?? rejected.get(point) ?? '',
    ]);
  }
}

/** The table as JSON, a line a point: the plan, what is missing, every outcome as it was recorded. */
export function* scanJson({ plan, hash, collected, rejected }: ScanResults): Generator<string> {
  const numbers = (points: readonly number[]) => points.map((point) => point + 1);
  const head = {
    plan,
    hash,
    cautions: cautionsOf(plan.task),
    missing: numbers(collected.missing),
    failed: numbers(collected.failed),
    conflicts: numbers(collected.conflicts),
    rejected: Object.fromEntries([...rejected].map(([point, reason]) => [point + 1, reason])),
  };
  const fields = Object.entries(head).map(
    ([key, value]) => `  ${JSON.stringify(key)}: ${JSON.stringify(value)}`,
  );
  yield `{\n${fields.join(',\n')},\n  "points": [\n`;
  for (let point = 0; point < collected.points.count; point++) {
    const at = collected.points.at(point);
    const line = {
      point: point + 1,
      at: Object.fromEntries(plan.parameters.map(({ name }, i) => [name, at[i]])),
      ...(collected.outcomes.get(point) ?? { status: 'missing' }),
    };
    yield `    ${JSON.stringify(line)}${point + 1 < collected.points.count ? ',' : ''}\n`;
  }
  yield '  ]\n}\n';
}

/** Different answers, the most frequent first; a tie goes by text. */
export function answersIn({ collected }: ScanResults): { label: string; count: number }[] {
  const counts = new Map<string, number>();
  for (let point = 0; point < collected.points.count; point++) {
    const label = labelOf(collected.outcomes.get(point));
    counts.set(label, (counts.get(label) ?? 0) + 1);
  }
  return [...counts]
    .map(([label, count]) => ({ label, count }))
    .sort((a, b) => b.count - a.count || (a.label < b.label ? -1 : 1));
}

/** What a point answers, short enough for a legend. */
export function labelOf(outcome: Outcome | undefined): string {
  if (outcome === undefined) return 'missing';
  if (outcome.status === 'refused') return 'no Hamiltonian';
  if (outcome.status === 'failed') return 'failed';
  const { answer } = outcome;
  if (answer.kind === 'search') return newByRange(answer.dimensionByRange).join(' ');
  if (answer.kind === 'sector') return 'one sector';
  if (answer.kind === 'residual') {
    if (answer.conserved) return 'conserved';
    if (answer.correctionRange === undefined) return 'not conserved';
    return answer.correctionRange === null
      ? 'not conserved, no correction'
      : `not conserved, corrected at range ${answer.correctionRange}`;
  }
  switch (answer.verdict) {
    case 'none':
      return `no charge of range ≥ ${answer.from}`;
    case 'complete':
      return `exactly ${answer.perRange} of every range ≥ ${answer.from}`;
    case 'bounded':
      return `at most ${answer.bound!.generic} of every range ≥ ${answer.bound!.from}${answer.bound!.exceptional.length > 0 ? ', with exceptions' : ''}`;
    case 'by citation':
      return `by citation, ${answer.theorem}`;
    case 'undecided':
      return 'undecided';
  }
}

/** What the numbers of a label mean, for a legend. */
export function labelTitle(task: ScanTask): string {
  switch (task.kind) {
    case 'search':
      return `New charges of range exactly 1 … ${task.range}`;
    case 'decide':
      return 'Verdict for every range';
    case 'residual': {
      const candidate = task.candidate.length <= 40 ? `The candidate ${task.candidate}` : 'The candidate';
      return task.range === null ? candidate : `${candidate}; corrections of range ≤ ${task.range}`;
    }
  }
}

/** The answer assumes so much, and does not show so much. */
export function cautionsOf(task: ScanTask): readonly string[] {
  switch (task.kind) {
    case 'search':
      return [`Complete up to range ${task.range}; says nothing about longer ones.`, ...CAUTIONS];
    case 'decide':
      return EVERY_RANGE_CAUTIONS;
    case 'residual':
      return ['On the infinite chain; translation-invariant sums of local terms only.'];
  }
}

function cellsOf(answer: PointAnswer): string[] {
  const text = (value: number | string | null | undefined) =>
    value === null || value === undefined ? '' : String(value);
  switch (answer.kind) {
    case 'search':
      return [
        ...newByRange(answer.dimensionByRange).map(String),
        String(answer.dimensionByRange.at(-1)),
        String(answer.minimumCells),
      ];
    case 'sector':
      return [];
    case 'decide':
      return [
        answer.verdict,
        text(answer.from),
        text(answer.perRange),
        text(answer.bound?.generic),
        (answer.bound?.exceptional ?? []).map(([range, most]) => `${range}: ${most}`).join('; '),
        text(answer.theorem),
        text(answer.waveNumbers),
        newByRange(answer.dimensionByRange).join(' '),
      ];
    case 'residual':
      return [
        answer.conserved ? 'yes' : 'no',
        answer.squaredNorm,
        answer.correctionRange === null ? 'none' : text(answer.correctionRange),
        text(answer.squaredDistance),
      ];
  }
}

function newByRange(dimensions: readonly number[]): number[] {
  return dimensions.map((d, j) => d - (dimensions[j - 1] ?? 0));
}

function statusOf(outcome: Outcome | undefined): string {
  return outcome === undefined ? 'missing' : outcome.status;
}

function reasonOf(outcome: Outcome | undefined): string | undefined {
  if (outcome === undefined) return undefined;
  if (outcome.status !== 'done') return outcome.reason;
  if (outcome.certificate !== undefined && 'none' in outcome.certificate) return outcome.certificate.none;
  return outcome.answer.kind === 'decide' ? (outcome.answer.reason ?? undefined) : undefined;
}

function certificateOf(outcome: Outcome | undefined, rejected: string | undefined): string {
  if (outcome?.status !== 'done' || outcome.certificate === undefined) return '';
  if (rejected !== undefined) return 'rejected';
  return 'id' in outcome.certificate ? outcome.certificate.id : 'none';
}

/** Without the zeros at the end. */
function decimal(value: string): string {
  return decimalText(rationalFromText(value), DECIMALS).replace(/\.?0+$/, '');
}

function csvLine(cells: readonly string[]): string {
  return `${cells.map((cell) => (/[",\n\r]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell)).join(',')}\n`;
}
