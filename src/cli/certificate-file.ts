/** Certificates on disk: read with a bound, check with a progress line. */
import { readFile, stat } from 'node:fs/promises';
import { check, type Verdict } from '../check/check.ts';
import { CancelledError, InputError, show } from '../errors.ts';
import type { CommandInput } from './command.ts';
import { shareLine } from './progress.ts';
import { textFromBytes } from './standalone.ts';

/** As in the checker: a longer file is no certificate, and is not read. */
const MAX_BYTES = 2 ** 26;

/** The text of the one file a command line names. @throws InputError for none, two, or an unreadable one */
export async function certificateFromOptions({
  positionals,
}: Pick<CommandInput, 'positionals'>): Promise<string> {
  const [file, another] = positionals;
  if (file === undefined || another !== undefined)
    throw new InputError(
      'command line',
      'the file of one certificate',
      file === undefined ? 'none' : show(another),
    );
  try {
    if ((await stat(file)).size > MAX_BYTES) throw new InputError(file, `at most ${MAX_BYTES} bytes`, 'more');
    return textFromBytes(await readFile(file));
  } catch (error) {
    if (error instanceof InputError) throw error;
    throw new InputError('certificate', 'a readable file', `${show(file)}: ${(error as Error).message}`);
  }
}

/** @throws CancelledError on an interrupt */
export async function checkWithProgress(text: string, input: CommandInput): Promise<Verdict> {
  const line = shareLine(input, 'checking');
  try {
    return await check(text, { onProgress: line.show, signal: input.signal });
  } catch (error) {
    if (input.signal.aborted) throw new CancelledError('check');
    throw error;
  } finally {
    line.clear();
  }
}
