/** Two wires side by side: two spins a cell, and a limit on the time that the search may take. */
import { CancelledError, estimate, parseModel, printDensity, search } from 'holdfast';

const ladder = parseModel('XIX + YIY + IXIX + IYIY + U ZZ', { cell: 2, parameters: { U: 4 } });
const { candidates, bytes } = estimate(ladder, 3);
console.log(`${candidates} candidates, at most ${Math.ceil(bytes / 1e6)} MB`);
try {
  const result = await search(ladder, { range: 3, signal: AbortSignal.timeout(60_000) });
  for (const { range, density } of result.charges)
    console.log(`range ${range}: ${printDensity(ladder, density)}`);
} catch (error) {
  if (!(error instanceof CancelledError)) throw error;
  console.log('not within a minute');
}
