import type { Dialect } from './dialect';
import type { TrueReading } from './series';
import { dotted, iso, long, plainFigures, plainTable } from './write';

const step = { stepMinutes: 15 } as const;

/** Figures with a mark between thousands and a decimal mark. */
const marked =
  (thousands: string, decimal: string) =>
  (reading: TrueReading): string[] =>
    plainFigures(reading).map((figure) => {
      const [whole = '', decimals] = figure.split('.');
      const grouped = whole.replace(/\B(?=(\d{3})+$)/g, thousands);
      return decimals === undefined ? grouped : `${grouped}${decimal}${decimals}`;
    });

const blanks = ['', '-', 'NA', 'N/A', 'NaN', 'Null', '#N/A', '--', 'n.a.'];
const fixed =
  (digits: number) =>
  (reading: TrueReading): string[] =>
    [reading.kwh, reading.lagging, reading.leading].map((figure) => figure.toFixed(digits));

const germanHeader = ['Zeit', 'Wirkarbeit kWh', 'Blindarbeit induktiv kvarh', 'Blindarbeit kapazitiv kvarh'];

/** How figures and blanks are written. */
export const numberDialects: Dialect[] = [
  {
    ...step,
    name: 'thousands commas in quotes',
    write: (series) => plainTable(series, { figures: (one) => marked(',', '.')(one).map((cell) => `"${cell}"`) }),
  },
  {
    ...step,
    name: 'thousands commas between tabs',
    write: (series) => plainTable(series, { delimiter: '\t', figures: marked(',', '.') }),
  },
  ...(
    [
      ['point and decimal comma', '.', ','],
      ['blank and decimal comma', ' ', ','],
      ['no-break blank and decimal comma', '\u00a0', ','],
      ['narrow no-break blank and decimal comma', '\u202f', ','],
      ['apostrophe and decimal point', "'", '.'],
      ['curly apostrophe and decimal point', '’', '.'],
    ] as const
  ).map(([name, thousands, decimal]): Dialect => ({
    ...step,
    name: `thousands ${name}`,
    write: (series) =>
      long(series, {
        delimiter: ';',
        header: germanHeader,
        stamp: ({ begin }) => [dotted(begin)],
        figures: marked(thousands, decimal),
      }),
  })),
  {
    ...step,
    name: 'five decimals with decimal comma',
    write: (series) =>
      plainTable(series, { delimiter: ';', figures: (one) => fixed(5)(one).map((cell) => cell.replace('.', ',')) }),
  },
  { ...step, name: 'three decimals throughout', write: (series) => plainTable(series, { figures: fixed(3) }) },
  {
    ...step,
    name: 'figures without a nought in front',
    write: (series) =>
      plainTable(series, { figures: (one) => plainFigures(one).map((cell) => cell.replace(/^0\./, '.')) }),
  },
  {
    ...step,
    name: 'figures padded with blanks',
    write: (series) => plainTable(series, { figures: (one) => plainFigures(one).map((cell) => cell.padStart(12)) }),
  },
  {
    ...step,
    name: 'figures with exponents',
    write: (series) =>
      plainTable(series, {
        figures: (one) => [one.kwh, one.lagging, one.leading].map((figure) => figure.toExponential()),
      }),
  },
  {
    ...step,
    name: 'figures with their unit behind',
    refused: /No column holds energy or power.*Lagging kvarh/,
    write: (series) =>
      plainTable(series, { figures: (one) => [`${one.kwh} kWh`, `${one.lagging} kvarh`, `${one.leading} kvarh`] }),
  },
  {
    ...step,
    name: 'missing readings written in nine ways',
    write: (series) => {
      let at = 0;
      const table = plainTable(series, { blank: '@,@,@' });
      return table.replaceAll('@,@,@,@,@,@,@,@,@', () => {
        at += 1;
        return Array.from({ length: 3 }, (_, cell) => blanks[(at + cell) % blanks.length]).join(',');
      });
    },
  },
  { ...step, name: 'missing readings left out', write: (series) => plainTable(series, { blank: null }) },
  {
    ...step,
    name: 'missing readings as nought with a mark',
    marksEstimates: true,
    write: (series) =>
      plainTable(series, {
        header: ['Time', 'Energy kWh', 'Lagging kvarh', 'Leading kvarh', 'Status'],
        blank: '0,0,0,N',
        figures: (one) => [
          plainFigures(one)
            .concat(one.grade === 'estimated' ? 'E' : 'A')
            .join(','),
        ],
      }),
  },
  {
    ...step,
    name: 'marks in words',
    marksEstimates: true,
    write: (series) =>
      long(series, {
        delimiter: ';',
        header: [...germanHeader, 'Status'],
        stamp: ({ begin }) => [iso(begin)],
        blank: ';;;fehlt',
        figures: (one) => [
          plainFigures(one)
            .concat(one.grade === 'estimated' ? 'Ersatzwert' : 'Wahrer Wert')
            .join(';'),
        ],
      }),
  },
];
