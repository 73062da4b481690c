/** Where on a line of couplings does the wire conserve more than its energy? Exact values only: a float has no such places. */
import { familyAt, parseFamily, searchNow } from 'holdfast';

const family = parseFamily('XX + g YY + 1/2 ZZ + h Z');
for (const g of ['1/2', '1', '2'])
  for (const h of ['0', '1/3']) {
    const { charges } = searchNow(familyAt(family, [g, h]), { range: 4 });
    const beyond = charges.filter((q) => q.range === 3).length;
    console.log(`g = ${g.padEnd(3)}  h = ${h.padEnd(3)}  ${charges.length} charges, ${beyond} of range 3`);
  }
