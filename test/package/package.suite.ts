/** The package as its users get it: packed, installed without a network into empty projects, bundled for a page. */
import { execFileSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { build } from 'esbuild';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { apiReference } from '../../src/cli/build/api.ts';
import { HAS_CHROMIUM, launch } from '../support/chromium.ts';

const ROOT = resolve(import.meta.dirname, '../..');
/** Bytes of the tarball; a jump is to be noticed, not forbidden. */
const MAX_TARBALL = 500_000;

const scratch = mkdtempSync(join(tmpdir(), 'package-'));
let tarballs: string[] = [];
let packed: { filename: string; size: number; files: { path: string }[] };

function run(program: string, args: readonly string[], cwd: string): string {
  return execFileSync(program, args, { cwd, encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'] });
}

/** An empty project with the package in it. The packages that it needs come from tarballs too: no network, no cache. */
function project(name: string, files: Readonly<Record<string, string>>): string {
  const folder = join(scratch, name);
  mkdirSync(folder);
  writeFileSync(join(folder, 'package.json'), JSON.stringify({ name, version: '1.0.0', type: 'module' }));
  run('npm', ['install', '--offline', '--no-audit', '--no-fund', ...tarballs], folder);
  for (const [file, text] of Object.entries(files)) writeFileSync(join(folder, file), text);
  return folder;
}

const PROGRAM = `import { type Charge, parseModel, search, searchNow, certificateNow } from 'holdfast';
import { checkNow } from 'holdfast/check';
const result = await search(parseModel('XX + YY + g Z', { parameters: { g: '0.35' } }), { range: 3 });
const first: Charge = result.charges[0]!;
const again = searchNow(result.hamiltonian, { range: 3 });
console.log(result.dimensionByRange.join(' '), String(first.density), again.charges.length, checkNow(certificateNow(again)).status);
`;
const PRINTED = '1 3 5 Z 5 accepted\n';
const plain = PROGRAM.replace('type Charge, ', '').replace(': Charge', '').replace(']!', ']');

beforeAll(() => {
  run('npm', ['run', 'build'], ROOT);
  const pack = (folder: string) =>
    JSON.parse(
      run('npm', ['pack', '--json', '--ignore-scripts', '--pack-destination', scratch, folder], ROOT),
    )[0] as typeof packed;
  packed = pack('.');
  tarballs = [packed, ...['fraction.js', 'big.js', 'zod'].map((name) => pack(`./node_modules/${name}`))].map(
    (p) => join(scratch, p.filename),
  );
});
afterAll(() => rmSync(scratch, { recursive: true, force: true }));

describe('the API reference', () => {
  it('is that of the source; npm run docs:api writes it', async () => {
    const written = execFileSync(
      join(ROOT, 'node_modules/.bin/biome'),
      ['format', '--stdin-file-path=docs/api.md'],
      {
        cwd: ROOT,
        encoding: 'utf8',
        input: await apiReference(join(ROOT, 'dist')),
      },
    );
    expect(readFileSync(join(ROOT, 'docs/api.md'), 'utf8')).toBe(written);
    expect(written.match(/^### /gm)!.length).toBeGreaterThanOrEqual(
      Object.keys(await import('../../src/index.ts')).length,
    );
  });
});

describe('the package', () => {
  it('is small and holds what it should', () => {
    const paths = packed.files.map((f) => f.path);
    expect(packed.size).toBeLessThan(MAX_TARBALL);
    expect(paths).toEqual(
      expect.arrayContaining([
        'dist/index.js',
        'dist/index.d.ts',
        'dist/cli/main.js',
        'dist/workbench.html',
        'LICENSE',
      ]),
    );
    expect(
      paths.filter(
        (p) => !/^(dist\/|docs\/(CITATION\.cff|changelog\.md)$|LICENSE$|README\.md$|package\.json$)/.test(p),
      ),
    ).toEqual([]);
    expect(paths.filter((p) => /\.ts$/.test(p) && !p.endsWith('.d.ts'))).toEqual([]);
  });

  it('works in an empty TypeScript project, types checked in full', () => {
    const folder = project('typed', {
      'main.ts': PROGRAM,
      'tsconfig.json': JSON.stringify({
        compilerOptions: {
          module: 'nodenext',
          target: 'es2022',
          strict: true,
          skipLibCheck: false,
          types: [],
        },
        files: ['main.ts'],
      }),
    });
    run(process.execPath, [join(ROOT, 'node_modules/typescript/bin/tsc'), '-p', '.'], folder);
    expect(run(process.execPath, ['main.js'], folder)).toBe(PRINTED);
  });

  it('works in an empty JavaScript project, its command too', () => {
    const folder = project('plain', { 'main.js': plain });
    expect(run(process.execPath, ['main.js'], folder)).toBe(PRINTED);
    expect(
      readdirSync(join(folder, 'node_modules'))
        .filter((f) => !f.startsWith('.'))
        .sort(),
    ).toEqual(['big.js', 'fraction.js', 'holdfast', 'zod']);
    const command = join(folder, 'node_modules/.bin/holdfast');
    expect(run(command, ['search', 'XX + YY', '--range', '3', '--certificate', 'c.json'], folder)).toContain(
      'Exactly 5 ',
    );
    expect(run(command, ['check', 'c.json'], folder)).toMatch(/^accepted sha256:/);
  });

  it.skipIf(!HAS_CHROMIUM)('works in a bundled page', async () => {
    const folder = project('page', {
      'main.js': plain
        .replace('console.log(', 'document.title = [')
        .replace(/\);\n$/, '].join(" ") + "\\n";\n'),
    });
    await build({
      entryPoints: [join(folder, 'main.js')],
      bundle: true,
      format: 'esm',
      platform: 'browser',
      outfile: join(folder, 'bundle.js'),
      logLevel: 'silent',
    });
    const { outputFiles } = await build({
      entryPoints: [join(folder, 'bundle.js')],
      write: false,
      charset: 'ascii',
    });
    writeFileSync(
      join(folder, 'page.html'),
      `<!doctype html><script type="module">${outputFiles[0]!.text.replaceAll('</script', '<\\/script')}</script>`,
    );
    const browser = await launch();
    try {
      const page = await browser.newPage();
      const errors: string[] = [];
      page.on('pageerror', (e) => void errors.push(String(e)));
      await page.goto(pathToFileURL(join(folder, 'page.html')).href);
      await page.waitForFunction('document.title !== ""', undefined, { timeout: 30_000 }).catch(() => {});
      expect(errors).toEqual([]);
      expect(`${await page.title()}\n`).toBe(PRINTED);
    } finally {
      await browser.close();
    }
  });
});
