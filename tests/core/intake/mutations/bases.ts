import * as XLSX from 'xlsx';
import { bytesOf } from '../files';
import { stamp } from '../tables';
import { utf16 } from '../dialects/write';
import { zip } from '../zip';

/** A small file that is read rightly, to be spoiled. */
export interface Base {
  name: string;
  fileName: string;
  bytes: Uint8Array;
  /** Text that its bytes are in UTF-8; absent where they are packed or of another code. */
  text?: string;
  delimiter?: string;
}

const count = 96;
const kwh = (at: number): number => 100 + ((at * 7) % 61) / 2;
const lagging = (at: number): number => 20 + ((at * 11) % 37) / 4;
const leading = (at: number): number => (at % 9 === 0 ? 1.5 : 0);
const cells = (at: number): (string | number)[] => [
  stamp(at),
  kwh(at),
  lagging(at),
  leading(at),
  at % 17 === 3 ? 'E' : 'A',
];
const header = ['Time', 'Energy kWh', 'Lagging kvarh', 'Leading kvarh', 'Quality'];
const rows = Array.from({ length: count }, (_, at) => cells(at));
const joined = (delimiter: string, write: (cell: string | number) => string = String): string =>
  [header, ...rows].map((row) => row.map(write).join(delimiter)).join('\n');

const comma = joined(',');
const semicolon = joined(';', (cell) => String(cell).replace('.', ','));

const wide = [
  ['Date', ...Array.from({ length: 24 }, (_, hour) => `${String(hour).padStart(2, '0')}:00`)],
  ...Array.from({ length: 12 }, (_, day) => [
    `2025-06-${day + 10}`,
    ...Array.from({ length: 24 }, (_unused, hour) => kwh(day * 24 + hour)),
  ]),
]
  .map((row) => row.join(','))
  .join('\n');

const stream = (suffix: string, unit: string, figure: (at: number) => number): string[] => [
  `200,NINV000001,E1Q1,1,${suffix},N1,M1,${unit},30,20250901`,
  ...[0, 1].map(
    (day) =>
      `300,2025061${day},${Array.from({ length: 48 }, (_, at) => figure(day * 48 + at)).join(',')},A,,,20250701000000,`,
  ),
];
const nem = [
  '100,NEM12,202507010000,INVMDP,INVRET',
  ...stream('E1', 'kWh', kwh),
  ...stream('Q1', 'kvarh', lagging),
  '900',
].join('\n');

const entry = (self: string, links: string, content: string): string =>
  `<entry><link rel="self" href="${self}"/>${links}<content>${content}</content></entry>`;
const espi = `<?xml version="1.0"?>
<feed xmlns="http://www.w3.org/2005/Atom" xmlns:e="http://naesb.org/espi">
${entry('/R/1/B/1', '<link rel="up" href="/R/1/B"/>', `<e:IntervalBlock>${Array.from({ length: count }, (_, at) => `<e:IntervalReading><e:timePeriod><e:duration>900</e:duration><e:start>${1_749_513_600 + at * 900}</e:start></e:timePeriod><e:value>${kwh(at) * 1000}</e:value></e:IntervalReading>`).join('\n')}</e:IntervalBlock>`)}
${entry('/R/1', '<link rel="related" href="/R/1/B"/><link rel="related" href="/T/1"/>', '<e:MeterReading/>')}
${entry('/T/1', '', '<e:ReadingType><e:flowDirection>1</e:flowDirection><e:powerOfTenMultiplier>0</e:powerOfTenMultiplier><e:uom>72</e:uom></e:ReadingType>')}
</feed>`;

function book(bookType: XLSX.BookType): Uint8Array {
  const serials = rows.map((row, at) => [45_818 + at / 96, ...row.slice(1)]);
  const sheet = XLSX.utils.aoa_to_sheet([header, ...serials]);
  for (let row = 2; row <= count + 1; row += 1) (sheet[`A${row}`] as XLSX.CellObject).z = 'yyyy-mm-dd hh:mm';
  // A few figures are formulas with kept values.
  for (const row of [5, 50]) (sheet[`B${row}`] as XLSX.CellObject).f = '1+1';
  const whole = XLSX.utils.book_new();
  XLSX.utils.book_append_sheet(whole, sheet, 'Readings');
  return new Uint8Array(XLSX.write(whole, { type: 'array', bookType, compression: true }) as ArrayBuffer);
}

const ofText = (name: string, fileName: string, text: string, delimiter?: string): Base => ({
  name,
  fileName,
  text,
  bytes: bytesOf(text),
  ...(delimiter ? { delimiter } : {}),
});

/** Small files of every format. */
export const bases: Base[] = [
  ofText('commas', 'a.csv', comma, ','),
  ofText('semicolons and decimal commas', 'b.csv', semicolon, ';'),
  ofText('a day a row', 'c.csv', wide, ','),
  ofText('NEM12', 'd.csv', nem),
  ofText('ESPI', 'e.xml', espi),
  { name: 'UTF-16', fileName: 'f.csv', bytes: utf16(comma, false) },
  { name: 'ZIP', fileName: 'g.zip', bytes: zip([{ name: 'a.csv', bytes: bytesOf(comma) }]) },
  { name: '.xlsx', fileName: 'h.xlsx', bytes: book('xlsx') },
  { name: '.xls', fileName: 'i.xls', bytes: book('biff8') },
  { name: '.ods', fileName: 'j.ods', bytes: book('ods') },
];

/** Bytes of the figures of a text: every run of digits and marks that stands for a whole value. */
export function figureBytes({ text, name }: Base): Uint8Array | null {
  if (text === undefined) return null;
  const inside = new Uint8Array(text.length);
  const pattern = name === 'ESPI' ? /(?<=value>)[^<]+/g : /(?<=[,;])[\d.,]*\d(?=[,;\n]|$)/gm;
  for (const found of text.matchAll(pattern)) inside.fill(1, found.index, found.index + found[0].length);
  return inside;
}
