import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { costAt, costOf } from '../../bench/scaling.ts';

const PAGE = `<!-- table search-x -->
| range | candidates | charges | time, median ± MAD | samples | growth | peak memory |
| ----: | ---------: | ------: | -----------------: | ------: | -----: | ----------: |
|     8 |      49152 |       1 |    500 µs ± 6.6 ms |       2 |   1.68 |       93 MB |
|     9 |     196608 |       1 |   250 ms ± 3.09 ms |       2 |   1.19 |      100 MB |
|    10 |     786432 |       1 |             4.00 s |       1 |   1.56 |      190 MB |

- Peak memory is that of the whole process; Node and the loader have 85 MB before the search begins.
<!-- end search-x -->`;

describe('what a search costs', () => {
  it('is read from the table of measurements, and continued by the last growth', () => {
    const cost = costOf(PAGE.replace('500 µs', '1.00 s'), 'x');
    expect(cost).toMatchObject({ base: 85e6, growth: 2, last: { range: 10, seconds: 4, bytes: 190e6 } });
    expect(costAt(cost, 9)).toEqual({ range: 9, seconds: 0.25, bytes: 100e6, isMeasured: true });
    expect(costAt(cost, 12)).toEqual({ range: 12, seconds: 16, bytes: 85e6 + 16 * 105e6, isMeasured: false });
    expect(costOf(PAGE, 'x').measured.get(8)!.seconds).toBeCloseTo(5e-4);
  });

  it('is an error where there is no table', () => {
    expect(() => costOf(PAGE, 'y')).toThrow(/no table of y/);
    expect(() => costOf(PAGE.replaceAll(' MB', ''), 'x')).toThrow(/no table of x/);
  });

  it('in docs/scaling.md is that of docs/performance.md', () => {
    const page = (name: string) => readFileSync(new URL(`../../docs/${name}.md`, import.meta.url), 'utf8');
    const { bytesAString, growth } = costOf(page('performance'), 'xyz-field');
    const row = page('scaling')
      .split('\n')
      .find((line) => line.includes('+ 13 Z` |') && line.includes('×'));
    expect(row).toContain(` ${bytesAString.toFixed(2)} | `);
    expect(row).toContain(`×${growth.toFixed(2)}`);
  });
});
