/** Sectors that were searched apart, put together: one result a point, as if it had been searched as a whole. */
import { Operator } from '../algebra/operator.ts';
import { rationalFromText } from '../algebra/rational.ts';
import { wordFromText } from '../algebra/word.ts';
import { certificateNow } from '../certificate/certificate.ts';
import { HoldfastError, LimitError } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { SearchResult } from '../search/result.ts';
import { combined, latecomers, type SectorCharges, searchSector } from '../search/search.ts';
import { type Sector, sectorsOf } from '../search/sectors.ts';
import { type Collected, isFinal } from './merge.ts';
import { type PointsPlan, type ScanTask, sha256 } from './plan.ts';
import { pointsIn, sectorsIn } from './points.ts';
import type { Outcome, PointAnswer } from './record.ts';
import { hamiltonianAt, searchAnswer, sectorGrading } from './run.ts';

/** The points of a plan, and the certificates that were written for them. */
export interface CombinedSectors {
  readonly collected: Collected;
  readonly certificates: ReadonlyMap<number, string>;
}

/**
 * @param parts what is known of every sector of every point
 * @param onPoint called before each point; throwing from it ends the work with that error
 */
export async function combineSectors(
  plan: PointsPlan,
  parts: Collected,
  onPoint: (done: number) => void | Promise<void>,
): Promise<CombinedSectors> {
  const { task } = plan;
  const sectors = sectorsIn(plan);
  const points = pointsIn(plan);
  const outcomes = new Map<number, Outcome>();
  const certificates = new Map<number, string>();
  const [missing, failed, conflicts]: [number[], number[], number[]] = [[], [], []];
  for (let point = 0; point < points.count; point++) {
    await onPoint(point / points.count);
    const numbers = Array.from({ length: sectors }, (_, i) => point * sectors + i);
    const own = numbers.map((number) => parts.outcomes.get(number));
    if (numbers.some((number) => parts.conflicts.includes(number))) conflicts.push(point);
    const unfinished = own.find((outcome) => outcome !== undefined && !isFinal(outcome));
    if (own.includes(undefined)) missing.push(point);
    else if (unfinished !== undefined) {
      failed.push(point);
      outcomes.set(point, unfinished);
    } else if (task.kind === 'search') {
      const { outcome, certificate } = await whole(plan, task, points.at(point), own as Outcome[]);
      outcomes.set(point, outcome);
      if (!isFinal(outcome)) failed.push(point);
      if (certificate !== null) certificates.set(point, certificate);
    }
  }
  const { strays } = parts;
  return { collected: { points, outcomes, missing, failed, conflicts, strays }, certificates };
}

async function whole(
  plan: PointsPlan,
  task: Extract<ScanTask, { kind: 'search' }>,
  values: readonly string[],
  outcomes: readonly Outcome[],
): Promise<{ outcome: Outcome; certificate: string | null }> {
  const refused = outcomes.find((outcome) => outcome.status === 'refused');
  if (refused !== undefined) return { outcome: refused, certificate: null };
  try {
    const h = hamiltonianAt(plan, values);
    const sectors = sectorsOf(sectorGrading(h, task));
    const result = resultOf(
      h,
      task.range,
      sectors,
      outcomes.slice(0, sectors.length).map((outcome) => partIn(h, outcome)),
    );
    const answer = searchAnswer(result, task.charges);
    if (!task.certificates) return { outcome: { status: 'done', answer }, certificate: null };
    try {
      const text = certificateNow(result);
      return {
        outcome: { status: 'done', answer, certificate: { id: await sha256(text) } },
        certificate: text,
      };
    } catch (error) {
      if (!(error instanceof LimitError)) throw error;
      return {
        outcome: { status: 'done', answer, certificate: { none: error.message } },
        certificate: null,
      };
    }
  } catch (error) {
    if (!(error instanceof HoldfastError)) throw error;
    return { outcome: { status: 'failed', reason: error.message }, certificate: null };
  }
}

function resultOf(
  h: Hamiltonian,
  range: number,
  sectors: readonly Sector[],
  parts: SectorCharges[],
): SearchResult {
  for (let late = latecomers(parts); late !== undefined; late = latecomers(parts))
    for (const i of late.parts)
      parts[i] = searchSector(h, sectors[i]!, { range, method: 'exhaustive', primesBelow: late.primesBelow });
  return combined(h, range, parts, 'exhaustive', 0);
}

/** A sector as it was recorded. What is on a disk is not believed: every charge is multiplied out again. */
function partIn(h: Hamiltonian, outcome: Outcome): SectorCharges {
  const answer: PointAnswer | undefined = outcome.status === 'done' ? outcome.answer : undefined;
  if (answer?.kind !== 'sector' || answer.primes.length === 0)
    throw new HoldfastError('collect: a record of a sector holds something else');
  const charges = answer.charges.map(({ range, parity, terms }) => ({
    range,
    parity,
    density: Operator.fromTerms(
      terms.map(([word, value]) => [wordFromText(word), rationalFromText(value)] as const),
    ),
  }));
  if (charges.some(({ density }) => !h.chain.bracket(h.density, density).isZero()))
    throw new HoldfastError('collect: a record of a sector holds something that is not conserved');
  return { charges, primes: answer.primes };
}
