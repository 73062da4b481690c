/** What to put into a paper: a BibTeX entry and a paragraph, from a certificate that has been accepted. */

/** The fields of a certificate that a citation repeats; docs/certificate.md has them all. */
interface Cited {
  readonly tool: string;
  readonly model: {
    readonly cell: number;
    readonly terms: readonly (readonly [word: string, coefficient: string])[];
  };
  readonly claim: { readonly range: number; readonly statement: string; readonly assumes: readonly string[] };
}

/** Terms of a Hamiltonian that a paragraph spells out; the certificate has the rest. */
const MAX_TERMS = 24;

/**
 * @param text an accepted certificate
 * @param accepted what the checker said about this text
 * @param file its name, for the command line
 */
export function citation(text: string, accepted: { readonly id: string }, file: string): string {
  const { tool, model, claim } = JSON.parse(text) as Cited;
  const { id } = accepted;
  const formula = model.terms
    .slice(0, MAX_TERMS)
    .map(([word, c], i) => {
      const size = c.replace('-', '');
      const sign = c.startsWith('-') ? (i === 0 ? '-' : ' - ') : i === 0 ? '' : ' + ';
      return `${sign}${size === '1' ? '' : `${size} `}${word}`;
    })
    .join('');
  const rest =
    model.terms.length > MAX_TERMS
      ? ` + ${model.terms.length - MAX_TERMS} more terms, see the certificate`
      : '';
  const title = `Certificate: all conserved quantities of range at most ${claim.range} of the chain with density ${formula}${rest}`;
  return `@misc{holdfast-${id.slice(0, 12)},
  title  = {{${title}}},
  note   = {Machine-checkable certificate, format version 1, sha256:${id}},
  howpublished = {Written by ${tool}; check with \\texttt{holdfast check}},
}

Let H be the sum of all translates of ${formula}${rest} (words of Pauli letters along the spins, ${model.cell === 1 ? 'one spin' : `${model.cell} spins`} a cell).
${claim.statement}
${claim.assumes.at(-1)} Absence of local charges supports thermalisation or chaos; by itself it proves neither.
The proof is a certificate: the listed charges commute with H exactly, and the rank of the commutator equations modulo a prime
leaves room for no others. It was written by ${tool} and has the id

  sha256:${id}

which is the SHA-256 of the file. To check it with code that shares nothing with the search:

  holdfast check ${/^[\w./+-]+$/.test(file) ? file : `'${file.replaceAll("'", "'\\''")}'`}
`;
}
