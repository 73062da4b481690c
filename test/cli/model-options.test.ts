import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, test } from 'vitest';
import { familyFromOptions, modelFromOptions } from '../../src/cli/model-options.ts';
import { InputError } from '../../src/errors.ts';

const folder = mkdtempSync(join(tmpdir(), 'holdfast-'));
afterAll(() => rmSync(folder, { recursive: true }));
const file = (name: string, content: string | Uint8Array): string => {
  writeFileSync(join(folder, name), content);
  return join(folder, name);
};
type Values = Parameters<typeof modelFromOptions>[0]['values'];
const read = async (positionals: string[], values: Values = {}): Promise<string> => {
  const { density, chain } = await modelFromOptions({ positionals, values });
  return `${chain.cell}: ${density}`;
};

describe('a model on the command line', () => {
  test('a formula, with values and a cell', async () => {
    expect(await read(['XX + g Z'], { set: ['g=1/2'], cell: '2' })).toBe('2: XX + 1/2 Z');
    expect(await read(['a XX + b Z'], { set: ['a = -3', 'b= 0.25 '] })).toBe('1: -3 XX + 1/4 Z');
  });

  test('a file; --set replaces its values', async () => {
    const model = file('model.json', '{"cell": 2, "formula": "J XX + g Z", "parameters": {"J": 2, "g": 3}}');
    expect(await read([], { model })).toBe('2: 2 XX + 3 Z');
    expect(await read([], { model, set: ['g=5'], cell: '2' })).toBe('2: 2 XX + 5 Z');
  });

  test('standard input, as a formula or as JSON', () => {
    const script = `import { modelFromOptions } from ${JSON.stringify(new URL('../../src/cli/model-options.ts', import.meta.url).href)};
      console.log(String((await modelFromOptions({ positionals: ['-'], values: {} })).density));`;
    const path = file('stdin.mts', script);
    const run = (input: string) =>
      execFileSync(process.execPath, ['--import', 'tsx', path], { input, encoding: 'utf8' }).trim();
    expect(run('XX +\n 3 Z\n')).toBe('XX + 3 Z');
    expect(run(' {"terms": [{"word": "ZZ", "coefficient": "1/2"}]}\n')).toBe('1/2 ZZ');
  });

  test('a formula may begin with a minus sign, before or behind the options', () => {
    const main = new URL('../../src/cli/main.ts', import.meta.url).pathname;
    const run = (...args: string[]) =>
      execFileSync(process.execPath, ['--import', 'tsx', main, 'search', ...args], { encoding: 'utf8' });
    const answer = run('XX - Z', '--range', '2', '--json').replace(/"milliseconds".*/, '');
    for (const args of [
      ['-h Z + XX', '--set', 'h=1', '--range', '2', '--json'],
      ['--range=2', '--json', '-Z+XX'],
    ])
      expect(run(...args).replace(/"milliseconds".*/, '')).toBe(answer);
  });

  test('a family keeps what has no value', async () => {
    const family = await familyFromOptions({ positionals: ['J XX + g Z'], values: { set: ['J=2'] } });
    expect(family.parameters).toEqual(['g']);
  });
});

describe('what is refused', () => {
  const cases: [string, string[], Values, RegExp][] = [
    ['nothing', [], {}, /neither/],
    ['two formulas', ['XX', 'YY'], {}, /one formula/],
    ['a formula and a file', ['XX'], { model: 'a.json' }, /both/],
    ['a missing file', [], { model: join(folder, 'none.json') }, /readable file/],
    ['a folder', [], { model: folder }, /readable file/],
    ['a setting without a value', ['g XX'], { set: ['g'] }, /name=value/],
    ['a setting without a name', ['g XX'], { set: ['=1'] }, /name=value/],
    ['a setting twice', ['g XX'], { set: ['g=1', 'g=2'] }, /twice/],
    ['a setting nobody uses', ['XX'], { set: ['g=1'] }, /does not use/],
    ['a value that is not exact', ['g XX'], { set: ['g=1e3'] }, /exact/],
    ['no value', ['g XX'], { set: ['g='] }, /parameter g/],
    ['a cell that is no number', ['XX'], { cell: 'two' }, /--cell/],
    ['a cell of zero', ['XX'], { cell: '0' }, /cell/],
    [
      'another cell than the file has',
      [],
      { model: file('two.json', '{"cell": 2, "formula": "XX"}'), cell: '1' },
      /--cell/,
    ],
    ['a file that is not JSON', [], { model: file('bad.json', 'XX + YY') }, /JSON/],
    [
      'a file that is not UTF-8',
      [],
      { model: file('bytes.json', new Uint8Array([0x7b, 0xff, 0x7d])) },
      /UTF-8/,
    ],
    ['an endless file', [], { model: '/dev/zero' }, /at most/],
  ];
  test.each(cases)('%s', async (_, positionals, values, message) => {
    const model = modelFromOptions({ positionals, values });
    await expect(model).rejects.toThrow(InputError);
    await expect(model).rejects.toThrow(message);
  });
});
