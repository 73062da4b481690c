import { describe, expect, it } from 'vitest';
import { clockGrain, grainWarning, peakMemory, run, spreadOf } from '../../bench/measure.ts';
import { markdown } from '../../bench/table.ts';

describe('measurement', () => {
  it('takes medians, not means', () => {
    expect(spreadOf([1, 2, 100])).toEqual({ median: 2, deviation: 1, samples: 3 });
    expect(spreadOf([1, 2, 3, 100])).toEqual({ median: 2.5, deviation: 1, samples: 4 });
    expect(spreadOf([5])).toEqual({ median: 5, deviation: 0, samples: 1 });
  });

  it('warns of a time that the clock can hardly tell', () => {
    const grain = clockGrain();
    expect(grain).toBeGreaterThan(0);
    expect(grainWarning(50 * grain, grain)).toContain('grains');
    expect(grainWarning(5000 * grain, grain)).toBeUndefined();
  });

  it('sees memory that was used and given back', async () => {
    const use = `
      const { peakMemory } = await import(${JSON.stringify(new URL('../../bench/measure.ts', import.meta.url).href)});
      const before = peakMemory();
      new Uint8Array(3e8).fill(1);
      console.log(peakMemory() - before);`;
    const { stdout } = await run(process.execPath, ['--import', 'tsx', '--input-type=module', '-e', use], {
      seconds: 30,
    });
    expect(Number(stdout)).toBeGreaterThan(2.5e8);
    expect(peakMemory()).toBeGreaterThan(1e7);
  });

  it('ends a program that takes too long, or is not there', async () => {
    const late = await run(process.execPath, ['-e', 'setTimeout(() => {}, 60000)'], { seconds: 0.3 });
    expect(late.timedOut).toBe(true);
    const missing = await run('no-such-program-anywhere', [], { seconds: 1 });
    expect(missing.status).toBeNull();
    expect(missing.stderr).toContain('ENOENT');
  });

  it('prints tables that Markdown takes', () => {
    const text = markdown({
      name: 'n',
      title: 'T',
      columns: ['a', 'b'],
      rows: [['1', '22 µs']],
      notes: ['n'],
    });
    expect(text.split('\n')).toEqual([
      '**T**',
      '',
      '|   a |     b |',
      '| --: | ----: |',
      '|   1 | 22 µs |',
      '',
      '- n',
    ]);
  });
});
