import { expect, test } from 'vitest';
import { checkNow, parseModel, search, searchNow } from '../../src/index.ts';

test('a result hands out a certificate that the checker accepts', async () => {
  const model = parseModel('XX + YY + 3 X');
  const here = searchNow(model, { range: 4 });
  const text = await here.certificate();
  expect(checkNow(text)).toMatchObject({ status: 'accepted' });
  expect(await (await search(model, { range: 4 })).certificate()).toBe(text);
  expect(Object.keys(here)).not.toContain('certificate');
  expect(Object.isFrozen(here)).toBe(true);
});
