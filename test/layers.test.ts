/** The architecture as a test: who may import whom, read from the import lines. */
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';

const SRC = resolve(import.meta.dirname, '../src');

/**
 * The folders under `src/`, lowest first. A file imports from its own folder and from folders of a lower height; two folders
 * of one height know nothing of each other.
 */
const HEIGHT: Readonly<Record<string, number>> = {
  algebra: 0,
  linear: 1,
  lattice: 2,
  model: 3,
  search: 4,
  certificate: 5,
  theory: 6,
  physics: 6,
  scan: 7,
  report: 8,
  cli: 9,
};

/** Files of `src/` itself: the errors below everything, the list of exports above everything but the command. */
const LOOSE: Readonly<Record<string, number>> = { 'errors.ts': -1, 'index.ts': 8.5 };

/** The trusted checker stands apart; these alone may call it. */
const CHECK = 'check';
const MAY_CALL_CHECK = new Set(['cli', 'report', 'index.ts']);

/** Each runtime package and the folders that may use it. */
const PACKAGES: Readonly<Record<string, readonly string[]>> = {
  'fraction.js': ['algebra'],
  'big.js': ['report', 'cli'],
  zod: ['model', 'certificate', 'theory', 'physics', 'scan', 'report', 'cli'],
};

/** Programs that build what is published, with the development package they use; they are not part of the package. */
const BUILD_FILES: Readonly<Record<string, string>> = {
  'cli/build/workbench.ts': 'esbuild',
};

/** Files outside `cli/` that may use Node, with the reason. Everything else has to run in a browser. */
const NODE_FILES: Readonly<Record<string, string>> = {
  'search/background.ts': 'starts the worker thread',
  'search/thread.ts': 'finds the file of a worker',
  'search/worker.ts': 'runs in it',
  'search/checkpoint.ts': 'files of finished layers, for the worker',
};

interface Import {
  readonly target: string;
  /** Erased by the compiler. */
  readonly typeOnly: boolean;
}

const files = readdirSync(SRC, { recursive: true, encoding: 'utf8' })
  .filter((name) => name.endsWith('.ts'))
  .map((name) => name.replaceAll('\\', '/'))
  .sort();

const sources = new Map(files.map((name) => [name, readFileSync(join(SRC, name), 'utf8')]));

/** Blanks comments; texts in quotes stay, since an import's target is one. */
function withoutComments(source: string): string {
  return source.replace(
    /('(?:[^'\\\n]|\\.)*'|"(?:[^"\\\n]|\\.)*"|`(?:[^`\\]|\\.)*`)|\/\/[^\n]*|\/\*[\s\S]*?\*\//g,
    (_, text: string | undefined) => text ?? ' ',
  );
}

function importsOf(source: string): Import[] {
  const code = withoutComments(source).replace(/;[ \t]*(?=import\b|export\b)/g, ';\n');
  const found: Import[] = [];
  for (const [, clause, target] of code.matchAll(
    /^(?:import|export)\s+((?:type\s+)?(?:[\w$*]+\s*,?\s*)?(?:\*\s*as\s+[\w$]+|\{[^}]*\}|\*)?)\s*from\s*['"]([^'"]+)['"]/gm,
  )) {
    const names = /\{([^}]*)\}/.exec(clause!)?.[1];
    const allTypes =
      names?.split(',').every((name) => name.trim() === '' || name.trim().startsWith('type ')) ?? false;
    found.push({
      target: target!,
      typeOnly: clause!.startsWith('type') || (allTypes && clause!.startsWith('{')),
    });
  }
  for (const [, target] of code.matchAll(/^import\s*['"]([^'"]+)['"]/gm))
    found.push({ target: target!, typeOnly: false });
  for (const [, target] of code.matchAll(/\bimport\s*\(\s*['"]([^'"]+)['"]/g))
    found.push({ target: target!, typeOnly: false });
  // A worker's file is loaded through its URL, which the compiler does not rewrite.
  for (const [, target] of code.matchAll(/new URL\(\s*['"](\.[^'"]+)['"]\s*,\s*import\.meta\.url/g))
    found.push({ target: target!.replace(/\.js$/, '.ts'), typeOnly: false });
  return found;
}

const imports = new Map([...sources].map(([name, source]) => [name, importsOf(source)]));

/** `search/core.ts` → `search`, `errors.ts` → `errors.ts`. */
function folderOf(file: string): string {
  return file.split('/')[0]!;
}

function targetFile(file: string, target: string): string {
  return relative(SRC, resolve(SRC, dirname(file), target)).replaceAll('\\', '/');
}

function heightOf(file: string): number | undefined {
  const folder = folderOf(file);
  return HEIGHT[folder] ?? LOOSE[folder];
}

/** Every import that breaks `rule`, as `file → target`. */
function breaches(rule: (file: string, target: string) => boolean): string[] {
  return [...imports].flatMap(([file, list]) =>
    list.filter(({ target }) => !rule(file, target)).map(({ target }) => `${file} → ${target}`),
  );
}

describe('layers', () => {
  it('reads import lines of every form', () => {
    const source = `
      // import 'comment'
      /* import x from 'comment'; */
import a, { type B, c } from './one.ts';
import type { D } from "./two.ts";
import { type E, type F } from './three.ts';
import * as all from 'four';
export { g } from './five.ts';
export * from './six.ts';
import './seven.ts'; import * as eleven from 'eleven';
const later = await import('./eight.ts');
new Worker(new URL('./nine.ts', import.meta.url));
import {
  h,
} from './ten.ts';
    `;
    const found = importsOf(source);
    expect(found.map((i) => i.target).sort()).toEqual(
      [
        './one.ts',
        './two.ts',
        './three.ts',
        'four',
        './five.ts',
        './six.ts',
        './seven.ts',
        './eight.ts',
        './nine.ts',
        './ten.ts',
        'eleven',
      ].sort(),
    );
    expect(found.filter((i) => i.typeOnly).map((i) => i.target)).toEqual(['./two.ts', './three.ts']);
  });

  it('misses no import: every quoted module name in an import or export line was understood', () => {
    for (const [file, source] of sources) {
      const lines = withoutComments(source).match(/^(?:\} from|import|export [*{]).*['"];?$/gm) ?? [];
      for (const line of lines) {
        const target = /['"]([^'"]+)['"];?$/.exec(line)![1]!;
        expect(
          imports.get(file)!.map((i) => i.target),
          `${file}: ${line}`,
        ).toContain(target);
      }
    }
  });

  it('knows every folder', () => {
    const known = new Set([...Object.keys(HEIGHT), ...Object.keys(LOOSE), CHECK]);
    expect(files.map(folderOf).filter((folder) => !known.has(folder))).toEqual([]);
  });

  it('names files that exist, with their ending', () => {
    const missing = breaches(
      (file, target) => !target.startsWith('.') || files.includes(targetFile(file, target)),
    );
    expect(missing).toEqual([]);
  });

  it('imports downwards only', () => {
    const upward = breaches((file, target) => {
      if (!target.startsWith('.')) return true;
      const imported = targetFile(file, target);
      if (folderOf(imported) === folderOf(file)) return true;
      if (folderOf(file) === CHECK) return false;
      if (folderOf(imported) === CHECK) return MAY_CALL_CHECK.has(folderOf(file));
      return heightOf(imported)! < heightOf(file)!;
    });
    expect(upward).toEqual([]);
  });

  it('keeps the checker apart: no package, no other folder', () => {
    const checker = [...imports].filter(([file]) => folderOf(file) === CHECK);
    const foreign = checker.flatMap(([file, list]) =>
      list
        .filter(({ target }) => !(target.startsWith('.') && folderOf(targetFile(file, target)) === CHECK))
        .map(({ target }) => `${file} → ${target}`),
    );
    expect(foreign).toEqual([]);
  });

  it('uses each runtime package only where it belongs', () => {
    const strays = breaches((file, target) => {
      if (target.startsWith('.') || target.startsWith('node:')) return true;
      const name = target.startsWith('@') ? target.split('/').slice(0, 2).join('/') : target.split('/')[0]!;
      return BUILD_FILES[file] === name || (PACKAGES[name]?.includes(folderOf(file)) ?? false);
    });
    expect(strays).toEqual([]);
    const manifest = JSON.parse(readFileSync(join(SRC, '../package.json'), 'utf8')) as {
      dependencies: Record<string, string>;
      devDependencies: Record<string, string>;
    };
    expect(Object.keys(manifest.dependencies).sort()).toEqual(Object.keys(PACKAGES).sort());
    for (const [name, version] of Object.entries({ ...manifest.dependencies, ...manifest.devDependencies }))
      expect(version, `${name} is pinned exactly`).toMatch(/^\d+\.\d+\.\d+$/);
  });

  it('runs in a browser but for the command and the files listed', () => {
    expect(Object.keys(NODE_FILES).filter((file) => !files.includes(file))).toEqual([]);
    const mayUseNode = (file: string) => folderOf(file) === 'cli' || file in NODE_FILES;
    expect(breaches((file, target) => !target.startsWith('node:') || mayUseNode(file))).toEqual([]);
    const globals = [...sources]
      .filter(
        ([file, source]) =>
          !mayUseNode(file) && /(?<![\w.'"])(?:process\.|Buffer\.|require\()/.test(withoutComments(source)),
      )
      .map(([file]) => file);
    expect(globals).toEqual([]);
  });

  it('has no cycle of imports', () => {
    const done = new Set<string>();
    const visit = (file: string, path: readonly string[]): void => {
      if (path.includes(file))
        throw new Error(`a cycle: ${[...path.slice(path.indexOf(file)), file].join(' → ')}`);
      if (done.has(file)) return;
      for (const { target, typeOnly } of imports.get(file) ?? [])
        if (!typeOnly && target.startsWith('.')) visit(targetFile(file, target), [...path, file]);
      done.add(file);
    };
    for (const file of files) visit(file, []);
  });
});

/** What the list of exports need not speak of: `linear/` holds the tools of the search, the command is a program. */
const PRIVATE = new Set(['linear', 'cli', 'index.ts']);

describe('the list of exports', () => {
  const index = sources.get('index.ts') ?? '';
  const exported = importsOf(index).map((i) => targetFile('index.ts', i.target));

  it('names what it exports', () => {
    expect(index).not.toMatch(/export\s*\*/);
    expect(exported.some((file) => folderOf(file) === 'cli')).toBe(false);
  });

  it('offers something of every layer that there is, and every error', async () => {
    const layers = new Set(files.map(folderOf).filter((folder) => !PRIVATE.has(folder)));
    expect([...layers].filter((layer) => !exported.some((file) => folderOf(file) === layer))).toEqual([]);
    const api = (await import('../src/index.ts')) as Record<string, unknown>;
    const errors = (await import('../src/errors.ts')) as Record<string, unknown>;
    for (const name of Object.keys(errors).filter((n) => n.endsWith('Error')))
      expect(api[name], name).toBe(errors[name]);
  });
});
