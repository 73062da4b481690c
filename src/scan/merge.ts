/** Many files of results into one answer a point, whatever their number and order. */
import type { Points } from './points.ts';
import type { Outcome, PointRecord } from './record.ts';

/** What is known of the points of a plan. */
export interface Collected {
  readonly points: Points;
  /** By point. A failure stands only where nothing better is known. */
  readonly outcomes: ReadonlyMap<number, Outcome>;
  /** Points without any outcome, rising. */
  readonly missing: readonly number[];
  readonly failed: readonly number[];
  /** Points for which two results differ: neither is believed. They count as missing. */
  readonly conflicts: readonly number[];
  /** Records that belong to no point of the plan, or to one at other values. */
  readonly strays: number;
}

/** Is this for good, so that the point need not be done again? */
export function isFinal(outcome: Outcome): boolean {
  return outcome.status !== 'failed';
}

/** Merges records. Times do not count: the same outcome twice is the same result. */
export function mergeRecords(points: Points, records: Iterable<PointRecord>): Collected {
  const outcomes = new Map<number, Outcome>();
  const conflicts = new Set<number>();
  let strays = 0;
  for (const { point, at, outcome } of records) {
    if (point >= points.count || !sameTexts(at, points.at(point))) {
      strays++;
      continue;
    }
    const known = outcomes.get(point);
    if (known === undefined || (!isFinal(known) && isFinal(outcome))) outcomes.set(point, outcome);
    else if (isFinal(outcome) && JSON.stringify(known) !== JSON.stringify(outcome)) conflicts.add(point);
    // Of two failures the text that sorts first: the answer does not depend on the order of files.
    else if (!isFinal(known) && !isFinal(outcome) && JSON.stringify(outcome) < JSON.stringify(known))
      outcomes.set(point, outcome);
  }
  for (const point of conflicts) outcomes.delete(point);
  const missing: number[] = [];
  const failed: number[] = [];
  for (let point = 0; point < points.count; point++) {
    const outcome = outcomes.get(point);
    if (outcome === undefined) missing.push(point);
    else if (!isFinal(outcome)) failed.push(point);
  }
  return { points, outcomes, missing, failed, conflicts: [...conflicts].sort((a, b) => a - b), strays };
}

function sameTexts(a: readonly string[], b: readonly string[]): boolean {
  return a.length === b.length && a.every((text, i) => text === b[i]);
}
