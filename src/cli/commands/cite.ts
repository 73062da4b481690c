/** `holdfast cite`: a certificate as a reference and a paragraph for a paper. */
import { basename } from 'node:path';
import { citation } from '../../report/citation.ts';
import { certificateFromOptions, checkWithProgress } from '../certificate-file.ts';
import type { Command } from '../command.ts';
import { lineOf } from '../standalone.ts';

export const cite: Command = {
  name: 'cite',
  summary: 'a BibTeX entry and a paragraph for a paper, from a certificate',
  help: `holdfast cite FILE

Checks a certificate and prints a BibTeX entry, and a paragraph with the statement, where it holds, what it does not show, the
id and the command to check it. Nothing is printed for a certificate that is not accepted.

  holdfast cite answer.json

Exit status: 0 printed, 1 rejected or cancelled, 2 not a certificate.`,
  options: {},
  async run(input) {
    const text = await certificateFromOptions(input);
    const verdict = await checkWithProgress(text, input);
    if (verdict.status !== 'accepted') {
      const { note, status } = lineOf(verdict);
      input.note(note);
      return status;
    }
    input.out(citation(text, verdict, basename(input.positionals[0]!)));
    return 0;
  },
};
