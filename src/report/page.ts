/** A search as one HTML page that needs nothing else: no script, no network, and it prints on paper as it looks. */
import { VERSION } from '../certificate/version.ts';
import type { SearchResult } from '../search/result.ts';
import { citation } from './citation.ts';
import { groupTerms } from './grouping.ts';
import { resultToJson } from './json.ts';
import { labelsOf, labelText } from './labels.ts';
import { escapeMarkup } from './markup.ts';
import { mathmlCombination, mathmlEquation, mathmlName } from './mathml.ts';
import { growthPicture, legendPicture, pictureOfCharge } from './picture.ts';
import { STORY_LIMIT, storyOf, tellLayer, tellStep } from './story.ts';
import { foldGroups, printDensity, restText } from './text.ts';
import { addedByRange, byLemma, CAUTIONS, grouped, strings, validityOf, verdictOf } from './verdict.ts';

export interface PageOptions {
  /** Heading; the model's formula when absent. */
  readonly title?: string;
  /** A certificate that was accepted, to be carried along: its id, and the text itself. */
  readonly certificate?: { readonly id: string; readonly text: string };
  /** Why there is none. */
  readonly noCertificate?: string;
  /** Strings of a charge that are typeset and drawn; the rest is counted, and in the JSON that the page carries. */
  readonly fold?: number;
}

const FOLD = 144;

/** The report on a search as a document. Cost: the story of a small search (see `storyOf`), else the size of the page. */
export function reportPage(result: SearchResult, options: PageOptions = {}): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escapeMarkup(headingOf(result, options))}</title>
<style>${REPORT_STYLE}</style>
</head>
<body>
<main>
${reportBody(result, options)}
</main>
</body>
</html>
`;
}

/** What is inside of the document's `<main>`, for pages with a frame of their own and `REPORT_STYLE`. */
export function reportBody(result: SearchResult, options: PageOptions = {}): string {
  const { certificate, noCertificate, fold = FOLD } = options;
  const { hamiltonian: h, charges, range, expansionOfH } = result;
  const formula = printDensity(h, h.density);
  const sections = [
    section('model', 'Model', [
      mathmlEquation('H', h, h.density),
      `<p>Written <code>${escapeMarkup(formula)}</code>${h.chain.cell === 1 ? '' : ` with ${h.chain.cell} spins a cell`}. A word stands for a product of Pauli matrices on neighbouring spins, and the sum runs over its translates by whole cells. H has range ${h.range}${h.reflection === null ? ' and no reflection symmetry' : ' and is symmetric under reflection'}.</p>`,
    ]),
    section('scope', 'What is shown, and what is not', [
      `<p>${escapeMarkup(validityOf(result))} Couplings are taken exactly as written.</p>`,
      `<ul>${CAUTIONS.map((c) => `<li>${escapeMarkup(c)}</li>`).join('')}<li>Nothing is said about charges of a range above ${range}.</li></ul>`,
    ]),
    section('charges', charges.length === 1 ? 'The charge' : 'Charges', [
      countTable(result),
      expansionOfH === null
        ? `<p>H itself has range ${h.range}, above ${range}, and is not in the list.</p>`
        : `<p>${mathmlCombination('H', expansionOfH)}</p>`,
      ...(charges.length === 0 ? [] : [`<figure class="legend">${legendPicture()}</figure>`]),
      ...charges.map((_, i) => chargeArticle(result, i, fold)),
    ]),
    ...(charges.length > 1
      ? [section('growth', 'How charges grow', [`<figure>${growthPicture(result)}</figure>`])]
      : []),
    section('proof', 'Why there are no others', [
      `<p>The coefficients of ${grouped(result.candidates)} candidate strings are unknowns${byLemma(result)}, and every string in [H, Q] is an equation. ${charges.length === 0 ? 'The' : `From below: ${charges.length === 1 ? 'the charge was' : `the ${charges.length} charges were`} multiplied out with H again, in integers, and ${charges.length === 1 ? 'commutes' : 'they commute'}. From above: the`} rank of the equations modulo the prime ${result.primes[0]} is ${grouped(result.candidates - charges.length)}. A rank modulo a prime is never above the rank over the rationals, so no more than ${charges.length} independent charge${charges.length === 1 ? '' : 's'} can exist.</p>`,
      storySection(result),
    ]),
    section('certificate', 'Certificate', [
      certificate === undefined
        ? `<p>This report carries no certificate${noCertificate === undefined ? '' : ` (${escapeMarkup(noCertificate)})`}. The numbers above can be had again by the same search.</p>`
        : `<p>Id <code>sha256:${escapeMarkup(certificate.id)}</code></p><p><a download="${fileName(certificate.id)}" href="${dataUri(certificate.text)}">Save the certificate</a>: whoever holds it can check the result with code that shares nothing with the search.</p>`,
      `<p><a download="result.json" href="${dataUri(JSON.stringify(resultToJson(result)))}">Save the result as JSON</a>, every string of every charge included.</p>`,
    ]),
    section('cite', 'How to cite', [citationBlock(result, certificate)]),
  ];
  return `<header>
<p class="kind">Search report · range ≤ ${range}</p>
<h1>${escapeMarkup(headingOf(result, options))}</h1>
<p class="verdict">${escapeMarkup(verdictOf(result))}</p>
</header>
${sections.join('\n')}`;
}

function headingOf({ hamiltonian: h }: SearchResult, { title }: PageOptions): string {
  const formula = printDensity(h, h.density);
  return title ?? `Local charges of ${formula.length > 60 ? 'a spin chain' : formula}`;
}

function section(id: string, title: string, body: readonly string[]): string {
  return `<section aria-labelledby="report-${id}">\n<h2 id="report-${id}">${title}</h2>\n${body.join('\n')}\n</section>`;
}

function countTable(result: SearchResult): string {
  const cells = (values: readonly (number | string)[]) => values.map((v) => `<td>${v}</td>`).join('');
  const added = addedByRange(result);
  return `<table><tr><th scope="row">range</th>${cells(added.map((_, j) => j + 1))}</tr><tr><th scope="row">new charges</th>${cells(added)}</tr><tr><th scope="row">up to this range</th>${cells(result.dimensionByRange)}</tr></table>`;
}

function chargeArticle(result: SearchResult, index: number, fold: number): string {
  const charge = result.charges[index]!;
  const name = `Q${index + 1}`;
  const { shown, rest } = foldGroups(groupTerms(result.hamiltonian, charge.density), fold);
  const parity = charge.parity === null ? '' : `, ${charge.parity} under reflection`;
  const note =
    rest.length === 0
      ? ''
      : `<p class="note">${escapeMarkup(restText(rest))}. All of them are in the JSON below.</p>`;
  const label = labelsOf(result)[index];
  const owed = label ? `<p>Kind: ${escapeMarkup(labelText(label))}.</p>` : '';
  return `<article><h3><math>${mathmlName(name)}</math> range ${charge.range}${parity}, ${strings(charge.density.size)}</h3>${owed}
<div class="equation" role="group" tabindex="0" aria-label="${name} in full">${mathmlEquation(name, result.hamiltonian, shown)}</div>${note}
<figure>${pictureOfCharge(charge, result, name, fold)}</figure></article>`;
}

function storySection(result: SearchResult): string {
  const story = storyOf(result);
  if (story === null)
    return `<p class="note">Steps are spelled out for up to ${STORY_LIMIT} candidates; this search has ${grouped(result.candidates)}.</p>`;
  const { hamiltonian: h } = result;
  const layers = story.layers.map(
    (layer) =>
      `<details${layer.steps.length <= 60 ? ' open' : ''}><summary>${escapeMarkup(tellLayer(layer))}</summary><ol>${layer.steps.map((step) => `<li>${escapeMarkup(tellStep(h, step))}</li>`).join('')}</ol></details>`,
  );
  const free = story.free.length;
  return `<h3>Step by step, over the rationals</h3>
<p>c(W) is the coefficient of the word W in Q. An <em>output</em> is a word in [H, Q]; its <em>sources</em> are the words of Q that lead to it. Each output must vanish. Longest outputs first:</p>
${layers.join('\n')}
<p>${free === 0 ? 'No coefficient stays free: there is no charge.' : `${free} coefficient${free === 1 ? ' stays' : 's stay'} free, as many as there are charges.`}</p>`;
}

/** What to write in a paper. */
function citationBlock(result: SearchResult, certificate: PageOptions['certificate']): string {
  if (certificate !== undefined)
    return `<pre>${escapeMarkup(citation(certificate.text, certificate, fileName(certificate.id)))}</pre>`;
  const { hamiltonian: h, range, charges, primes } = result;
  return `<blockquote>holdfast, version ${VERSION}: all local conserved quantities of range ≤ ${range} of <code>${escapeMarkup(printDensity(h, h.density))}</code>${h.chain.cell === 1 ? '' : `, ${h.chain.cell} spins a cell`}; dimension ${charges.length}, primes ${primes.join(', ')}.</blockquote>`;
}

function fileName(id: string): string {
  return `certificate-${id.slice(0, 12)}.json`;
}

function dataUri(text: string): string {
  return `data:application/json;charset=utf-8,${encodeURIComponent(text).replaceAll("'", '%27')}`;
}

/** For `reportBody`: plain, calm, and fit for paper. */
export const REPORT_STYLE = `
:root { color-scheme: light; --ink: #1d2935; --faint: #5b6875; --line: #cdd4db; --wash: #f4f6f8; }
* { box-sizing: border-box; }
body { margin: 0; background: #fff; color: var(--ink); font: 16px/1.55 Charter, "Bitstream Charter", "DejaVu Serif", Georgia, serif; }
main { max-width: 56rem; margin: 0 auto; padding: 2.5rem 1.5rem 4rem; }
header { border-bottom: 3px double var(--ink); padding-bottom: 1rem; }
.kind { margin: 0; color: var(--faint); font-variant: small-caps; letter-spacing: .04em; }
h1 { font-size: 1.6rem; line-height: 1.25; margin: .2rem 0 .6rem; overflow-wrap: anywhere; }
.verdict { font-size: 1.2rem; margin: 0; padding-left: .8rem; border-left: 4px solid var(--ink); }
h2 { font-size: 1.2rem; margin: 2.2rem 0 .6rem; padding-bottom: .2rem; border-bottom: 1px solid var(--line); }
h3 { font-size: 1rem; margin: 1.6rem 0 .4rem; }
code { font-family: ui-monospace, "DejaVu Sans Mono", monospace; font-size: .88em; overflow-wrap: anywhere; }
table { border-collapse: collapse; margin: .6rem 0; display: block; overflow-x: auto; }
th, td { border-bottom: 1px solid var(--line); padding: .2rem .7rem; text-align: right; }
th { text-align: left; font-weight: normal; color: var(--faint); }
.equation { overflow-x: auto; background: var(--wash); padding: .5rem .8rem; }
math { font-size: 1.02em; }
math[display="block"] { width: max-content; margin: 0; }
figure { margin: .6rem 0; overflow-x: auto; }
figure svg { max-width: 100%; height: auto; }
.note { color: var(--faint); }
details { margin: .5rem 0; border-left: 2px solid var(--line); padding-left: .8rem; }
summary { cursor: pointer; }
ol { margin: .4rem 0; padding-left: 2.2rem; font-size: .92rem; }
pre { overflow-x: auto; white-space: pre-wrap; font: .8rem/1.5 ui-monospace, "DejaVu Sans Mono", monospace; }
blockquote, pre { margin: .4rem 0; padding: .6rem .9rem; background: var(--wash); }
a { color: inherit; }
:focus-visible { outline: 3px solid #7e8f9f; outline-offset: 2px; }
@media print {
  body { font-size: 10.5pt; }
  main { max-width: none; padding: 0; }
  .equation, figure { overflow: visible; break-inside: avoid; }
  .equation math { font-size: .8em; }
  h2, h3 { break-after: avoid; }
  details::details-content { content-visibility: visible; block-size: auto; }
  @page { margin: 18mm; }
}
`;
