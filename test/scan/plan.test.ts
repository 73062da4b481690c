import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { MAX_POINTS, planHash, planJsonSchema, readPlan, UNCONFIRMED_POINTS } from '../../src/scan/plan.ts';

const PLAN = {
  plan: 'points',
  model: { formula: 'J XX + YY + g X + h Z', parameters: { J: '2.50' } },
  parameters: [
    { name: 'g', from: 0, to: '1.0', steps: 4 },
    { name: 'h', values: ['0', '0.5', 1] },
  ],
  points: 'grid',
  task: { kind: 'search', range: 4 },
};

/** The plan with some fields replaced. */
const like = (fields: object): object => ({ ...PLAN, ...fields });

describe('the canonical plan', () => {
  it('has defaults filled in, exact numbers in lowest terms, and the number of points', () => {
    const { plan, text } = readPlan(PLAN);
    expect(plan).toEqual({
      plan: 'points',
      name: null,
      model: { cell: 1, formula: 'J XX + YY + g X + h Z', parameters: { J: '5/2' } },
      parameters: [
        { name: 'g', from: '0', to: '1', steps: 4 },
        { name: 'h', values: ['0', '1/2', '1'] },
      ],
      points: 'grid',
      task: { kind: 'search', range: 4, charges: false, certificates: false, sectors: 1 },
      confirm: 15,
    });
    expect(readPlan(text).text).toBe(text);
  });

  it('is the same for every way to write the same plan, and another for another plan', async () => {
    const hash = async (plan: object) => planHash(readPlan(plan));
    const own = await hash(PLAN);
    expect(own).toMatch(/^sha256:[0-9a-f]{64}$/);
    const same = {
      task: { range: 4, kind: 'search', certificates: false },
      points: 'grid',
      note: 'of no bearing',
      confirm: 15,
      parameters: [
        { steps: 4, to: '3/3', from: '0/7', name: 'g' },
        { values: [0, '1/2', '1'], name: 'h' },
      ],
      model: { parameters: { J: '5/2' }, cell: 1, formula: 'J XX + YY + g X + h Z' },
      plan: 'points',
    };
    expect(await hash(same)).toBe(own);
    expect(await planHash(readPlan(JSON.stringify(same)))).toBe(own);
    for (const other of [
      like({ task: { kind: 'search', range: 5 } }),
      like({ name: 'another title' }),
      like({ points: { sample: 3, seed: 1 } }),
    ])
      expect(await hash(other)).not.toBe(own);
  });
});

describe('bad plans', () => {
  const axis = PLAN.parameters[1]!;
  const faults: readonly (readonly [string, unknown, RegExp])[] = [
    ['no JSON', '{', /plan: expected JSON/],
    ['a list', [], /plan: expected a JSON object/],
    ['no kind', like({ plan: undefined }), /plan\.plan: expected one of "points"/],
    ['an unknown key', like({ taks: 1 }), /plan: expected no other keys, got "taks"/],
    [
      'an unknown key of a task',
      like({ task: { kind: 'search', range: 4, deep: true } }),
      /plan\.task: .*no other keys, got "deep"/,
    ],
    ['an unknown task', like({ task: { kind: 'solve' } }), /plan\.task/],
    ['no range', like({ task: { kind: 'search' } }), /plan\.task\.range/],
    [
      'a float',
      like({ parameters: [{ name: 'g', values: [0.5] }, axis] }),
      /plan\.parameters\[0\]\.values\[0\]: expected an exact number/,
    ],
    [
      'a name twice',
      like({ parameters: [axis, axis] }),
      /plan\.parameters: expected every name once, got "h" twice/,
    ],
    [
      'a name with a value in the model',
      like({ parameters: [{ name: 'J', values: [1] }, ...PLAN.parameters] }),
      /names without a value in the model, got "J"/,
    ],
    [
      'a parameter that the formula does not use',
      like({ parameters: [...PLAN.parameters, { name: 'k', values: [1] }] }),
      /parameters of the formula, got "k"/,
    ],
    [
      'a parameter without values',
      like({ parameters: [axis] }),
      /every parameter of the formula, got no "g"/,
    ],
    [
      'a word as a name',
      like({ parameters: [{ name: 'XX', values: [1] }] }),
      /plan\.parameters\[0\]\.name: expected the name of a parameter/,
    ],
    [
      'a value twice',
      like({ parameters: [PLAN.parameters[0], { name: 'h', values: ['0.5', '1/2'] }] }),
      /plan\.parameters\[1\]\.values: expected every value once, got 1\/2 twice/,
    ],
    [
      'an interval of length zero',
      like({ parameters: [{ name: 'g', from: 1, to: '1.0', steps: 2 }, axis] }),
      /two different ends/,
    ],
    [
      'a name alone on a grid',
      like({ parameters: [{ name: 'g' }, axis] }),
      /plan\.parameters\[0\]: expected "values", or/,
    ],
    ['values beside a list', like({ points: { list: [['0', '1']] } }), /a name alone/],
    [
      'a point of the wrong length',
      like({ parameters: [{ name: 'g' }, { name: 'h' }], points: { list: [['0']] } }),
      /plan\.points\.list\[0\]: expected 2 values/,
    ],
    [
      'a point twice',
      like({
        parameters: [{ name: 'g' }, { name: 'h' }],
        points: {
          list: [
            ['0.5', 1],
            ['1/2', '1'],
          ],
        },
      }),
      /every point once, got 1\/2, 1 twice/,
    ],
    [
      'a sample larger than the grid',
      like({ points: { sample: 16, seed: 0 } }),
      /plan\.points\.sample: expected at most the 15 points/,
    ],
    ['a formula that is none', like({ model: { formula: 'XX + $' } }), /plan\.model\.formula: .*\n.*\n.*\^/],
    [
      'a fault of the model',
      like({ model: { formula: 'XX', cell: 0 } }),
      /plan\.model\.cell: expected .*, got 0/,
    ],
    [
      'explicit terms',
      like({ model: { terms: [{ word: 'XX', coefficient: 1 }] } }),
      /plan\.model: expected a formula/,
    ],
    [
      'a parameter of the candidate without values',
      like({ task: { kind: 'residual', candidate: 'k XX' } }),
      /got no "k"/,
    ],
    [
      'a candidate that is none',
      like({ task: { kind: 'residual', candidate: '(' } }),
      /plan\.task\.candidate/,
    ],
    [
      'a wrong confirmation',
      like({ confirm: 14 }),
      /plan\.confirm: expected the number of points, 15, got 14/,
    ],
  ];
  it.each(faults)('%s', (_, plan, message) => {
    expect(() => readPlan(plan)).toThrow(InputError);
    expect(() => readPlan(plan)).toThrow(message);
  });

  it('a key twice, wherever it stands; in a text it is no key', () => {
    const text = JSON.stringify(PLAN);
    for (const bad of [
      text.replace('"plan"', '"plan":"points","plan"'),
      text.replace('"J"', '"J":"1","\\u004a"'),
      text.replace('"name":"h"', '"name":"h","name":"h"'),
    ])
      expect(() => readPlan(bad)).toThrow(/plan: expected every key once, got ".*" twice/);
    const noted = JSON.stringify(like({ note: '{"a":1,"a":2} and "name": \\' }));
    expect(readPlan(noted).plan.confirm).toBe(15);
  });

  it('many points are confirmed with their number, too many are not', () => {
    const grid = (steps: number, confirm?: number) =>
      readPlan(
        like({
          parameters: [
            { name: 'g', from: 0, to: 1, steps },
            { name: 'h', from: 0, to: 1, steps: 99 },
          ],
          ...(confirm === undefined ? {} : { confirm }),
        }),
      ).plan.confirm;
    expect(grid(99)).toBe(UNCONFIRMED_POINTS);
    expect(() => grid(100)).toThrow(/plan\.points: expected at most 10,000 points, or "confirm": 10100/);
    expect(grid(100, 10_100)).toBe(10_100);
    expect(() => grid(100, MAX_POINTS)).toThrow(/plan\.confirm/);
    expect(() => grid(90_000)).toThrow(/at most 1,000,000 points, got 9,000,100/);
  });
});

it('the JSON Schema names every field of a plan', () => {
  const { properties, additionalProperties } = planJsonSchema() as {
    properties: object;
    additionalProperties: boolean;
  };
  expect(Object.keys(properties)).toEqual(expect.arrayContaining(Object.keys(PLAN)));
  expect(additionalProperties).toBe(false);
});
