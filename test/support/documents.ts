/**
 * Reads and runs the code in Markdown documents, so that prose cannot drift from the program.
 *
 * - `ts` blocks run as modules of their own, `holdfast` being the library. Where a block has comments `// → text`, these are its
 *   output, line by line.
 * - `sh` blocks run line by line, in order, in one scratch folder a document that shows the repository's `docs/`. `# exit status N` at the
 *   end of a line expects that status instead of 0. A `text` block right behind is their standard output together.
 * - `json` blocks have to parse. `<!-- file: NAME -->` before a block of any kind saves it in the scratch folder.
 * - `<!-- not run: REASON -->` before a block leaves it alone.
 *
 * In expected output `…` stands for anything on a line, and a line of `…` alone for any number of lines.
 */
import { execFile } from 'node:child_process';
import {
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

export const ROOT = new URL('../..', import.meta.url).pathname;

export interface Block {
  readonly document: string;
  /** Line of the opening fence, from 1. */
  readonly line: number;
  readonly language: string;
  readonly code: string;
  /** From the comment before it. */
  readonly file: string | undefined;
  readonly notRun: string | undefined;
  /** The `text` block right behind. */
  readonly output: string | undefined;
}

export function documents(): string[] {
  const docs = readdirSync(join(ROOT, 'docs')).filter((name) => name.endsWith('.md'));
  return ['README.md', 'DEVELOPERS.md', ...docs.sort().map((name) => `docs/${name}`)];
}

export function blocksOf(document: string, text = readFileSync(join(ROOT, document), 'utf8')): Block[] {
  const lines = text.split('\n');
  const blocks: Block[] = [];
  let mark = '';
  for (let i = 0; i < lines.length; i++) {
    const fence = /^(`{3,})(\w*)\s*$/.exec(lines[i]!);
    if (fence === null) {
      if (lines[i]!.trim() !== '') mark = /^<!--.*-->$/.test(lines[i]!.trim()) ? lines[i]!.trim() : '';
      continue;
    }
    const end = lines.indexOf(fence[1]!, i + 1);
    if (end < 0) throw new Error(`${document}:${i + 1}: a fence without an end`);
    const code = lines.slice(i + 1, end).join('\n');
    const previous = blocks.at(-1);
    const nothingBetween =
      previous !== undefined && lines.slice(endOf(previous) + 1, i).every((line) => line.trim() === '');
    if (fence[2] === 'text' && previous?.language === 'sh' && nothingBetween)
      blocks[blocks.length - 1] = { ...previous, output: code };
    else
      blocks.push({
        document,
        line: i + 1,
        language: fence[2]!,
        code,
        file: /^<!-- file: (\S+) -->$/.exec(mark)?.[1],
        notRun: /^<!-- not run: (.+) -->$/.exec(mark)?.[1],
        output: undefined,
      });
    mark = '';
    i = end;
  }
  return blocks;
}

/** Index of the closing fence. */
function endOf(block: Block): number {
  return block.line + block.code.split('\n').length;
}

/** What a `ts` block says it prints, or undefined where it says nothing. */
export function expectedOutput(code: string): string | undefined {
  const lines = [...code.matchAll(/\/\/ → (.*)$/gm)].map((match) => match[1]!);
  return lines.length === 0 ? undefined : lines.join('\n');
}

/** Does the output agree? Trailing white space does not count. */
export function agrees(actual: string, expected: string): boolean {
  const tidy = (text: string) => text.replace(/[ \t]+$/gm, '').replace(/\n+$/, '');
  const pattern = tidy(expected)
    .split('\n')
    .map((line) =>
      line.trim() === '…'
        ? '(?:.*\\n)*?'
        : `${line
            .split('…')
            .map((part) => part.replace(/[.*+?^${}()|[\]\\]/g, '\\$&'))
            .join('.*')}\\n`,
    )
    .join('');
  return new RegExp(`^${pattern}$`).test(`${tidy(actual)}\n`);
}

export interface Ran {
  readonly block: Block;
  /** Standard output, or the error in full. */
  readonly output: string;
  readonly ok: boolean;
}

const LOADER = pathToFileURL(createRequire(import.meta.url).resolve('tsx')).href;

function execute(
  program: string,
  args: readonly string[],
  options: { cwd: string; env?: NodeJS.ProcessEnv },
): Promise<{ status: number; stdout: string; stderr: string }> {
  return new Promise((resolve) => {
    const child = execFile(
      program,
      args,
      { ...options, maxBuffer: 2 ** 26, timeout: 120_000 },
      (error, stdout, stderr) => {
        const status = error === null ? 0 : typeof error.code === 'number' ? error.code : -1;
        resolve({ status, stdout, stderr });
      },
    );
    child.stdin?.end();
  });
}

/** Runs all `ts` blocks in one process, and checks their types in another. */
export async function runModules(blocks: readonly Block[]): Promise<{ ran: Ran[]; types: string }> {
  // Inside the repository, so that packages resolve as they do for its own files.
  mkdirSync(join(ROOT, '.cache'), { recursive: true });
  const folder = mkdtempSync(join(ROOT, '.cache', 'snippets-'));
  try {
    const base = `${JSON.stringify(join(ROOT, 'tsconfig.json'))}`;
    writeFileSync(
      join(folder, 'tsconfig.json'),
      `{ "extends": ${base}, "compilerOptions": { "paths": { "holdfast": [${JSON.stringify(join(ROOT, 'src/index.ts'))}] },
        "noUnusedLocals": false, "types": ["node"], "typeRoots": [${JSON.stringify(join(ROOT, 'node_modules/@types'))}] }, "include": ["*.ts"], "exclude": [] }`,
    );
    writeFileSync(join(folder, 'package.json'), '{ "type": "module" }');
    const names = blocks.map((block, i) => {
      const name = `${block.document.replace(/\W/g, '-')}-${block.line}-${i}.ts`;
      // An export makes it a module, whatever it imports.
      writeFileSync(join(folder, name), `${block.code}\nexport {};\n`);
      return name;
    });
    writeFileSync(
      join(folder, 'run.mjs'),
      `import { format } from 'node:util';
       const results = [];
       for (const name of ${JSON.stringify(names)}) {
         const lines = [];
         console.log = (...args) => void lines.push(format(...args));
         try {
           await import('./' + name);
           results.push({ ok: true, output: lines.join('\\n') });
         } catch (error) {
           results.push({ ok: false, output: String(error?.stack ?? error) });
         }
       }
       process.stdout.write(JSON.stringify(results));`,
    );
    const config = join(folder, 'tsconfig.json');
    const [run, types] = await Promise.all([
      execute(process.execPath, ['--import', LOADER, join(folder, 'run.mjs')], {
        cwd: ROOT,
        env: { ...process.env, TSX_TSCONFIG_PATH: config, NO_COLOR: '1' },
      }),
      execute(process.execPath, [join(ROOT, 'node_modules/typescript/bin/tsc'), '-p', config], { cwd: ROOT }),
    ]);
    if (run.status !== 0) throw new Error(`the snippets did not run: ${run.stderr}`);
    const results = JSON.parse(run.stdout) as { ok: boolean; output: string }[];
    return {
      ran: results.map((result, i) => ({ ...result, block: blocks[i]! })),
      types: types.status === 0 ? '' : types.stdout + types.stderr,
    };
  } finally {
    rmSync(folder, { recursive: true });
  }
}

/** Commands are run without npm's detour; these are all that a document may show and have run. */
const COMMANDS: readonly (readonly [RegExp, string])[] = [
  [/(?:npm run --silent holdfast --|npx holdfast)(?= )/g, 'holdfast'],
  [/npm (?:--silent start|start --silent)$/g, 'holdfast demo'],
  [/npm ci && npm start$/g, 'holdfast demo'],
];

/** Runs the `sh` blocks of one document in order. Saves the files that it shows. */
export async function runCommands(blocks: readonly Block[]): Promise<Ran[]> {
  const folder = mkdtempSync(join(tmpdir(), 'holdfast-document-'));
  const ran: Ran[] = [];
  try {
    symlinkSync(join(ROOT, 'docs'), join(folder, 'docs'));
    const main = join(ROOT, 'src/cli/main.ts');
    const prelude = `set -o pipefail; holdfast() { "${process.execPath}" --import "${LOADER}" "${main}" "$@"; }; `;
    for (const block of blocks) {
      if (block.file !== undefined) writeFileSync(join(folder, block.file), `${block.code}\n`);
      if (block.language !== 'sh' || block.notRun !== undefined) continue;
      let output = '';
      let ok = true;
      for (const line of block.code.replace(/\\\n\s*/g, ' ').split('\n')) {
        if (/^\s*(?:#|$)/.test(line)) continue;
        const [, command, status] = /^(.*?)(?:\s+#(?: exit status (\d+))?.*)?$/.exec(line)!;
        const text = COMMANDS.reduce((t, [pattern, name]) => t.replace(pattern, name), command!);
        if (!/\bholdfast\b/.test(text)) {
          ok = false;
          output += `neither runs nor is marked as not run: ${line}\n`;
          continue;
        }
        const result = await execute('bash', ['-c', prelude + text], {
          cwd: folder,
          env: { ...process.env, NO_COLOR: '1' },
        });
        output += result.stdout;
        if (result.status !== Number(status ?? 0)) {
          ok = false;
          output += `${command}: exit status ${result.status}\n${result.stderr}`;
        }
      }
      ran.push({ block, output, ok });
    }
  } finally {
    rmSync(folder, { recursive: true });
  }
  return ran;
}
