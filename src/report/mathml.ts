/** Densities as MathML, with the elements of MathML Core alone: browsers show them without help. */
import type { Operator } from '../algebra/operator.ts';
import { type Rational, textFromRational } from '../algebra/rational.ts';
import type { Chain } from '../lattice/chain.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { linesOf, type Token, tokensOf } from './expression.ts';
import { type GroupedDensity, groupTerms, wordText } from './grouping.ts';

const LINE = 68;
/** Space between the columns of the name and of the sum: none. */
const CELL = 'style="padding:0.15em 0;text-align:left"';

/** `name = Σ_j …` as one block; browsers do not break lines in mathematics, so they are broken here. */
export function mathmlEquation(name: string, h: Hamiltonian, density: Operator | GroupedDensity): string {
  const grouped = 'groups' in density ? density : groupTerms(h, density);
  const lines = linesOf(h.chain, tokensOf(grouped), LINE);
  const rows = lines.map((line, i) => {
    const body = line.map((token) => mathmlToken(h.chain, token)).join('');
    const head =
      i === 0
        ? `<mrow>${mathmlName(name)}<mo>=</mo><munder><mo>∑</mo><mi>j</mi></munder><mspace width="0.3em"/></mrow>`
        : '';
    return `<mtr><mtd ${CELL}>${head}</mtd><mtd ${CELL}><mrow>${body}</mrow></mtd></mtr>`;
  });
  return `<math display="block"><mtable displaystyle="true">${rows.join('')}</mtable></math>`;
}

/** `Q12` with its number below the line. */
export function mathmlName(name: string): string {
  const [, letter, index] = /^([A-Z])(\d*)$/.exec(name) ?? [name, name, ''];
  return index === '' ? `<mi>${letter}</mi>` : `<msub><mi>${letter}</mi><mn>${index}</mn></msub>`;
}

/** Σ c_i Q_i without the zeros. */
export function mathmlCombination(name: string, coefficients: readonly Rational[]): string {
  let body = '';
  coefficients.forEach((c, i) => {
    if (c.numerator === 0n) return;
    const size = { numerator: c.numerator < 0n ? -c.numerator : c.numerator, denominator: c.denominator };
    const factor = size.numerator === 1n && size.denominator === 1n ? '' : mathmlRational(size);
    body += `${c.numerator < 0n ? '<mo>−</mo>' : body === '' ? '' : '<mo>+</mo>'}${factor}${mathmlName(`Q${i + 1}`)}`;
  });
  return `<math><mrow>${mathmlName(name)}<mo>=</mo>${body}</mrow></math>`;
}

function mathmlToken(chain: Chain, token: Token): string {
  switch (token.kind) {
    case 'plus':
      return '<mo form="infix">+</mo>';
    case 'minus':
      return '<mo form="infix">−</mo>';
    case 'negative':
      return '<mo form="prefix">−</mo>';
    case 'open':
      return '<mo form="prefix" stretchy="false">(</mo>';
    case 'close':
      return '<mo form="postfix" stretchy="false">)</mo>';
    case 'factor':
      return `${mathmlRational(token.value)}<mspace width="0.2em"/>`;
    case 'word':
      return wordMathml(chain, wordText(chain, token.word));
  }
}

function wordMathml(chain: Chain, word: string): string {
  const cells = chain.cell === 1 ? [word] : word.match(new RegExp(`.{${chain.cell}}`, 'g'))!;
  return cells.map((cell) => `<mi mathvariant="normal">${cell}</mi>`).join('<mspace width="0.15em"/>');
}

function mathmlRational(value: Rational): string {
  if (value.denominator === 1n) return `<mn>${textFromRational(value)}</mn>`;
  return `<mfrac><mn>${value.numerator}</mn><mn>${value.denominator}</mn></mfrac>`;
}
