import { createRequire } from 'node:module';
import path from 'node:path';
import type { Content, TableLayout, TDocumentDefinitions } from 'pdfmake/interfaces';
import { addDays } from '../../../src/core/load';
import { formatAmount, formatNumber } from '../../../src/components/ui/format';
import { billQuantity, type BillView } from '../../../src/schemas/bill';

const require = createRequire(import.meta.url);

/** A cut of the practice's face as a file: the maker of PDF and the drawer of pictures read no other form of it. */
export const latoFile = (face: string) => require.resolve(`@expo-google-fonts/lato/${face}.ttf`);

/** Day as the utility prints it. */
const printed = (date: string) => `${date.slice(5, 7)}/${date.slice(8)}/${date.slice(0, 4)}`;

const inkOnly: TableLayout = {
  hLineWidth: (row, { table }) => (row === 1 ? 1 : row === 0 || row === table.body.length ? 0 : 0.4),
  vLineWidth: () => 0,
  hLineColor: () => '#8a8478',
  paddingTop: () => 5,
  paddingBottom: () => 5,
};

const right = (text: string, bold = false): Content => ({ text, alignment: 'right', bold });

function head(bill: BillView, account: string): Content {
  const facts = [
    ['Statement no.', bill.invoice ?? ''],
    ['Account', account],
    ['Schedule', 'LP-4'],
    ['Service from', printed(bill.from)],
    ['Service to', printed(addDays(bill.to, -1))],
    ['Read on', printed(bill.to)],
  ].filter(([, value]) => value !== '');
  return {
    columns: [
      { text: 'Kestrel Gap Lime & Stone\nWorks 2, Quarry Road\nKestrel Gap', lineHeight: 1.3 },
      {
        width: 240,
        table: {
          widths: ['*', 'auto'],
          body: facts.map(([name = '', value = '']) => [{ text: name, color: '#555555' }, right(value)]),
        },
        layout: 'noBorders',
      },
    ],
    margin: [0, 14, 0, 22],
  };
}

function quantities(bill: BillView): Content {
  const rows = Object.entries(bill.quantities).map(([name, value]) => {
    const { label, unit } = billQuantity(name);
    return [label, right(`${formatNumber(value, { upTo: 3 })} ${unit}`.trim())];
  });
  return {
    table: {
      widths: ['*', 170],
      headerRows: 1,
      body: [[{ text: 'Meter OV 5510-274', bold: true }, right('as read', true)], ...rows],
    },
    layout: inkOnly,
    margin: [0, 0, 0, 24],
  };
}

function charges(bill: BillView): Content {
  const amount = (minor: number) => formatAmount(minor, bill.currency).replace('\u2212', '-');
  const rows = bill.lines.map(({ label, amountMinor }) => [label, right(amount(amountMinor))]);
  const total = ['Amount due', right(amount(bill.totalMinor ?? bill.linesMinor), true)];
  return {
    table: {
      widths: ['*', 170],
      headerRows: 1,
      body: [[{ text: 'Charges', bold: true }, right(bill.currency, true)], ...rows, total],
    },
    layout: inkOnly,
  };
}

function definition(bill: BillView): TDocumentDefinitions {
  const account = '88-1042';
  return {
    pageSize: 'LETTER',
    pageMargins: [36, 78, 36, 48],
    defaultStyle: { font: 'Lato', fontSize: 12 },
    header: {
      margin: [36, 30, 36, 0],
      stack: [
        {
          columns: [
            { text: 'Ostrander Valley Light & Power', bold: true, fontSize: 18 },
            right('Statement of account'),
          ],
        },
        { canvas: [{ type: 'line', x1: 0, y1: 6, x2: 540, y2: 6, lineWidth: 1.5 }] },
      ],
    },
    footer: (page, pages) => ({
      text: `page ${page} of ${pages}`,
      alignment: 'right',
      margin: [36, 6, 36, 0],
      color: '#555555',
    }),
    content: [
      head(bill, account),
      quantities(bill),
      charges(bill),
      { text: 'How this bill was made', bold: true, fontSize: 14, pageBreak: 'before', margin: [0, 0, 0, 8] },
      {
        text: `Energy is counted over ${bill.days} days, from midnight to midnight of the days named on page 1. Billed demand is the highest quarter-hour of the on-peak window, adjusted to the power factor of the sheet, and not less than the share of earlier months the sheet names.`,
        lineHeight: 1.35,
        margin: [0, 0, 0, 12],
      },
      {
        text: 'Late payments bear interest at 1 % a month. Questions: 200 Dam Road, Ostrander Valley, IL.',
        lineHeight: 1.35,
      },
    ],
  };
}

/** The utility's statement of a kept bill, two pages, its figures as text. */
export async function statementPdf(bill: BillView): Promise<Buffer> {
  const { default: pdfmake } = await import('pdfmake');
  const [normal, bold] = [latoFile('400Regular/Lato_400Regular'), latoFile('700Bold/Lato_700Bold')];
  pdfmake.setFonts({ Lato: { normal, bold, italics: normal, bolditalics: bold } });
  pdfmake.setUrlAccessPolicy(() => false);
  const allowed = new Set([normal, bold].map((file) => path.resolve(file)));
  pdfmake.setLocalAccessPolicy((file) => allowed.has(path.resolve(file)));
  return pdfmake.createPdf(definition(bill)).getBuffer();
}
