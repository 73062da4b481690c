/**
 * The checker as one file, `holdfast-check.mjs`: a module for Node and browsers (`check`, `checkNow`), and in Node a command,
 *
 *     node holdfast-check.mjs FILE
 *
 * One line on stdout and status 0 for an accepted certificate; else one reason on stderr and status 1 (rejected) or 2 (not a
 * certificate, or not readable). It needs no other file and no package.
 */
import { check, checkNow, type Verdict } from '../check/check.ts';

export { check, checkNow, type Verdict };

/** The line on the right stream, and the exit status. */
export function lineOf(verdict: Verdict): { out: string; note: string; status: 0 | 1 | 2 } {
  if (verdict.status === 'accepted') return { out: `accepted sha256:${verdict.id}\n`, note: '', status: 0 };
  if (verdict.status === 'rejected') return { out: '', note: `rejected: ${verdict.reason}\n`, status: 1 };
  return { out: '', note: `not a certificate: ${verdict.reason}\n`, status: 2 };
}

/** One character a byte: what is not ASCII stays visible to the checker, which refuses it. */
export function textFromBytes(bytes: Uint8Array): string {
  return new TextDecoder('latin1').decode(bytes);
}

async function isThisTheProgram(): Promise<boolean> {
  const started = globalThis.process?.argv?.[1];
  if (started === undefined || !import.meta.url.endsWith('/holdfast-check.mjs')) return false;
  const { realpathSync } = await import('node:fs');
  const { pathToFileURL } = await import('node:url');
  return pathToFileURL(realpathSync(started)).href === import.meta.url;
}

if (await isThisTheProgram()) {
  const { readFileSync } = await import('node:fs');
  const [file, another] = process.argv.slice(2);
  if (file === undefined || another !== undefined) {
    process.stderr.write('usage: node holdfast-check.mjs FILE\n');
    process.exitCode = 2;
  } else {
    try {
      const { out, note, status } = lineOf(checkNow(textFromBytes(readFileSync(file))));
      process.stdout.write(out);
      process.stderr.write(note);
      process.exitCode = status;
    } catch (error) {
      process.stderr.write(`${(error as Error).message}\n`);
      process.exitCode = 2;
    }
  }
}
