import { describe, expect, it } from 'vitest';
import { checkNow } from '../../src/check/check.ts';
import { faultOfCertificate } from '../../src/cli/scan/certificate-of-point.ts';
import { LimitError } from '../../src/errors.ts';
import { parseModel } from '../../src/model/formula.ts';
import { pointsIn } from '../../src/scan/points.ts';
import { readRecords, recordLine } from '../../src/scan/record.ts';
import { estimatePlan, runPoint } from '../../src/scan/run.ts';
import { searchNow } from '../../src/search/search.ts';
import { plan } from '../support/plans.ts';

describe('a point', () => {
  it('of a search has what the search finds, and its certificate', async () => {
    const own = plan({});
    const points = pointsIn(own);
    for (let point = 0; point < points.count; point++) {
      const [Jx, g] = points.at(point);
      const result = searchNow(
        parseModel('Jx XX + Jy YY + g Z', { parameters: { Jx: Jx!, Jy: '1/2', g: g! } }),
        { range: 4 },
      );
      const { outcome, certificate } = await runPoint(own, points.at(point));
      if (outcome.status !== 'done' || outcome.answer.kind !== 'search') throw new Error('not done');
      expect(outcome.answer.dimensionByRange).toEqual(result.dimensionByRange);
      expect(outcome.answer.minimumCells).toBe(result.minimumCells);
      expect(outcome.answer.charges).toHaveLength(result.charges.length);
      outcome.answer.charges!.forEach(({ terms }, i) => {
        const formula = terms
          .map(([word, c]) => `+ ${c.replace('-', '- ')} ${word}`)
          .join(' ')
          .replaceAll('+ -', '-');
        expect(parseModel(formula).density.equals(result.charges[i]!.density)).toBe(true);
      });
      const verdict = checkNow(certificate!);
      expect(verdict.status === 'accepted' && `sha256:${verdict.id}`).toBe(
        outcome.certificate !== undefined && 'id' in outcome.certificate && outcome.certificate.id,
      );
      // What is written is read back as it was.
      const header = `{"plan":"sha256:${'0'.repeat(64)}","shard":"1/1","tool":"x"}\n`;
      const record = { point, at: [...points.at(point)], outcome, milliseconds: 3 };
      expect(readRecords(header + recordLine(record)).records).toEqual([record]);
    }
  });

  it('tells progress, and stops when the callback throws', async () => {
    const shares: number[] = [];
    await runPoint(plan({ task: { kind: 'search', range: 7 } }), ['1', '1'], (done) => shares.push(done));
    expect(shares.length).toBeGreaterThan(0);
    expect(shares.every((share) => share >= 0 && share <= 1)).toBe(true);
    const stop = new Error('stop');
    const stopped = runPoint(plan({ task: { kind: 'search', range: 7 } }), ['1', '1'], () => {
      throw stop;
    });
    await expect(stopped).rejects.toBe(stop);
  });

  it('without a Hamiltonian, or where a value divides by zero, is refused in one line', async () => {
    const own = plan({
      model: { formula: '1/Jx XX + g Z' },
      parameters: [
        { name: 'Jx', values: [0, 1] },
        { name: 'g', values: [0] },
      ],
    });
    for (const values of [['0', '0']]) {
      const { outcome } = await runPoint(own, values);
      expect(outcome).toMatchObject({ status: 'refused', reason: expect.stringMatching(/^[^\n]+$/) });
    }
  });

  it('keeps its answer where no certificate can be had, and says why', async () => {
    // An Ising bond along no axis: a verdict by half steps, whose certificates are for bonds along one.
    const own = plan({
      model: { formula: 'Jx (XX + 2 XY + 2 YX + 4 YY) + g Z' },
      task: { kind: 'decide', certificates: true },
    });
    const { outcome, certificate } = await runPoint(own, ['1', '1']);
    expect(certificate).toBeNull();
    expect(outcome).toMatchObject({
      status: 'done',
      answer: { kind: 'decide', verdict: 'complete', perRange: 2 },
      certificate: { none: expect.stringContaining('along X, Y or Z') },
    });
  });

  it('of a decision carries the certificate of its kind', async () => {
    const own = plan({ model: { formula: 'Jx ZZ + g X' }, task: { kind: 'decide', certificates: true } });
    const { outcome, certificate } = await runPoint(own, ['1', '1']);
    expect(outcome).toMatchObject({ answer: { verdict: 'complete', perRange: 2 } });
    expect(checkNow(certificate!)).toMatchObject({ status: 'accepted', kind: 'half-steps' });
    expect(faultOfCertificate(own, ['1', '1'], outcome, certificate!)).toBeNull();
  });
});

describe('the estimate of a plan', () => {
  const need = (task: object) => estimatePlan(plan({ task }), pointsIn(plan({ task })));

  it('grows with the range by the candidates', () => {
    const [a, b] = [12, 13].map((range) => need({ kind: 'search', range }));
    expect(b!.bytes / a!.bytes).toBeGreaterThan(2);
    expect(b!.seconds / a!.seconds).toBeGreaterThan(3.5);
  });

  it('refuses what cannot be certified, before anything is done', () => {
    expect(() => need({ kind: 'search', range: 14, certificates: true })).toThrow(LimitError);
    expect(() => need({ kind: 'residual', candidate: 'XX', range: 10 })).toThrow(/correction: range 10 has/);
    expect(need({ kind: 'search', range: 14 }).bytes).toBeGreaterThan(1e9);
  });
});
