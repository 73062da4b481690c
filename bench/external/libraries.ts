/** General-purpose exact libraries of Debian as judges of ranks: PARI/GP, SymPy, FLINT and LinBox, where they are installed. */
import { existsSync, mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type Outcome, run } from '../measure.ts';
import { type PlainMatrix, sparseText } from './matrix.ts';

export interface Library {
  readonly name: string;
  readonly method: string;
  /** Of the rationals, or modulo the prime that is given. */
  readonly modular: boolean;
  /** Bytes that the matrix takes at least; the dense ones are refused before they start. */
  bytes(matrix: PlainMatrix): number;
  rank(matrix: PlainMatrix, limits: Limits): Promise<Rank>;
}

export interface Limits {
  readonly seconds: number;
  readonly gigabytes: number;
  /** Below 2³¹. */
  readonly prime: number;
}

export type Rank =
  | { readonly rank: number; readonly seconds: number }
  | { readonly failed: 'time' | 'memory' | string };

export type Availability =
  | { readonly library: Library }
  | { readonly name: string; readonly missing: string };

function file(name: string): string {
  return new URL(name, import.meta.url).pathname;
}

function rankFrom({ status, stdout, stderr, timedOut }: Outcome): Rank {
  if (timedOut) return { failed: 'time' };
  const line = stdout.split('\n').find((text) => text.startsWith('{'));
  if (status === 0 && line !== undefined) return JSON.parse(line) as Rank;
  if (/bad_alloc|MemoryError|stack overflows|cannot allocate|Unable to allocate/i.test(stderr + stdout))
    return { failed: 'memory' };
  return { failed: `status ${status}: ${(stderr || stdout).trim().slice(-200)}` };
}

/** One library: found and, where need be, compiled; or why not. */
type Finder = (folder: string) => Promise<Library | string>;

const compiled =
  (
    name: string,
    method: string,
    bytes: Library['bytes'],
    build: (program: string) => Promise<Outcome | string>,
  ): Finder =>
  async (folder) => {
    const program = join(folder, name.toLowerCase());
    const built = await build(program);
    if (typeof built === 'string') return built;
    if (built.status !== 0) return built.stderr.trim().split('\n')[0] ?? 'does not compile';
    return {
      name,
      method,
      modular: true,
      bytes,
      rank: async (matrix, { seconds, gigabytes, prime }) =>
        rankFrom(await run(program, [`${prime}`], { seconds, gigabytes, input: sparseText(matrix) })),
    };
  };

const FINDERS: Readonly<Record<string, Finder>> = {
  PARI: async () => {
    const found = await run('gp', ['--version-short'], { seconds: 10 });
    if (found.status !== 0) return 'gp is not installed (Debian: pari-gp)';
    return {
      name: 'PARI',
      method: `matrank over the rationals, dense, PARI/GP ${found.stdout.trim()}`,
      modular: false,
      bytes: ({ rows, columns }) => 8 * rows * columns,
      rank: async (matrix, { seconds, gigabytes }) => {
        const data = [[matrix.rows, matrix.columns], ...matrix.entries.map(([r, c, v]) => [r + 1, c + 1, v])];
        const input = `data = ${JSON.stringify(data)};\nread("${file('pari.gp')}");\n`;
        const stack = `${Math.floor(gigabytes * 1000)}M`;
        return rankFrom(await run('gp', ['-q', '-f', '-s', stack], { seconds, input }));
      },
    };
  },
  SymPy: async () => {
    // Debian's module belongs to Debian's own interpreter, which need not be the first one on the path.
    for (const python of ['/usr/bin/python3', 'python3']) {
      const found = await run(python, ['-c', 'import sympy; print(sympy.__version__)'], { seconds: 30 });
      if (found.status !== 0) continue;
      return {
        name: 'SymPy',
        method: `sparse elimination over the rationals, SymPy ${found.stdout.trim()}`,
        modular: false,
        bytes: ({ entries }) => 200 * entries.length,
        rank: async (matrix, { seconds, gigabytes }) =>
          rankFrom(
            await run(python, [file('sympy_rank.py')], { seconds, gigabytes, input: sparseText(matrix) }),
          ),
      };
    }
    return 'sympy is not installed (Debian: python3-sympy)';
  },
  FLINT: compiled(
    'FLINT',
    'dense elimination modulo p',
    ({ rows, columns }) => 8 * rows * columns,
    async (program) =>
      existsSync('/usr/include/flint/nmod_mat.h')
        ? run('gcc', ['-O2', '-o', program, file('flint.c'), '-lflint', '-lgmp'], { seconds: 60 })
        : 'FLINT is not installed (Debian: libflint-dev)',
  ),
  LinBox: compiled(
    'LinBox',
    'sparse elimination modulo p',
    ({ entries }) => 16 * entries.length,
    async (program) => {
      const flags = await run('pkg-config', ['--cflags', '--libs', 'linbox'], { seconds: 10 });
      if (flags.status !== 0) return 'LinBox is not installed (Debian: liblinbox-dev, pkg-config)';
      const words = flags.stdout.trim().split(/\s+/);
      return run('g++', ['-O2', '-o', program, file('linbox.cpp'), ...words], { seconds: 120 });
    },
  ),
};

/** Looks for the libraries named, all by default. Compiling the drivers takes ten seconds where LinBox is among them. */
export async function findLibraries(names = Object.keys(FINDERS)): Promise<Availability[]> {
  const folder = mkdtempSync(join(tmpdir(), 'holdfast-external-'));
  const found: Availability[] = [];
  for (const name of names) {
    const library = await FINDERS[name]!(folder);
    found.push(typeof library === 'string' ? { name, missing: library } : { library });
  }
  return found;
}
