/** The workbench's document around its program. */
import { REPORT_STYLE } from '../page.ts';
import { CAUTIONS } from '../verdict.ts';

/** @param program JavaScript of the page, its thread inside */
export function workbenchPage(program: string): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; script-src 'unsafe-inline'; style-src 'unsafe-inline'; worker-src blob:; base-uri 'none'; form-action 'none'">
<title>holdfast workbench</title>
<style>${REPORT_STYLE}${STYLE}</style>
</head>
<body>
<main>
<div class="tools">
<h1>What does this spin chain conserve?</h1>
<p>All local conserved quantities up to a range, exactly, and complete by proof. This page works without a network; nothing that you type leaves it.</p>
<form id="model" novalidate>
<label class="wide">Density of H <textarea id="formula" rows="3" spellcheck="false" autocapitalize="off" aria-describedby="hint">XX + 2 YY + 3 ZZ</textarea></label>
<p id="hint" class="note">Words of Pauli letters run along the spins; H sums all translates. Coefficients are exact: 2, 1/3, 0.35, or names.</p>
<label>Parameters <input id="parameters" placeholder="h=1/2, g=0.35" spellcheck="false" autocapitalize="off"></label>
<label>Spins a cell <input id="cell" inputmode="numeric" value="1" size="3"></label>
<label>Range in cells <input id="range" inputmode="numeric" value="4" size="3"></label>
<label>Known models <select id="examples"><option value="">choose …</option></select></label>
<p id="needs" class="note wide"></p>
<div class="wide buttons"><button id="start" type="submit">Search</button> <button id="cancel" type="button" disabled>Cancel</button> <span class="note">Ctrl+Enter searches, Escape cancels.</span></div>
</form>
<progress id="bar" max="1" hidden aria-label="Progress"></progress>
<p id="status" role="status" aria-live="polite"></p>
<pre id="problem" role="alert" hidden></pre>
<fieldset><legend>Check a certificate</legend>
<label>Choose a file, or drop one anywhere on this page <input id="file" type="file" accept=".json,application/json"></label>
<p class="note">It is checked by code that shares nothing with the search.</p>
<p id="verdict" role="status" hidden></p>
</fieldset>
<div id="saves" class="buttons" role="group" aria-label="Save the result" hidden>
<button type="button" id="save-certificate" data-save="certificate">Save certificate</button>
<button type="button" data-save="report">Save report</button>
<button type="button" data-save="json">Save JSON</button>
<button type="button" data-save="latex">Save LaTeX</button>
<button type="button" data-save="picture">Save picture</button>
</div>
</div>
<div id="report" tabindex="-1" hidden></div>
<footer class="note"><p>${CAUTIONS.join(' ')}</p></footer>
</main>
<script>${program.replace(/<\/script/gi, '<\\/script')}</script>
</body>
</html>
`;
}

const STYLE = `
.tools h1 { margin-top: 0; }
form { display: grid; grid-template-columns: 2fr 1fr 1fr 2fr; gap: .7rem 1rem; align-items: end; }
.wide, #hint { grid-column: 1 / -1; }
#hint, #needs { margin: 0; min-height: 1.6em; }
label { display: block; color: var(--faint); font-size: .9rem; }
textarea, input:not([type="file"]), select { display: block; width: 100%; margin-top: .15rem; padding: .4rem .5rem; color: var(--ink); background: #fff; border: 1px solid #7e8f9f; border-radius: 3px; font: 1rem/1.4 ui-monospace, "DejaVu Sans Mono", monospace; }
select { font-family: inherit; }
button { padding: .4rem 1rem; font: inherit; color: var(--ink); background: var(--wash); border: 1px solid #7e8f9f; border-radius: 3px; cursor: pointer; }
button[type="submit"] { color: #fff; background: var(--ink); border-color: var(--ink); }
button:disabled { opacity: .45; cursor: default; }
.buttons { display: flex; flex-wrap: wrap; gap: .6rem; align-items: baseline; }
progress { width: 100%; accent-color: var(--ink); }
#status { min-height: 1.6em; margin: .8rem 0 .4rem; font-weight: 600; }
#problem { border-left: 4px solid var(--ink); }
fieldset { border: 1px dashed #7e8f9f; border-radius: 3px; margin: 1rem 0; padding: .4rem 1rem .8rem; }
legend { color: var(--faint); padding: 0 .4rem; }
input[type="file"] { display: block; margin-top: .3rem; font: inherit; }
#verdict { white-space: pre-wrap; overflow-wrap: anywhere; margin: .4rem 0 0; padding-left: .8rem; border-left: 4px double var(--ink); }
#verdict[data-verdict="accepted"] { border-left-style: solid; }
#report { margin-top: 2rem; border-top: 1px solid var(--line); padding-top: 1.2rem; }
footer { margin-top: 3rem; border-top: 1px solid var(--line); }
body.dragging { outline: 4px dashed var(--ink); outline-offset: -8px; }
[hidden] { display: none !important; }
@media (max-width: 44rem) { form { grid-template-columns: 1fr 1fr; } }
@media print { .tools { display: none; } #report { border: 0; margin: 0; padding: 0; } }
`;
