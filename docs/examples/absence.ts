/** The same wire in a tilted field: a proof that only the energy is left, its certificate, and how others check it. */
import { certificateOf, check, parseModel, search, storyOf, tellStep } from 'holdfast';

const tilted = parseModel('3/2 XX + 5/4 YY + 7/10 ZZ + 1/5 X + 2/5 Z');
const result = await search(tilted, { range: 6 });
console.log(`charges of range ≤ 6: ${result.charges.length}`);

const certificate = await certificateOf(result); // text to keep beside the paper
const verdict = await check(certificate); // code that shares nothing with the search
console.log(verdict.status === 'accepted' ? `accepted sha256:${verdict.id}` : verdict.reason);

// For a short range the proof can be read step by step.
const story = storyOf(await search(tilted, { range: 3 }));
for (const step of story?.layers[0]?.steps.slice(0, 3) ?? []) console.log(tellStep(tilted, step));
