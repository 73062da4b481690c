/** The command line as a whole: help pages, options, exit statuses, completion in the shells themselves. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { Command } from '../../src/cli/command.ts';
import { completionCommand, describedOptions } from '../../src/cli/commands/completion.ts';

const SRC = resolve(import.meta.dirname, '../../src/cli');
const scratch = mkdtempSync(join(tmpdir(), 'commands-'));
afterAll(() => rmSync(scratch, { recursive: true, force: true }));

/** Every command under `commands/`, whether `main.ts` knows it or not. */
const commands: Command[] = [];
for (const file of readdirSync(join(SRC, 'commands')).sort()) {
  const module = (await import(join(SRC, 'commands', file))) as Record<string, unknown>;
  for (const value of Object.values(module)) {
    const candidate = value as Partial<Command> | null;
    if (typeof candidate === 'object' && candidate?.run !== undefined) commands.push(candidate as Command);
  }
}
const completion = completionCommand(() => commands);
commands.push(completion);

function holdfast(args: readonly string[], environment: Readonly<Record<string, string>> = {}) {
  const { stdout, stderr, status } = spawnSync(
    process.execPath,
    ['--import', 'tsx', join(SRC, 'main.ts'), ...args],
    {
      encoding: 'utf8',
      cwd: resolve(SRC, '../..'),
      env: { ...process.env, ...environment },
    },
  );
  return { stdout, stderr, status };
}

async function script(shell: string): Promise<string> {
  let text = '';
  const status = await completion.run({
    values: {},
    positionals: [shell],
    out: (t) => {
      text += t;
    },
    note: () => {},
    interactive: false,
    width: 100,
    colour: false,
    signal: new AbortController().signal,
  });
  expect(status).toBe(0);
  return text;
}

describe('help pages', () => {
  it('list every command', () => {
    const { stdout, status } = holdfast(['--help']);
    expect(status).toBe(0);
    for (const { name, summary } of commands) expect(stdout).toContain(`  ${name.padEnd(14)}${summary}`);
  });

  it.each(commands.map((c) => [c.name, c] as const))(
    '%s teaches by example and names every option',
    (name, command) => {
      expect(command.help.startsWith(`holdfast ${name}`)).toBe(true);
      expect(command.help.split('\n').slice(1).join('\n')).toMatch(new RegExp(`^  .*holdfast ${name}`, 'm'));
      expect(command.help).toMatch(/^Exit status: 0 /m);
      for (const line of command.help.split('\n')) expect(line.length, line).toBeLessThanOrEqual(140);
      for (const option of describedOptions(command)) expect(option.about, `--${option.name}`).not.toBe('');
    },
  );

  it('use one name for one thing', () => {
    const meanings = new Map<string, string>();
    for (const command of commands)
      for (const { name, value } of describedOptions(command)) {
        expect(meanings.get(name) ?? value, `--${name} of ${command.name}`).toBe(value);
        meanings.set(name, value);
      }
    // A picture, a file of data, the answer for machines: the same words everywhere.
    for (const other of ['plot', 'svg', 'out', 'file']) expect(meanings.has(other)).toBe(false);
  });
});

describe('exit statuses and streams', () => {
  it('bad input is 2, said on standard error alone', () => {
    for (const args of [[], ['search', 'XX', '--rnage', '3'], ['search', 'XX + $', '--range', '3']]) {
      const { stdout, stderr, status } = holdfast(args);
      expect(status, args.join(' ')).toBe(2);
      if (args.length > 0) expect([stdout, stderr !== ''], args.join(' ')).toEqual(['', true]);
    }
  });

  it('a search writes what it is asked for', () => {
    const file = (name: string) => join(scratch, name);
    const { stdout, stderr, status } = holdfast(
      [
        'search',
        'ZZ + X + 1/2 Z',
        '--range',
        '3',
        '--latex',
        '--report',
        file('r.html'),
        '--picture',
        file('p.svg'),
        '--certificate',
        file('c.json'),
      ],
      { FORCE_COLOR: '1' },
    );
    expect([status, stderr]).toEqual([0, '']);
    // biome-ignore lint/suspicious/noControlCharactersInRegex: no terminal, no escape sequences
    expect(stdout).not.toMatch(/\u001b/);
    expect(stdout).toMatch(/^\\documentclass/);
    expect(readFileSync(file('p.svg'), 'utf8')).toMatch(/^<svg/);
    const { stdout: accepted } = holdfast(['check', file('c.json')]);
    expect(readFileSync(file('r.html'), 'utf8')).toContain(accepted.trim().replace('accepted ', ''));
  });
});

describe('completion', () => {
  const has = (shell: string) => spawnSync(shell, ['-c', 'true']).status === 0;
  for (const shell of ['zsh', 'fish'])
    if (!has(shell)) console.warn(`left out: completion in ${shell} needs the Debian package ${shell}`);

  it('in bash offers commands, options and values', async () => {
    writeFileSync(join(scratch, 'c.bash'), await script('bash'));
    const complete = (words: readonly string[]) =>
      spawnSync(
        'bash',
        [
          '-c',
          `source ${join(scratch, 'c.bash')}; COMP_WORDS=("$@"); COMP_CWORD=$(($# - 1)); _holdfast; echo "\${COMPREPLY[*]}"`,
          'bash',
          ...words,
        ],
        {
          encoding: 'utf8',
          cwd: scratch,
        },
      ).stdout.trim();
    expect(complete(['holdfast', 'sea'])).toBe('search');
    expect(complete(['holdfast', 'search', '--re'])).toBe('--report');
    expect(complete(['holdfast', 'search', '--range', ''])).toBe('');
    expect(complete(['holdfast', 'search', '--report', 'c.b'])).toBe('c.bash');
    expect(complete(['holdfast', 'completion', 'f'])).toBe('fish');
    expect(complete(['holdfast', 'check', 'c.b'])).toBe('c.bash');
  });

  it.skipIf(!has('zsh'))('in zsh is a script that loads', async () => {
    writeFileSync(join(scratch, '_holdfast'), await script('zsh'));
    const { stdout, stderr } = spawnSync(
      'zsh',
      [
        '-f',
        '-c',
        `fpath=(${scratch} $fpath); autoload -Uz compinit; compinit -u -D; whence -w _holdfast; print $_comps[holdfast]; autoload +X _holdfast; print ok`,
      ],
      { encoding: 'utf8' },
    );
    expect([stdout.trim().split('\n').slice(-2), stderr]).toEqual([['_holdfast', 'ok'], '']);
  });

  it.skipIf(!has('fish'))('in fish offers commands and options', async () => {
    writeFileSync(join(scratch, 'c.fish'), await script('fish'));
    const complete = (line: string) =>
      spawnSync(
        'fish',
        ['--no-config', '-c', `source ${join(scratch, 'c.fish')}; complete -C ${JSON.stringify(line)}`],
        { encoding: 'utf8' },
      ).stdout;
    expect(complete('holdfast sea')).toMatch(/^search\t/m);
    expect(complete('holdfast search --rep')).toMatch(/^--report\t/m);
    expect(complete('holdfast completion ')).toMatch(/^zsh/m);
  });
});
