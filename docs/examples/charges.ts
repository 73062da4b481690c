/** All charges of an invented wire of magnetic ions, as a paper would print them. */
import { parseModel, printResult, search } from 'holdfast';

const wire = parseModel('Jx XX + Jy YY + Jz ZZ', { parameters: { Jx: '3/2', Jy: '5/4', Jz: '0.7' } });
const result = await search(wire, { range: 5 });
console.log(printResult(result, { width: 80 }));
