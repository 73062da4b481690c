#!/usr/bin/env node
/** The `holdfast` command: picks the subcommand, words errors, sets the exit status. */
import { parseArgs } from 'node:util';
import { VERSION } from '../certificate/version.ts';
import { HoldfastError, InputError } from '../errors.ts';
import { type Command, type CommandInput, Exit } from './command.ts';
import { algebra } from './commands/algebra.ts';
import { bound } from './commands/bound.ts';
import { check } from './commands/check.ts';
import { cite } from './commands/cite.ts';
import { collect } from './commands/collect.ts';
import { completionCommand } from './commands/completion.ts';
import { currents } from './commands/currents.ts';
import { decide } from './commands/decide.ts';
import { demo } from './commands/demo.ts';
import { family } from './commands/family.ts';
import { fermions } from './commands/fermions.ts';
import { ladder } from './commands/ladder.ts';
import { matrix } from './commands/matrix.ts';
import { residual } from './commands/residual.ts';
import { scan } from './commands/scan.ts';
import { search } from './commands/search.ts';

const COMMANDS: readonly Command[] = [
  search,
  decide,
  family,
  ladder,
  residual,
  currents,
  algebra,
  bound,
  fermions,
  check,
  cite,
  matrix,
  scan,
  collect,
  completionCommand(() => COMMANDS),
  demo,
];

const USAGE = `holdfast finds all local conserved quantities of a spin chain up to a range, exactly, or proves that there are none.

  holdfast search "XX + YY + 3 X" --range 6        what is conserved, up to a range
  holdfast decide "ZZ + X + 1/2 Z"                 the same for every range at once
  holdfast COMMAND --help                         options and examples of a command
  holdfast --version

${COMMANDS.map((c) => `  ${c.name.padEnd(14)}${c.summary}`).join('\n')}

Exit status, for every command: 0 a complete answer, or accepted; 1 a failure: no complete answer, rejected, cancelled, out of memory;
2 bad input. Answers go to standard output, reasons and progress to standard error. Colour appears on a terminal only, never says anything
that the words do not, and NO_COLOR switches it off. Interrupt (Ctrl+C) cancels.
`;

export async function main(argv: readonly string[]): Promise<number> {
  const [name, ...rest] = argv;
  if (name === 'help' && COMMANDS.some((c) => c.name === rest[0])) return main([rest[0]!, '--help']);
  if (name === undefined || name === '--help' || name === '-h' || name === 'help') {
    process.stdout.write(USAGE);
    return name === undefined ? Exit.input : Exit.done;
  }
  if (name === '--version') {
    process.stdout.write(`holdfast ${VERSION}\n`);
    return Exit.done;
  }
  const command = COMMANDS.find((c) => c.name === name);
  const cancel = new AbortController();
  const interrupt = () => cancel.abort();
  process.once('SIGINT', interrupt);
  try {
    if (command === undefined)
      throw new InputError('holdfast', `a command: ${COMMANDS.map((c) => c.name).join(', ')}`, name);
    return await command.run(inputOf(command, rest, cancel.signal));
  } catch (error) {
    if (error instanceof HelpWanted) {
      process.stdout.write(`${command?.help ?? USAGE}\n`);
      return Exit.done;
    }
    if (!(error instanceof HoldfastError)) throw error;
    process.stderr.write(`${error.message}\n`);
    return error instanceof InputError ? Exit.input : Exit.failed;
  } finally {
    process.removeListener('SIGINT', interrupt);
  }
}

class HelpWanted extends Error {}

/**
 * A formula may begin with a minus sign: one dash and a Pauli letter somewhere behind it. No option looks so (`-h` is the only short
 * one); a blank before it keeps the option parser away.
 */
const FORMULA = /^-(?!-).*[IXYZ]/s;

function inputOf(command: Command, args: readonly string[], signal: AbortSignal): CommandInput {
  let parsed: ReturnType<typeof parseArgs>;
  try {
    parsed = parseArgs({
      args: args.map((arg) => (FORMULA.test(arg) ? ` ${arg}` : arg)),
      options: { ...command.options, help: { type: 'boolean', short: 'h' } },
      allowPositionals: true,
      strict: true,
    });
  } catch (error) {
    throw new InputError(
      command.name,
      `options as in \`holdfast ${command.name} --help\``,
      (error as Error).message,
    );
  }
  if (parsed.values['help'] === true) throw new HelpWanted();
  return {
    values: parsed.values as CommandInput['values'],
    positionals: parsed.positionals.map((arg) => (FORMULA.test(arg.slice(1)) ? arg.slice(1) : arg)),
    out: (text) => void process.stdout.write(text),
    note: (text) => void process.stderr.write(text),
    interactive: process.stderr.isTTY === true,
    width: Math.min(140, Math.max(60, process.stdout.columns ?? 100)),
    colour: process.stdout.isTTY === true && !process.env['NO_COLOR'],
    signal,
  };
}

process.exitCode = await main(process.argv.slice(2));
