import { describe, expect, it } from 'vitest';
import { checkNow } from '../../src/check/check.ts';
import { mergeRecords } from '../../src/scan/merge.ts';
import { readPlan } from '../../src/scan/plan.ts';
import { partsIn, pointsIn } from '../../src/scan/points.ts';
import type { PointRecord } from '../../src/scan/record.ts';
import { runPoint } from '../../src/scan/run.ts';
import { combineSectors } from '../../src/scan/sectors.ts';

/** Invented couplings: 8 sectors without fields, 2 or 4 with them. */
const planWith = (sectors: number) =>
  readPlan({
    plan: 'points',
    model: { formula: '2 XX + 3 YY + 5 ZZ + g X + h Z' },
    parameters: [
      { name: 'g', values: ['0', '7/2'] },
      { name: 'h', values: ['0', '1'] },
    ],
    task: { kind: 'search', range: 4, charges: true, certificates: true, sectors },
  }).plan;

async function recordsOf(plan: ReturnType<typeof planWith>): Promise<PointRecord[]> {
  const parts = partsIn(plan);
  const records: PointRecord[] = [];
  for (let point = 0; point < parts.count; point++) {
    const { outcome } = await runPoint(plan, parts.at(point));
    records.push({ point, at: [...parts.at(point)], outcome, milliseconds: 1 });
  }
  return records;
}

describe('sectors searched apart', () => {
  it('make the same outcomes as whole points, with certificates that are accepted', async () => {
    const whole = planWith(1);
    for (const sectors of [2, 4, 8]) {
      const plan = planWith(sectors);
      const parts = partsIn(plan);
      expect(parts.count).toBe(4 * sectors);
      const records = await recordsOf(plan);
      const { collected, certificates } = await combineSectors(
        plan,
        mergeRecords(parts, records.reverse()),
        () => {},
      );
      expect(collected.missing).toEqual([]);
      expect(collected.points.count).toBe(4);
      for (let point = 0; point < 4; point++) {
        const { outcome, certificate } = await runPoint(whole, pointsIn(whole).at(point));
        expect(collected.outcomes.get(point)).toEqual(outcome);
        expect(certificates.get(point)).toBe(certificate);
        expect(checkNow(certificates.get(point)!).status).toBe('accepted');
      }
    }
  });

  it('a sector that is missing, failed or in conflict keeps its point open', async () => {
    const plan = planWith(2);
    const parts = partsIn(plan);
    const records = await recordsOf(plan);
    const combine = async (changed: PointRecord[]) =>
      (await combineSectors(plan, mergeRecords(parts, changed), () => {})).collected;
    expect((await combine(records.filter(({ point }) => point !== 3))).missing).toEqual([1]);
    const failed = records.map((record) =>
      record.point === 4 ? { ...record, outcome: { status: 'failed' as const, reason: 'no room' } } : record,
    );
    expect((await combine(failed)).failed).toEqual([2]);
    const other = { ...records[0]!, outcome: records[1]!.outcome };
    const clash = await combine([...records, other]);
    expect(clash.conflicts).toEqual([0]);
    expect(clash.outcomes.has(0)).toBe(false);
  });

  it('a record that was tampered with is no charge', async () => {
    const plan = planWith(2);
    const records = structuredClone(await recordsOf(plan));
    const answer = records
      .slice(0, 2)
      .map(({ outcome }) => (outcome.status === 'done' ? outcome.answer : undefined))
      .find((found) => found?.kind === 'sector' && found.charges.length > 0);
    if (answer?.kind !== 'sector') throw new Error('no charge');
    answer.charges[0]!.terms[0]![1] = '17';
    const { collected } = await combineSectors(plan, mergeRecords(partsIn(plan), records), () => {});
    expect(collected.failed).toEqual([0]);
    expect(collected.outcomes.get(0)).toMatchObject({ reason: expect.stringMatching(/not conserved/) });
  });
});
