import { expect, it } from 'vitest';
import { CancelledError, InputError, LimitError, parseModel, searchNow } from '../../src/index.ts';
import * as node from '../../src/search/background.ts';
import * as browser from '../../src/search/background-browser.ts';

const model = parseModel('XX + YY + 1/2 Z');

it('offers what the search of Node offers', () => {
  expect(Object.keys(browser).sort()).toEqual(Object.keys(node).sort());
});

it('finds the same', async () => {
  const { milliseconds: _, ...found } = await browser.search(model, { range: 4 });
  const { milliseconds: __, ...expected } = searchNow(model, { range: 4 });
  expect(found).toEqual(expected);
});

it('refuses, and stops, as the search of Node', async () => {
  await expect(browser.search(model, { range: 9, method: 'exhaustive', memory: 1e6 })).rejects.toThrow(
    LimitError,
  );
  await expect(browser.search(model, { range: 3, signal: AbortSignal.abort() })).rejects.toThrow(
    CancelledError,
  );
  await expect(browser.search(model, { range: 3, checkpoint: 'folder' })).rejects.toThrow(InputError);
  const controller = new AbortController();
  const stopped = browser.search(model, {
    range: 7,
    method: 'exhaustive',
    signal: controller.signal,
    onProgress: () => controller.abort(),
  });
  await expect(stopped).rejects.toThrow(CancelledError);
});
