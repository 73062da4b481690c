/** The commands around certificates, and the checker as one file: in Node by itself, and in Chromium where that is installed. */
import { execFileSync, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import {
  copyFileSync,
  existsSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from 'node:fs';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chromium as playwright } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';

const folder = mkdtempSync(join(tmpdir(), 'holdfast-cli-'));
afterAll(() => rmSync(folder, { recursive: true }));

const root = new URL('../..', import.meta.url).pathname;
const file = join(folder, 'answer.json');
const broken = join(folder, 'broken.json');
const lie = join(folder, 'lie.json');
const single = join(folder, 'holdfast-check.mjs');

function holdfast(...args: string[]) {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    ['--import', 'tsx', join(root, 'src/cli/main.ts'), ...args],
    { encoding: 'utf8', cwd: root },
  );
  return { status, stdout, stderr };
}

let id = '';
beforeAll(() => {
  expect(holdfast('search', 'XX + 2 YY + Z', '--range=4', `--certificate=${file}`).status).toBe(0);
  const text = readFileSync(file, 'utf8');
  id = createHash('sha256').update(text).digest('hex');
  writeFileSync(broken, text.slice(0, 300));
  writeFileSync(lie, text.replace('[["XX","1"]', '[["XX","5"]'));
  // The build step of package.json, into this folder.
  const build = (
    JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { scripts: { build: string } }
  ).scripts.build;
  const bundle = build.split('&&').find((step) => step.includes('holdfast-check.mjs'))!;
  const args = bundle.trim().replace('dist/holdfast-check.mjs', single).split(/\s+/).slice(1);
  execFileSync(join(root, 'node_modules/.bin/esbuild'), args, { cwd: root });
}, 60_000);

describe('holdfast check', () => {
  test('one exact line for an accepted certificate', () => {
    expect(holdfast('check', file)).toEqual({ status: 0, stdout: `accepted sha256:${id}\n`, stderr: '' });
  });

  test('status 1 and a reason for a rejected one', () => {
    const { status, stdout, stderr } = holdfast('check', lie);
    expect([status, stdout]).toEqual([1, '']);
    expect(stderr).toMatch(/^rejected: .+\n$/);
  });

  test('status 2 and a reason for what is none', () => {
    const { status, stdout, stderr } = holdfast('check', broken);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).toMatch(/^not a certificate: .+\n$/);
    expect(holdfast('check', join(folder, 'nowhere.json'))).toMatchObject({ status: 2, stdout: '' });
    expect(holdfast('check')).toMatchObject({ status: 2, stdout: '' });
  });
});

test('holdfast cite: statement, rings, id and command; nothing for a rejected one', () => {
  const { status, stdout } = holdfast('cite', file);
  expect(status).toBe(0);
  expect(stdout).toMatch(/^@misc\{holdfast-/);
  for (const part of [
    'XX + 2 YY + Z',
    'at least 9 cells',
    'range at most 4',
    `sha256:${id}`,
    'holdfast check answer.json',
  ])
    expect(stdout).toContain(part);
  expect(holdfast('cite', lie)).toMatchObject({ status: 1, stdout: '' });
});

test('a certificate that cannot be written is a failure, and leaves nothing behind', () => {
  const before = readdirSync(folder);
  const { status, stdout, stderr } = holdfast(
    'search',
    'XX',
    '--range=2',
    `--certificate=${join(folder, 'no/where.json')}`,
  );
  expect(status).toBe(1);
  expect(stdout).toContain('Q1');
  expect(stderr).toContain('no/where.json');
  expect(readdirSync(folder)).toEqual(before);
});

describe('the checker as one file', () => {
  test('imports no module but those of Node, when it is a program', () => {
    const imports = [
      ...readFileSync(single, 'utf8').matchAll(/(?:\bfrom\s+|\bimport\s*\(?\s*)["']([^"']+)["']/g),
    ];
    expect([...new Set(imports.map(([, name]) => name))].sort()).toEqual(['node:fs', 'node:url']);
  });

  test('runs in Node from an empty folder', () => {
    const alone = mkdtempSync(join(tmpdir(), 'holdfast-alone-'));
    copyFileSync(single, join(alone, 'holdfast-check.mjs'));
    const run = (path: string) =>
      spawnSync(process.execPath, ['holdfast-check.mjs', path], { cwd: alone, encoding: 'utf8' });
    expect(run(file)).toMatchObject({ status: 0, stdout: `accepted sha256:${id}\n`, stderr: '' });
    expect(run(lie)).toMatchObject({ status: 1, stdout: '' });
    expect(run(broken)).toMatchObject({ status: 2, stdout: '' });
    expect(run('nowhere')).toMatchObject({ status: 2, stdout: '' });
    rmSync(alone, { recursive: true });
  });

  const chromium = ['/usr/bin/chromium', '/usr/bin/chromium-browser'].find(existsSync);
  if (chromium === undefined) console.warn('the checker is not tried in a browser: Debian package chromium');

  test.skipIf(chromium === undefined)(
    'runs in Chromium',
    async () => {
      const page = `<!doctype html><title>check</title><body><script type="module">
      import { check } from './holdfast-check.mjs';
      const text = await (await fetch('answer.json')).text();
      const lie = await (await fetch('lie.json')).text();
      document.body.textContent = JSON.stringify([await check(text), await check(lie)]);
    </script>`;
      const server = createServer((request, response) => {
        const name = request.url!.slice(1);
        response.setHeader('content-type', name.endsWith('.mjs') ? 'text/javascript' : 'text/html');
        response.end(
          name === '' ? page : existsSync(join(folder, name)) ? readFileSync(join(folder, name)) : '',
        );
      });
      await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
      const browser = await playwright.launch({
        executablePath: chromium!,
        args: ['--no-sandbox', '--disable-gpu', '--disable-background-networking'],
      });
      try {
        const tab = await browser.newPage();
        await tab.goto(`http://127.0.0.1:${(server.address() as AddressInfo).port}/`);
        await tab.waitForFunction('document.body.textContent.startsWith("[{")');
        const [good, bad] = JSON.parse((await tab.textContent('body'))!);
        expect(good).toMatchObject({ status: 'accepted', id });
        expect(bad).toMatchObject({ status: 'rejected' });
      } finally {
        await browser.close();
        server.close();
      }
    },
    60_000,
  );
});
