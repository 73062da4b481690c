/** Code in README.md, DEVELOPERS.md and docs/ runs, and prints what it is said to print. The rules: `support/documents.ts`. */
import { beforeAll, describe, expect, it } from 'vitest';
import {
  agrees,
  type Block,
  blocksOf,
  documents,
  expectedOutput,
  type Ran,
  runCommands,
  runModules,
} from './support/documents.ts';

const byDocument = documents().map((document) => ({ document, blocks: blocksOf(document) }));
const all = byDocument.flatMap(({ blocks }) => blocks);
const modules = all.filter(({ language, notRun }) => language === 'ts' && notRun === undefined);
const shells = all.filter(({ language, notRun }) => language === 'sh' && notRun === undefined);

const where = ({ document, line }: Block) => `${document}:${line}`;

let types = '';
const results = new Map<string, Ran>();

beforeAll(async () => {
  const work: Promise<void>[] = [
    runModules(modules).then((found) => {
      types = found.types;
      for (const ran of found.ran) results.set(where(ran.block), ran);
    }),
  ];
  // Two at a time: documents are independent of each other, the blocks of one are not.
  const queue = byDocument.filter(({ blocks }) => blocks.some((block) => shells.includes(block)));
  for (let lane = 0; lane < 2; lane++)
    work.push(
      (async () => {
        for (let next = queue.shift(); next !== undefined; next = queue.shift())
          for (const ran of await runCommands(next.blocks)) results.set(where(ran.block), ran);
      })(),
    );
  await Promise.all(work);
}, 240_000);

describe('the reader of documents', () => {
  const text = [
    '<!-- file: a.json -->',
    '```json',
    '{}',
    '```',
    '',
    '```sh',
    'npm run --silent holdfast -- x',
    '```',
    '',
    '```text',
    'out',
    '```',
    '<!-- not run: needs a printer -->',
    '```sh',
    'lp page',
    '```',
    'prose',
    '```text',
    'alone',
    '```',
  ].join('\n');

  it('finds blocks, their marks and their output', () => {
    const blocks = blocksOf('example.md', text);
    expect(blocks.map((b) => b.language)).toEqual(['json', 'sh', 'sh', 'text']);
    expect(blocks[0]).toMatchObject({ file: 'a.json', code: '{}', line: 2 });
    expect(blocks[1]).toMatchObject({ output: 'out', notRun: undefined });
    expect(blocks[2]).toMatchObject({ notRun: 'needs a printer', output: undefined });
  });

  it('compares output', () => {
    expect(agrees('a b\nc\n', 'a b\nc')).toBe(true);
    expect(agrees('took 3 ms\n', 'took … ms')).toBe(true);
    expect(agrees('1\n2\n3\n', '1\n…\n3')).toBe(true);
    expect(agrees('1\n2\n', '1')).toBe(false);
    expect(agrees('1.5', '1x5')).toBe(false);
    expect(expectedOutput('f(); // → 1\ng();\n// → 2')).toBe('1\n2');
    expect(expectedOutput('f();')).toBeUndefined();
  });

  it('reports a command that fails, and one that it does not know', async () => {
    const [failing, unknown] = await runCommands(
      blocksOf('x.md', '```sh\nnpm run --silent holdfast -- no-such-command\n```\n```sh\nls\n```\n'),
    );
    expect(failing!.ok).toBe(false);
    expect(failing!.output).toContain('exit status 2');
    expect(unknown!.ok).toBe(false);
  });
});

describe('the runner of modules', () => {
  it('reports wrong types and errors, and keeps blocks apart', async () => {
    const text = [
      "const x: number = 'no'; console.log(x);",
      "throw new Error('on purpose');",
      "import { Chain } from 'holdfast'; const x = new Chain(2); console.log(x.cell); // → 2",
    ].map((code) => `\`\`\`ts\n${code}\n\`\`\`\n`);
    const { ran, types } = await runModules(blocksOf('x.md', text.join('\n')));
    expect(ran.map(({ ok }) => ok)).toEqual([true, false, true]);
    expect(ran[1]!.output).toContain('on purpose');
    expect(ran[2]!.output).toBe('2');
    expect(types).toContain('TS2322');
  });
});

describe('documents', () => {
  it('the README shows library and command', () => {
    const own = all.filter(({ document, notRun }) => document === 'README.md' && notRun === undefined);
    expect(own.some(({ language }) => language === 'ts')).toBe(true);
    expect(own.some(({ language, output }) => language === 'sh' && output !== undefined)).toBe(true);
  });

  it('their modules have no type errors', () => {
    expect(types).toBe('');
  });

  it.each(modules.map((block) => [where(block), block] as const))('%s runs as it says', (name, block) => {
    const { ok, output } = results.get(name)!;
    expect(ok, output).toBe(true);
    const expected = expectedOutput(block.code);
    if (expected !== undefined && !agrees(output, expected)) expect(output).toBe(expected);
  });

  it.each(shells.map((block) => [where(block), block] as const))('%s prints what it says', (name, block) => {
    const { ok, output } = results.get(name)!;
    expect(ok, output).toBe(true);
    if (block.output !== undefined && !agrees(output, block.output)) expect(output).toBe(block.output);
  });

  it.each(
    all
      .filter(({ language, notRun }) => language === 'json' && notRun === undefined)
      .map((block) => [where(block), block] as const),
  )('%s is JSON', (_, block) => {
    expect(() => JSON.parse(block.code)).not.toThrow();
  });
});
