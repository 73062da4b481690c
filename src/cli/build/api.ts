/** Writes the API reference from the declarations that the compiler makes: every exported name, its docstring, its signature. */
import { readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** A declaration at the top of a `.d.ts` file. */
interface Declaration {
  readonly doc: string;
  readonly code: string;
}

/** What each part of the library is for, in the order of the reference. */
const PARTS: readonly (readonly [folder: string, about: string])[] = [
  ['model', 'From a formula or a document to a Hamiltonian; the catalogue.'],
  ['search', 'All charges up to a range.'],
  ['certificate', 'The proof as a document.'],
  ['check', 'The trusted checker.'],
  ['theory', 'Statements beyond a single range.'],
  ['physics', 'Uses of charges.'],
  ['scan', 'One task at many Hamiltonians.'],
  ['report', 'Output for people.'],
  ['lattice', 'Cells, translations, ranges.'],
  ['algebra', 'Pauli strings, operators, exact numbers.'],
  ['errors', 'What is thrown.'],
];

/** The reference, from a folder with `index.d.ts`. @throws Error when a name has no declaration or a folder no part */
export async function apiReference(dist: string): Promise<string> {
  const index = await readFile(join(dist, 'index.d.ts'), 'utf8');
  const parts = new Map<string, string[]>();
  for (const [, names, target] of index.matchAll(
    /export (?:type )?\{([^}]*)\} from '\.\/([^']+)\.(?:js|ts)';/g,
  )) {
    const declarations = declarationsOf(await readFile(join(dist, `${target}.d.ts`), 'utf8'));
    const folder = target!.split('/')[0]!;
    const entries = parts.get(folder) ?? [];
    parts.set(folder, entries);
    for (const name of names!
      .split(',')
      .map((n) => n.replace(/^\s*type\s+/, '').trim())
      .filter((n) => n !== '')) {
      const found = declarations.get(name);
      if (found === undefined) throw new Error(`${target}: no declaration of ${name}`);
      entries.push(entry(name, `${target}.ts`, found));
    }
  }
  const unknown = [...parts.keys()].filter((folder) => !PARTS.some(([known]) => known === folder));
  if (unknown.length > 0) throw new Error(`the reference has no part for ${unknown.join(', ')}`);
  const body = PARTS.filter(([folder]) => parts.has(folder)).map(
    ([folder, about]) => `## ${folder}\n\n${about}\n\n${parts.get(folder)!.join('\n\n')}`,
  );
  return `# API reference\n\nWritten by \`npm run docs:api\` from the docstrings; do not edit. Everything here is exported by \`holdfast\`. Ranges count cells, coefficients are\nexact, and a density stands for the sum of its translates, unless a line says otherwise.\n\n${body.join('\n\n')}\n`;
}

/** Top-level declarations by name: a docstring right before, then text up to the end of the statement. */
function declarationsOf(text: string): Map<string, Declaration> {
  const found = new Map<string, Declaration>();
  const head =
    /(?:\/\*\*((?:(?!\*\/)[\s\S])*)\*\/\n)?^export (?:declare )?(?:abstract )?(?:function\*?|class|interface|type|const|enum) (\w+)/gm;
  for (const match of text.matchAll(head)) {
    const [whole, own, name] = match;
    // A class that fills a file is described at its head.
    const doc =
      own ?? (whole.includes('class ') ? (/^\/\*\*((?:(?!\*\/)[\s\S])*)\*\//.exec(text)?.[1] ?? '') : '');
    const start = match.index + whole.lastIndexOf('export ');
    const code = text
      .slice(start, endOfStatement(text, start))
      .replace(/^export (?:declare )?/, '')
      .replace(/^ +(?:private|#)[^\n]*\n/gm, '');
    const before = found.get(name!);
    found.set(
      name!,
      before === undefined
        ? { doc: proseOf(doc), code }
        : { doc: before.doc, code: `${before.code}\n${code}` },
    );
  }
  for (const [, names, source] of text.matchAll(/^export \{([^}]*)\}(?: from '([^']+)')?;$/gm))
    for (const name of names!.split(',').map((n) => n.trim()))
      if (!found.has(name))
        found.set(name, {
          doc: `From the package ${source ?? 'fraction.js'}, handed through.`,
          code: `class ${name}`,
        });
  return found;
}

/** Past the brace that closes a body, or past the semicolon. Comments are skipped. */
function endOfStatement(text: string, start: number): number {
  let depth = 0;
  for (let i = start; i < text.length; i++) {
    if (text.startsWith('/*', i)) i = text.indexOf('*/', i) + 1;
    else if ('{(['.includes(text[i]!)) depth++;
    else if ('})]'.includes(text[i]!)) {
      depth--;
      if (depth === 0 && text[i] === '}' && text[i + 1] === '\n') return i + 1;
    } else if (text[i] === ';' && depth === 0) return i + 1;
  }
  return text.length;
}

/** A docstring without its stars; `@` tags become a list. */
function proseOf(doc: string): string {
  const lines = doc
    .split('\n')
    .map((line) => line.replace(/^\s*\* ?/, '').trim())
    .join('\n')
    .trim();
  return lines
    .replace(/^@param (\w+) /gm, '- `$1`: ')
    .replace(/(?:^|(?<=\. ))@throws /gm, '\n- Errors: ')
    .replace(/(?:^|(?<=\. ))@returns /gm, '\n- Returns ')
    .replace(/\n{3,}/g, '\n\n')
    .trim();
}

function entry(name: string, file: string, { doc, code }: Declaration): string {
  return `### ${name}\n\n\`src/${file}\`${doc === '' ? '' : `\n\n${doc}`}\n\n\`\`\`typescript\n${code.trim()}\n\`\`\``;
}

const [, program, dist, target] = process.argv;
if (program === fileURLToPath(import.meta.url) && dist !== undefined && target !== undefined)
  await writeFile(target, await apiReference(dist));
