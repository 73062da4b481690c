/** What a subcommand is: its options, its help, and what it does. One file a command under `commands/`. */
import type { ParseArgsConfig } from 'node:util';

export interface Command {
  readonly name: string;
  /** One line for the list in `holdfast --help`. */
  readonly summary: string;
  /** The page of `holdfast NAME --help`: usage, options, examples, exit status. */
  readonly help: string;
  readonly options: NonNullable<ParseArgsConfig['options']>;
  /** Runs the command; the number is the exit status (see `Exit`). Errors are thrown, `main` words them. */
  run(input: CommandInput): Promise<number>;
}

export interface CommandInput {
  readonly values: Readonly<Record<string, string | boolean | readonly (string | boolean)[] | undefined>>;
  readonly positionals: readonly string[];
  /** Writes to stdout; the answer and nothing else. */
  out(text: string): void;
  /** Writes to stderr; reasons, progress, warnings. */
  note(text: string): void;
  /** A progress line may be drawn: stderr is a terminal. */
  readonly interactive: boolean;
  /** Characters a line of stdout. */
  readonly width: number;
  /** Stdout is a terminal, and NO_COLOR is not set. */
  readonly colour: boolean;
  /** Fires on the first interrupt. */
  readonly signal: AbortSignal;
}

/** Exit statuses, the same for all commands. */
export const Exit = {
  /** A complete answer, or an accepted certificate. */
  done: 0,
  /** A failure: no complete answer, a rejected certificate, out of memory, cancelled. */
  failed: 1,
  /** Bad input: usage, formula, model file; not a certificate. */
  input: 2,
} as const;
