/**
 * Reading a certificate as docs/certificate.md, "Form", prescribes: canonical JSON of objects, arrays, plain strings and natural
 * numbers, nothing else. Whatever is read is written again and compared byte by byte, so two texts never mean the same.
 */

/** The text has not the form of a certificate: status 2. */
export class Malformed extends Error {}

/** The text has the form of a certificate, and what it says is wrong or not proved: status 1. */
export class Rejected extends Error {}

/** Longest text that is read, and deepest nesting: hostile input stays cheap. */
export const MAX_LENGTH = 2 ** 26;
const MAX_DEPTH = 8;

export type Value = string | number | readonly Value[] | { readonly [key: string]: Value };

/** @throws Malformed unless the text is the canonical serialisation of a value, and one line feed */
export function parseCanonical(text: string): Value {
  if (text.length > MAX_LENGTH) throw new Malformed(`longer than ${MAX_LENGTH} characters`);
  if (!/^[\n -~]*$/.test(text)) throw new Malformed('a character that is not printable ASCII');
  checkDepth(text);
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch {
    throw new Malformed('not JSON, or cut short');
  }
  if (`${serialise(value)}\n` !== text) throw new Malformed('not in canonical form');
  return value as Value;
}

function checkDepth(text: string): void {
  let depth = 0;
  let quoted = false;
  for (let i = 0; i < text.length; i++) {
    const code = text.charCodeAt(i);
    // Strings hold no escapes, so every quotation mark opens or closes one.
    if (code === 0x5c) throw new Malformed('an escape in a string');
    if (code === 0x22) quoted = !quoted;
    else if (quoted) continue;
    else if (code === 0x5b || code === 0x7b) {
      if (++depth > MAX_DEPTH) throw new Malformed(`nested deeper than ${MAX_DEPTH}`);
    } else if (code === 0x5d || code === 0x7d) depth--;
  }
}

function serialise(value: unknown): string {
  if (typeof value === 'string') return `"${value}"`;
  if (typeof value === 'number') {
    if (!Number.isSafeInteger(value) || value < 0 || Object.is(value, -0))
      throw new Malformed('a number that is not a natural number below 2^53');
    return String(value);
  }
  if (Array.isArray(value)) return `[${value.map(serialise).join(',')}]`;
  if (typeof value !== 'object' || value === null)
    throw new Malformed('a value that is not an object, an array, a string or a natural number');
  return `{${Object.entries(value)
    .map(([key, entry]) => `"${key}":${serialise(entry)}`)
    .join(',')}}`;
}

/** The fields of an object, which must be these, in this order. */
export function fields<K extends string>(value: Value, keys: readonly K[], what: string): Record<K, Value> {
  if (typeof value !== 'object' || Array.isArray(value)) throw new Malformed(`${what} is not an object`);
  const found = Object.keys(value);
  if (found.length !== keys.length || found.some((key, i) => key !== keys[i]))
    throw new Malformed(`${what} does not have the fields ${keys.join(', ')}, in this order`);
  return value as Record<K, Value>;
}

export function list(value: Value, what: string, most: number): readonly Value[] {
  if (!Array.isArray(value)) throw new Malformed(`${what} is not an array`);
  if (value.length > most) throw new Malformed(`${what} has more than ${most} entries`);
  return value;
}

export function natural(value: Value, what: string, least: number, most: number): number {
  if (typeof value !== 'number' || value < least || value > most)
    throw new Malformed(`${what} is not a natural number from ${least} to ${most}`);
  return value;
}

export function string(value: Value, what: string): string {
  if (typeof value !== 'string') throw new Malformed(`${what} is not a string`);
  return value;
}

/** An exact rational: integers, numerator and positive denominator in lowest terms. */
export interface Fraction {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

/** Digits of a numerator or denominator: conversion from decimal costs their square. */
const MAX_DIGITS = 10_000;

/** `p` or `p/q` in lowest terms, q ≥ 2, p ≠ 0, no leading zeros. */
export function coefficient(value: Value, what: string): Fraction {
  const match = /^(-?[1-9][0-9]*)(?:\/([1-9][0-9]*))?$/.exec(string(value, what));
  if (match === null) throw new Malformed(`${what} is not a fraction other than 0`);
  const [, p, q = '1'] = match;
  if (p!.length > MAX_DIGITS || q.length > MAX_DIGITS)
    throw new Malformed(`${what} has more than ${MAX_DIGITS} digits`);
  const fraction = { numerator: BigInt(p!), denominator: BigInt(q) };
  if ((match[2] !== undefined && q === '1') || gcd(fraction.numerator, fraction.denominator) !== 1n)
    throw new Malformed(`${what} is not in lowest terms`);
  return fraction;
}

export function gcd(a: bigint, b: bigint): bigint {
  let [x, y] = [a < 0n ? -a : a, b < 0n ? -b : b];
  while (y !== 0n) [x, y] = [y, x % y];
  return x;
}
