/** A small plan of four points, fields replaced at will. */
import { type PointsPlan, readPlan } from '../../src/scan/plan.ts';

export const plan = (fields: object): PointsPlan =>
  readPlan({
    plan: 'points',
    model: { formula: 'Jx XX + Jy YY + g Z', parameters: { Jy: '0.5' } },
    parameters: [
      { name: 'Jx', values: [1, '1/2'] },
      { name: 'g', values: ['0', '-1/3'] },
    ],
    points: 'grid',
    task: { kind: 'search', range: 4, charges: true, certificates: true },
    ...fields,
  }).plan;
