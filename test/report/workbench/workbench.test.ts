import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { buildWorkbench } from '../../../src/cli/build/workbench.ts';
import {
  certificateNow,
  checkNow,
  parseModel,
  pictureOfResult,
  reportPage,
  resultToJson,
  searchNow,
} from '../../../src/index.ts';
import { HAS_CHROMIUM, launch } from '../../support/chromium.ts';

/** Takes a browser without seeing the search: the smallest time for a page that hangs. */
const PATIENCE = 30_000;

describe.skipIf(!HAS_CHROMIUM)('in a browser, from the file system', () => {
  let browser: Browser;
  let page: Page;
  let folder: string;
  let complaints: string[];

  beforeAll(async () => {
    folder = mkdtempSync(join(tmpdir(), 'workbench-'));
    writeFileSync(join(folder, 'workbench.html'), await buildWorkbench());
    browser = await launch();
  });
  afterAll(async () => {
    await browser?.close();
    rmSync(folder, { recursive: true, force: true });
  });
  beforeEach(async () => {
    page = await browser.newPage({ viewport: { width: 1000, height: 900 }, acceptDownloads: true });
    page.setDefaultTimeout(PATIENCE);
    complaints = [];
    page.on('console', (m) => void (['error', 'warning'].includes(m.type()) && complaints.push(m.text())));
    page.on('pageerror', (e) => void complaints.push(String(e)));
    page.on(
      'request',
      (r) => void (/^(file|blob|data):/.test(r.url()) || complaints.push(`request to ${r.url()}`)),
    );
  });
  afterEach(async () => {
    await page.close();
    expect(complaints).toEqual([]);
  });

  const open = () => page.goto(pathToFileURL(join(folder, 'workbench.html')).href);
  const status = (text: string) => page.locator('#status', { hasText: text }).waitFor();

  async function fill(formula: string, range: number, parameters = ''): Promise<void> {
    await page.getByLabel('Density of H').fill(formula);
    await page.getByLabel('Range in cells').fill(String(range));
    await page.getByLabel('Parameters').fill(parameters);
  }

  async function saved(button: string): Promise<string> {
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: button }).click(),
    ]);
    return readFileSync(await download.path(), 'utf8');
  }

  it('searches, shows the charges, and saves what the library writes', async () => {
    await open();
    await fill('2 XX + 3 YY + J ZZ', 4, 'J=5');
    await page.getByRole('button', { name: 'Search' }).click();
    await status('Exactly 3 independent charges of range ≤ 4; the list is complete.');
    expect(await page.locator('#report article').count()).toBe(3);
    expect(
      await page.locator('#report article:nth-of-type(2) math mi', { hasText: /^XYZ$/ }).isVisible(),
    ).toBe(true);
    const result = searchNow(parseModel('2 XX + 3 YY + 5 ZZ'), { range: 4 });
    const timeless = (json: string) => ({ ...JSON.parse(json), milliseconds: 0 });
    expect(timeless(await saved('Save JSON'))).toEqual(timeless(JSON.stringify(resultToJson(result))));
    expect(await saved('Save picture')).toBe(pictureOfResult(result));
    const certificate = await saved('Save certificate');
    expect(certificate).toBe(certificateNow(result));
    const verdict = checkNow(certificate);
    expect(await saved('Save report')).toContain(verdict.status === 'accepted' ? verdict.id : 'accepted');
  });

  it('can be used with the keyboard alone', async () => {
    await open();
    await page.keyboard.press('Tab');
    expect(await page.evaluate('document.activeElement.id')).toBe('formula');
    await page.keyboard.press('Control+A');
    await page.keyboard.type('ZZ + X + Z');
    await page.keyboard.press('Control+Enter');
    await status('H is the only charge of range ≤ 4; there is no other.');
    const unlabelled = await page.evaluate(
      `[...document.querySelectorAll('input, textarea, select, progress, button')].filter((e) => !(e.labels?.length || e.textContent || e.getAttribute('aria-label'))).map((e) => e.id)`,
    );
    expect(unlabelled).toEqual([]);
  });

  it('stops a search at once, keeps the last result, and searches again', async () => {
    await open();
    await fill('ZZ + X', 2);
    await page.getByRole('button', { name: 'Search' }).click();
    await status('Exactly 2 independent charges');
    await fill('XX + 2 YY + 3 ZZ + X + Y + Z', 12);
    await page.getByRole('button', { name: 'Search' }).click();
    await page.getByRole('button', { name: 'Cancel' }).click();
    expect(await page.getByRole('alert').textContent()).toMatch(/^Cancelled/);
    expect(await page.locator('#report article').count()).toBe(2);
    expect(await page.getByRole('button', { name: 'Save certificate' }).isVisible()).toBe(false);
    await fill('XX + YY', 3);
    await page.getByRole('button', { name: 'Search' }).click();
    await status('Exactly 5 independent charges');
  });

  it('points at what is wrong in a formula, and keeps the last result', async () => {
    await open();
    await fill('XX + YY', 2);
    await page.getByRole('button', { name: 'Search' }).click();
    await status('Exactly 3 independent charges');
    await fill('XX + YQ <b>', 2);
    await page.getByRole('button', { name: 'Search' }).click();
    const told = await page.getByRole('alert').textContent();
    expect(told).toContain('formula: expected');
    expect(told).toContain('<b>');
    expect(told).toMatch(/\n +\^$/);
    expect(await page.locator('#report article').count()).toBe(3);
    expect(await page.evaluate('document.activeElement.id')).toBe('formula');
    await fill('XX', 200);
    await page.getByRole('button', { name: 'Search' }).click();
    expect(await page.getByRole('alert').textContent()).toMatch(/spins|GB/);
  });

  it('accepts a certificate and rejects one that was tampered with', async () => {
    await open();
    const text = certificateNow(searchNow(parseModel('XX + 2 YY + 3 ZZ'), { range: 4 }));
    const choose = (name: string, content: string) =>
      page
        .getByLabel('Choose a file')
        .setInputFiles({ name, mimeType: 'application/json', buffer: Buffer.from(content) });
    await choose('good.json', text);
    await status('Certificate checked: accepted.');
    expect(await page.locator('#verdict').textContent()).toMatch(
      /^Accepted\. sha256:[0-9a-f]{64}\n.*dimension exactly 3/s,
    );
    // One coefficient of a charge is changed.
    const tampered = text.replace(/\["XYZ","(-?\d+)"\]/, (_, c: string) => `["XYZ","${Number(c) + 1}"]`);
    expect(tampered).not.toBe(text);
    await choose('tampered.json', tampered);
    await status('Certificate checked: rejected.');
    expect(await page.locator('#verdict').textContent()).toMatch(/^Rejected\. /);
    await choose('other.json', '{"hello": "world"}');
    await status('Certificate checked: not a certificate.');
  });

  it('takes a certificate that is dropped on it', async () => {
    await open();
    const text = certificateNow(searchNow(parseModel('ZZ + X + Z'), { range: 2 }));
    await page.evaluate(`{
      const data = new DataTransfer();
      data.items.add(new File([${JSON.stringify(text)}], 'dropped.json'));
      document.body.dispatchEvent(new DragEvent('drop', { dataTransfer: data, bubbles: true, cancelable: true }));
    }`);
    await status('Certificate checked: accepted.');
  });

  it('shows the report and the pictures as they are', async () => {
    const result = searchNow(parseModel('2 XX + 3 YY + 5 ZZ'), { range: 5 });
    writeFileSync(join(folder, 'report.html'), reportPage(result));
    await page.goto(pathToFileURL(join(folder, 'report.html')).href);
    // No line of mathematics leaves its frame, on paper width either.
    for (const width of [1000, 794]) {
      await page.setViewportSize({ width, height: 900 });
      expect(
        await page.evaluate(
          `[...document.querySelectorAll('.equation')].filter((e) => e.scrollWidth > e.clientWidth + 1).length`,
        ),
      ).toBe(0);
      expect(await page.evaluate('document.documentElement.scrollWidth <= innerWidth')).toBe(true);
    }
    writeFileSync(join(folder, 'sheet.svg'), pictureOfResult(result));
    await page.goto(pathToFileURL(join(folder, 'sheet.svg')).href);
    expect(await page.evaluate(`document.querySelectorAll('parsererror').length`)).toBe(0);
    expect(
      await page.evaluate(`[...document.querySelectorAll('use')].every((u) => u.getBBox().width > 0)`),
    ).toBe(true);
  });
});
