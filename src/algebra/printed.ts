/** The hook by which Node's console asks an object for its printed form; other runtimes ignore it. */
export const INSPECT: unique symbol = Symbol.for('nodejs.util.inspect.custom') as never;

/** Gives a plain object a short form for a console. It stays out of sight of copies, comparisons and JSON. */
export function printedAs<T extends object>(object: T, text: (object: T) => string): T {
  return Object.defineProperty(object, INSPECT, { value: () => text(object) });
}

/** The beginning of a long text, with what is left out said behind it. */
export function clipped(text: string, rest: string): string {
  return text.length <= CLIP ? text : `${text.slice(0, text.lastIndexOf(' ', CLIP))} … ${rest}`;
}

const CLIP = 80;
