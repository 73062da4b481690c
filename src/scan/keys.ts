/** JSON with a key twice in one object: parsers keep the last one in silence, which loses what the author wrote. */
import { InputError, show } from '../errors.ts';

/** Deepest nesting; far above any document of this program. */
const MAX_DEPTH = 64;

/**
 * @param text JSON, or what should be: other faults are left to the parser
 * @throws InputError for a key that one object has twice
 */
export function refuseRepeatedKeys(text: string, who: string): void {
  const open: (Set<string> | null)[] = [];
  // A string with its colon is a key; every other string is passed over whole.
  for (const [token, key] of text.matchAll(/("(?:[^"\\]|\\.)*")\s*:|"(?:[^"\\]|\\.)*"|[[\]{}]/gs)) {
    if (token === '{') open.push(new Set());
    else if (token === '[') open.push(null);
    else if (token === '}' || token === ']') open.pop();
    if (open.length > MAX_DEPTH) throw new InputError(who, `at most ${MAX_DEPTH} levels of nesting`, 'more');
    const keys = open.at(-1);
    if (key === undefined || !keys) continue;
    const name = nameOf(key);
    if (keys.has(name)) throw new InputError(who, 'every key once', `${show(name)} twice in one object`);
    keys.add(name);
  }
}

function nameOf(quoted: string): string {
  try {
    return JSON.parse(quoted) as string;
  } catch {
    return quoted;
  }
}
