/**
 * What goes into a paper. The argument picks it: `latex` (the default), `picture` (SVG) or `report` (an HTML page); it is written to
 * standard output.
 */
import { latexResult, parseModel, pictureOfResult, reportPage, search } from 'holdfast';

const result = await search(parseModel('3/2 XX + 5/4 YY + 7/10 ZZ'), { range: 4 });
const forms = { latex: latexResult, picture: pictureOfResult, report: reportPage };
const wanted = (process.argv[2] ?? 'latex') as keyof typeof forms;
process.stdout.write(forms[wanted](result));
