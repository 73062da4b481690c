/**
 * The trusted checker: decides from a certificate alone whether its claim is proved. It never searches, shares no code with the
 * search, and imports nothing from outside this folder. The rules are those of docs/certificate.md; C1, E2, … are its step numbers.
 */
import { fields, Malformed, parseCanonical, Rejected, string } from './document.ts';
import { checkEveryRange, EVERY_RANGE } from './every-range.ts';
import { checkEveryRangeModular, EVERY_RANGE_MODULAR } from './every-range-modular.ts';
import { checkExhaustive, KIND, type Parts } from './exhaustive.ts';
import { checkGrowth, GROWTH } from './growth.ts';
import { checkHalfSteps, HALF_STEPS } from './half-steps.ts';
import { sha256 } from './sha256.ts';

export type Verdict =
  | {
      readonly status: 'accepted';
      /** SHA-256 of the certificate: its citable id, 64 hexadecimal digits. */
      readonly id: string;
      readonly kind: string;
      /** What is proved, in words. */
      readonly statement: string;
    }
  | { readonly status: 'rejected'; readonly reason: string }
  | { readonly status: 'malformed'; readonly reason: string };

export interface CheckOptions {
  /** Called about every 50 milliseconds with the share of the work done. */
  readonly onProgress?: (done: number) => void;
  readonly signal?: AbortSignal;
}

/** The kinds of evidence, each a file of this folder and a section of the document. */
const KINDS: ReadonlyMap<string, (parts: Parts) => Generator<number, string>> = new Map([
  [KIND, checkExhaustive],
  [EVERY_RANGE, checkEveryRange],
  [EVERY_RANGE_MODULAR, checkEveryRangeModular],
  [GROWTH, checkGrowth],
  [HALF_STEPS, checkHalfSteps],
]);

/** The check, step by step: yields the share of the work done. Never throws for a bad certificate, whatever is in it. */
export function* checking(text: string): Generator<number, Verdict> {
  try {
    const top = parseCanonical(text);
    const document = fields(
      top,
      ['certificate', 'version', 'kind', 'tool', 'model', 'claim', 'charges', 'evidence'],
      'the certificate',
    );
    if (document.certificate !== 'conserved quantities of a spin chain')
      throw new Malformed('not a certificate of conserved quantities');
    if (document.version !== 1) throw new Malformed('a version of the format other than 1');
    const kind = string(document.kind, 'kind');
    if (!/^[A-Za-z0-9][A-Za-z0-9 .+-]{0,99}$/.test(string(document.tool, 'tool')))
      throw new Malformed('tool is not a name and a version');
    const check = KINDS.get(kind);
    if (check === undefined) throw new Malformed('a kind that this checker does not know');
    const statement = yield* check(document);
    return { status: 'accepted', id: sha256(text), kind, statement };
  } catch (error) {
    if (error instanceof Malformed) return { status: 'malformed', reason: error.message };
    if (error instanceof Rejected) return { status: 'rejected', reason: error.message };
    if (error instanceof RangeError)
      return { status: 'rejected', reason: `more than this machine can hold: ${error.message}` };
    throw error;
  }
}

/** Checks a certificate in one go. */
export function checkNow(text: string): Verdict {
  const steps = checking(text);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
  }
}

/**
 * Checks a certificate and gives way to other work of the program about every 50 milliseconds.
 *
 * @throws the reason of `signal` when it fires
 */
export async function check(text: string, { onProgress, signal }: CheckOptions = {}): Promise<Verdict> {
  const steps = checking(text);
  let last = Date.now();
  for (;;) {
    signal?.throwIfAborted();
    const step = steps.next();
    if (step.done) return step.value;
    if (Date.now() - last < 50) continue;
    onProgress?.(step.value);
    await new Promise((resolve) => setTimeout(resolve, 0));
    last = Date.now();
  }
}
