/**
 * The one error hierarchy. A message says who refuses, what was expected, what it got and, for text, where.
 * Expected outcomes of a computation (an unlucky prime, a certificate that is rejected) are return values, not errors.
 */
export class HoldfastError extends Error {
  override name = 'HoldfastError';
}

/** Input that does not say what it must. Nothing has been computed or changed when this is thrown. */
export class InputError extends HoldfastError {
  override name = 'InputError';

  /**
   * @param who the part that refuses, e.g. `formula`
   * @param expected what it can take
   * @param got what it was given
   * @param source for text: the whole text and the offset of the first character at fault
   */
  constructor(
    readonly who: string,
    readonly expected: string,
    readonly got: string,
    readonly source?: { readonly text: string; readonly offset: number },
  ) {
    super(`${who}: expected ${expected}, got ${got}${source === undefined ? '' : pointAt(source)}`);
  }
}

/** A run that would not fit: the message says what it needs, what there is, and how to override. */
export class LimitError extends HoldfastError {
  override name = 'LimitError';
}

/** The caller's `AbortSignal` fired. */
export class CancelledError extends HoldfastError {
  override name = 'CancelledError';
  constructor(what: string) {
    super(`${what}: cancelled`);
  }
}

/** A result failed its own exact re-check. Never expected; nothing is returned. */
export class VerificationError extends HoldfastError {
  override name = 'VerificationError';
}

/** Longest excerpt of a user's text that an error message repeats. */
const EXCERPT = 60;

function pointAt({ text, offset }: { text: string; offset: number }): string {
  const start = Math.max(0, offset - EXCERPT / 2);
  const excerpt = text.slice(start, start + EXCERPT).replace(/[\s\p{Cc}]/gu, ' ');
  const head = start > 0 ? '…' : '';
  return ` at position ${offset + 1}\n  ${head}${excerpt}\n  ${' '.repeat(head.length + offset - start)}^`;
}

/** A short printable form of a value from outside, for the `got` of an error. */
export function show(value: unknown): string {
  if (typeof value === 'string') return value === '' ? 'an empty text' : JSON.stringify(clip(value));
  if (typeof value === 'bigint') return clip(String(value));
  if (value === null || value === undefined || typeof value === 'number' || typeof value === 'boolean')
    return String(value);
  return Array.isArray(value) ? `an array of ${value.length}` : `a value of type ${typeof value}`;
}

function clip(text: string): string {
  return text.length > EXCERPT ? `${text.slice(0, EXCERPT)}… (${text.length} characters)` : text;
}
