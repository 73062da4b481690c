/** Files that a command writes: whole or not at all, however long they are. */
import { randomBytes } from 'node:crypto';
import { open, rename, rm } from 'node:fs/promises';
import { CancelledError, HoldfastError, show } from '../errors.ts';

/** Characters gathered before they are written, and the pace at which the event loop gets its turn. */
const BLOCK = 2 ** 16;
const PARTS = 2 ** 12;

/**
 * Streams parts to a file. They go to a scratch file beside it, which takes its name in the end: what was there before stays until
 * then, and also after a failure.
 *
 * @param who the option or command at fault, for messages
 * @throws CancelledError when `signal` fires; HoldfastError when the file cannot be written
 */
export async function writeFileWhole(
  who: string,
  file: string,
  parts: Iterable<string>,
  signal: AbortSignal,
): Promise<void> {
  const scratch = `${file}.${randomBytes(4).toString('hex')}.part`;
  try {
    const handle = await open(scratch, 'wx');
    try {
      let block = '';
      let count = 0;
      for (const part of parts) {
        block += part;
        if (++count % PARTS === 0) await giveWay(who, signal);
        if (block.length < BLOCK) continue;
        await handle.write(block);
        block = '';
      }
      await handle.write(block);
      await handle.sync();
    } finally {
      await handle.close();
    }
    await rename(scratch, file);
  } catch (error) {
    await rm(scratch, { force: true });
    if (error instanceof HoldfastError) throw error;
    throw new HoldfastError(`${who}: cannot write ${show(file)}: ${(error as Error).message}`);
  }
}

/** Lets the event loop turn once. @throws CancelledError when `signal` has fired */
export async function giveWay(who: string, signal: AbortSignal): Promise<void> {
  await new Promise((resolve) => setImmediate(resolve));
  if (signal.aborted) throw new CancelledError(who);
}
