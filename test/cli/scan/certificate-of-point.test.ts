import { describe, expect, it } from 'vitest';
import { faultOfCertificate } from '../../../src/cli/scan/certificate-of-point.ts';
import { pointsIn } from '../../../src/scan/points.ts';
import { runPoint } from '../../../src/scan/run.ts';
import { plan } from '../../support/plans.ts';

describe('a certificate belongs to one point and one outcome', () => {
  it('and is refused for every other', async () => {
    const own = plan({});
    const points = pointsIn(own);
    const all = await Promise.all([0, 1, 2, 3].map((point) => runPoint(own, points.at(point))));
    const [one, two] = [all[0]!, all[1]!];
    const fault = (point: number, outcome = all[point]!.outcome, text = all[point]!.certificate!) =>
      faultOfCertificate(own, points.at(point), outcome, text);
    for (const point of [0, 1, 2, 3]) expect(fault(point)).toBeNull();
    expect(fault(0, one.outcome, two.certificate!)).toMatch(/not the text/);
    expect(fault(0, two.outcome, two.certificate!)).toMatch(/another Hamiltonian/);
    expect(fault(0, one.outcome, `${one.certificate} `)).toMatch(/not the text/);
    expect(fault(0, { status: 'failed', reason: '' })).toMatch(/none was recorded/);
    if (one.outcome.status !== 'done' || one.outcome.answer.kind !== 'search') throw new Error('not done');
    const { answer } = one.outcome;
    const claim = (fields: Partial<typeof answer>) =>
      fault(0, { ...one.outcome, answer: { ...answer, ...fields } } as typeof one.outcome);
    expect(claim({ dimensionByRange: [0, 1, 1, 1] })).toMatch(/other numbers/);
    expect(claim({ charges: answer.charges!.slice(1) })).toMatch(/other charges/);
  });

  it('for every range, too', async () => {
    const own = plan({
      model: { formula: 'Jx XX + Jy YY + ZZ + g Z + X', parameters: { Jy: '2' } },
      task: { kind: 'decide', certificates: true },
    });
    const { outcome, certificate } = await runPoint(own, ['1', '1']);
    expect(faultOfCertificate(own, ['1', '1'], outcome, certificate!)).toBeNull();
    expect(faultOfCertificate(own, ['3', '1'], outcome, certificate!)).toMatch(/another Hamiltonian/);
    if (outcome.status !== 'done' || outcome.answer.kind !== 'decide') throw new Error('not done');
    const wrong = {
      ...outcome,
      answer: { ...outcome.answer, bound: { ...outcome.answer.bound!, generic: 5 } },
    };
    expect(faultOfCertificate(own, ['1', '1'], wrong, certificate!)).toMatch(/another bound/);
  });
});
