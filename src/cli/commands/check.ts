/** `holdfast check`: is this certificate's claim proved? */
import { certificateFromOptions, checkWithProgress } from '../certificate-file.ts';
import type { Command } from '../command.ts';
import { lineOf } from '../standalone.ts';

export const check: Command = {
  name: 'check',
  summary: 'checks a certificate with code that shares nothing with the search',
  help: `holdfast check FILE

Proves the claim of a certificate again, from the certificate alone: that every listed charge commutes with the Hamiltonian,
exactly, and that there are no more. The rules are in docs/certificate.md; the same checker is one file without any other,
dist/holdfast-check.mjs.

  holdfast search "XX + YY + 3 X" --range 6 --certificate answer.json
  holdfast check answer.json

Accepted: one line "accepted sha256:ID" on standard output; ID is the SHA-256 of the file, as sha256sum prints it.
Else: nothing there, and one reason on standard error.

Exit status: 0 accepted, 1 rejected or cancelled, 2 not a certificate.`,
  options: {},
  async run(input) {
    const text = await certificateFromOptions(input);
    const { out, note, status } = lineOf(await checkWithProgress(text, input));
    input.out(out);
    if (note !== '') input.note(note);
    return status;
  },
};
