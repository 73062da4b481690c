import { describe, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { parseModel } from '../../src/model/formula.ts';
import { MAX_NAME_LENGTH, MAX_PARAMETERS, MAX_TERMS } from '../../src/model/limits.ts';
import {
  familyFromDocument,
  jsonFromModel,
  modelFromDocument,
  modelFromJson,
  modelJsonSchema,
  readModelDocument,
} from '../../src/model/schema.ts';
import { PARAMETER_NAME } from '../../src/model/tokens.ts';
import { property } from '../support/random.ts';

describe('the JSON model', () => {
  test('a formula with parameters', () => {
    const h = modelFromJson(
      '{"cell": 2, "formula": "J XX + Z", "parameters": {"J": "1/3"}, "name": "a", "note": "b\\nc"}',
    );
    expect(h).toEqual(parseModel('1/3 XX + Z', { cell: 2 }));
  });

  test('explicit terms; equal words and translates add up', () => {
    const terms = [
      { word: 'XX', coefficient: 1 },
      { word: 'IXX', coefficient: '-0.5' },
      { word: 'Z', coefficient: '2/3' },
    ];
    expect(modelFromJson({ terms }).density.toString()).toBe('1/2 XX + 2/3 Z');
  });

  property('written and read again', 60, (random) => {
    const h = random.hamiltonian({ cell: random.integer(1, 3), terms: 5 });
    const about = { name: 'invented', note: 'for a test', source: 'none' };
    const document = jsonFromModel(h, about);
    expect(modelFromJson(document)).toEqual(h);
    expect(modelFromJson(JSON.stringify(document))).toEqual(h);
    expect(jsonFromModel(modelFromJson(document), about)).toEqual(document);
  });

  test('values from outside replace those of the document, or add to them', () => {
    const document = readModelDocument({ formula: 'J XX + g Z', parameters: { J: 1 } });
    expect(modelFromDocument(document, new Map([['g', '1/2']])).density.toString()).toBe('XX + 1/2 Z');
    expect(
      modelFromDocument(
        document,
        new Map<string, string | number>([
          ['g', 1],
          ['J', '5'],
        ]),
      ).density.toString(),
    ).toBe('5 XX + Z');
    expect(familyFromDocument(document).parameters).toEqual(['g']);
    const terms = readModelDocument({ terms: [{ word: 'X', coefficient: 1 }] });
    expect(() => modelFromDocument(terms, new Map([['g', 1]]))).toThrow(InputError);
    expect(() => familyFromDocument(terms)).toThrow(InputError);
  });

  test('the exported schema is plain JSON and names every bound', () => {
    const schema = modelJsonSchema();
    expect(JSON.parse(JSON.stringify(schema))).toEqual(schema);
    expect(schema['$schema']).toBe('https://json-schema.org/draft/2020-12/schema');
    const [formula, terms] = schema['anyOf'] as {
      additionalProperties: boolean;
      required: string[];
      properties: Record<string, Record<string, unknown>>;
    }[];
    expect([formula!.additionalProperties, terms!.additionalProperties]).toEqual([false, false]);
    expect([formula!.required, terms!.required]).toEqual([['formula'], ['terms']]);
    expect(terms!.properties['terms']!['maxItems']).toBe(MAX_TERMS);
    expect(formula!.properties['parameters']).toMatchObject({
      maxProperties: MAX_PARAMETERS,
      propertyNames: { maxLength: MAX_NAME_LENGTH, pattern: PARAMETER_NAME.source },
    });
    expect(formula!.properties['cell']).toMatchObject({ minimum: 1, maximum: 12 });
  });
});

describe('what is refused, and where', () => {
  const term = (word: unknown, coefficient: unknown) => ({
    terms: [
      { word: 'XX', coefficient: 1 },
      { word, coefficient },
    ],
  });
  test.each<[string, unknown, RegExp]>([
    ['not JSON', '{', /^model: expected JSON/],
    ['an empty text', '', /^model: expected JSON/],
    ['null', 'null', /^model: .*got null/],
    ['an array', [], /^model: .*array/],
    ['a number', 5, /^model: .*got 5/],
    ['neither form', {}, /neither/],
    ['both forms', { formula: 'X', terms: [] }, /both/],
    ['inherited keys', Object.create({ formula: 'XX' }), /neither/],
    ['an unknown key', { formula: 'XX', extra: 1 }, /no other keys, got "extra"/],
    [
      'a key named __proto__',
      '{"formula": "XX", "__proto__": {"cell": 2}}',
      /no other keys, got "__proto__"/,
    ],
    [
      'an unknown key of a term',
      { terms: [{ word: 'X', coefficient: 1, x: 1 }] },
      /model\.terms\[0\]: expected no other keys/,
    ],
    ['no terms', { terms: [] }, /^model\.terms/],
    [
      'too many terms',
      { terms: new Array(MAX_TERMS + 1).fill({ word: 'X', coefficient: 1 }) },
      /^model\.terms/,
    ],
    ['a foreign letter', term('XQ', 1), /^model\.terms\[1\]\.word: .*got "XQ"/],
    ['an empty word', term('', 1), /^model\.terms\[1\]\.word: .*empty/],
    ['an over-long word', term('X'.repeat(257), 1), /^model\.terms\[1\]\.word/],
    ['a float', term('X', 0.5), /^model\.terms\[1\]\.coefficient: .*exact.*got 0\.5/],
    ['NaN', term('X', Number.NaN), /^model\.terms\[1\]\.coefficient/],
    ['an unsafe integer', term('X', 2 ** 60), /^model\.terms\[1\]\.coefficient/],
    ['a zero denominator', term('X', '1/0'), /^model\.terms\[1\]\.coefficient/],
    ['an exponent', term('X', '1e5'), /^model\.terms\[1\]\.coefficient/],
    ['null as a coefficient', term('X', null), /^model\.terms\[1\]\.coefficient/],
    ['no coefficient', { terms: [{ word: 'X' }] }, /^model\.terms\[0\]\.coefficient: .*nothing/],
    ['an over-long number', term('X', '9'.repeat(201)), /^model\.terms\[1\]\.coefficient/],
    [
      'terms that cancel',
      {
        terms: [
          { word: 'X', coefficient: 1 },
          { word: 'IX', coefficient: -1 },
        ],
      },
      /zero/,
    ],
    ['only a constant', { terms: [{ word: 'II', coefficient: 1 }] }, /zero/],
    ['a cell of zero', { formula: 'XX', cell: 0 }, /^model\.cell/],
    ['a cell in text', { formula: 'XX', cell: '2' }, /^model\.cell/],
    ['a half cell', { formula: 'XX', cell: 1.5 }, /^model\.cell/],
    ['a formula that is no text', { formula: 3 }, /^model\.formula/],
    ['a float parameter', { formula: 'J XX', parameters: { J: 0.5 } }, /^model\.parameters\.J: .*exact/],
    [
      'a parameter named as a word',
      { formula: 'J XX', parameters: { X: 1 } },
      /^model\.parameters\.X: .*name/,
    ],
    ['a parameter named __proto__', '{"formula": "XX", "parameters": {"__proto__": 1}}', /__proto__/],
    ['parameters in an array', { formula: 'XX', parameters: [] }, /^model\.parameters/],
    ['an unbound parameter', { formula: 'XX + g Z' }, /no value for g at position 6/],
    [
      'too many parameters',
      { formula: 'XX', parameters: Object.fromEntries(Array.from({ length: 65 }, (_, i) => [`a${i}`, 1])) },
      /^model\.parameters: expected at most 64/,
    ],
    ['a parameter that is not used', { formula: 'XX', parameters: { g: 1 } }, /does not use/],
    ['control characters in the name', { formula: 'XX', name: 'a\u001b[31m' }, /^model\.name/],
    ['an over-long note', { formula: 'XX', note: 'a'.repeat(10_001) }, /^model\.note/],
  ])('%s', (_, input, message) => {
    expect(() => modelFromJson(input)).toThrow(InputError);
    expect(() => modelFromJson(input)).toThrow(message);
  });

  test('nothing outside is changed by hostile keys', () => {
    for (const text of [
      '{"__proto__":{"polluted":1},"formula":"XX"}',
      '{"formula":"XX","parameters":{"constructor":{"prototype":{"polluted":1}}}}',
    ])
      expect(() => modelFromJson(text)).toThrow(InputError);
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined();
  });

  test('denominators that would multiply up are refused', () => {
    const terms = Array.from({ length: 2_000 }, (_, i) => ({
      word: i
        .toString(4)
        .padStart(6, '0')
        .replace(/./g, (d) => 'IXYZ'[Number(d)]!),
      coefficient: `1/${10n ** 60n + BigInt(i) * 2n + 1n}`,
    }));
    expect(() => modelFromJson({ terms })).toThrow(/common denominator/);
  });
});
