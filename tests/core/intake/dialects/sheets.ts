import * as XLSX from 'xlsx';
import type { Dialect } from './dialect';
import { clockChanges, type Series, type TrueReading } from './series';
import { byDay, channelNames, dotted } from './write';

// Half-hours: a workbook of them is written and read in a tenth of the time of quarter-hours' text.
const step = { stepMinutes: 30, fileName: 'plant.xlsx' } as const;
type Cells = (string | number | null)[];

/** Day of the 1900 system (ECMA-376 part 1, 18.17.4.1) with the time of day as its fraction. */
const serialOf = ({ begin }: TrueReading): number =>
  Date.parse(`${begin.date}T${begin.time}:00Z`) / 86_400_000 + 25_569;
const figuresOf = (one: TrueReading): Cells =>
  one.grade === 'missing' ? [null, null, null] : [one.kwh, one.lagging, one.leading];
const stampFormat = { 0: 'yyyy-mm-dd hh:mm' };

interface BookLayout {
  bookType?: XLSX.BookType;
  /** Number formats by column. */
  formats?: Record<number, string>;
  preamble?: Cells[];
  header?: string[];
  row?: (reading: TrueReading, at: number) => Cells;
  touch?: (book: XLSX.WorkBook, sheet: XLSX.WorkSheet) => void;
}

const cellAt = (sheet: XLSX.WorkSheet, r: number, c: number): XLSX.CellObject | undefined =>
  sheet[XLSX.utils.encode_cell({ r, c })] as XLSX.CellObject | undefined;

/** A workbook with a row an interval. */
const book =
  (layout: BookLayout = {}): Dialect['write'] =>
  ({ readings }) => {
    const { preamble = [], header = ['Time', ...channelNames], formats = stampFormat } = layout;
    const { row = (one: TrueReading): Cells => [serialOf(one), ...figuresOf(one)] } = layout;
    const rows: Cells[] = [...preamble, header, ...readings.map(row)];
    const sheet = XLSX.utils.aoa_to_sheet(rows);
    for (const [column, format] of Object.entries(formats))
      for (let r = preamble.length + 1; r < rows.length; r += 1) {
        const cell = cellAt(sheet, r, Number(column));
        if (cell?.t === 'n') cell.z = format;
      }
    const whole = XLSX.utils.book_new();
    XLSX.utils.book_append_sheet(whole, sheet, 'Readings');
    layout.touch?.(whole, sheet);
    return new Uint8Array(XLSX.write(whole, { type: 'array', bookType: layout.bookType ?? 'xlsx' }) as ArrayBuffer);
  };

const date1904 = (whole: XLSX.WorkBook): void => void (whole.Workbook = { WBProps: { date1904: true } });

function mergeDays(readings: readonly TrueReading[]): (whole: XLSX.WorkBook, sheet: XLSX.WorkSheet) => void {
  return (_whole, sheet) => {
    let from = 1;
    sheet['!merges'] = byDay({ readings: [...readings] } as Series).map(([, own]) => {
      const merge = { s: { r: from, c: 0 }, e: { r: from + own.length - 1, c: 0 } };
      from += own.length;
      return merge;
    });
  };
}

const isFirstOfDay = (series: readonly TrueReading[], at: number): boolean =>
  series[at - 1]?.begin.date !== series[at]?.begin.date;

const mergedDates: Dialect['write'] = (series) =>
  book({
    header: ['Date', 'Time', ...channelNames],
    formats: { 0: 'dd/mm/yyyy', 1: 'hh:mm' },
    row: (one, at) => [
      isFirstOfDay(series.readings, at) ? Math.floor(serialOf(one)) : null,
      serialOf(one) % 1,
      ...figuresOf(one),
    ],
    touch: mergeDays(series.readings),
  })(series);

/** A sheet the person does not see, longer than the one they do. */
const hiddenSheet = (whole: XLSX.WorkBook, sheet: XLSX.WorkSheet): void => {
  const rows = XLSX.utils.sheet_to_json<Cells>(sheet, { header: 1 });
  const old = XLSX.utils.aoa_to_sheet([
    ...rows.map((cells) => [...cells.slice(0, 1), 1, 2, 3]),
    ['note', 1],
    ['note', 2],
  ]);
  XLSX.utils.book_append_sheet(whole, old, 'Old');
  whole.Workbook = { Sheets: [{ Hidden: 0 }, { Hidden: 1 }] };
};

/** Every twentieth figure is a formula with its kept value. */
const formulas = (_whole: XLSX.WorkBook, sheet: XLSX.WorkSheet): void => {
  for (let r = 20; cellAt(sheet, r, 0); r += 20) {
    const cell = cellAt(sheet, r, 1);
    if (cell) cell.f = `SUM(H${r}:I${r})`;
  }
};

const hideRows = (_whole: XLSX.WorkBook, sheet: XLSX.WorkSheet): void => {
  sheet['!rows'] = Array.from({ length: 60 }, (_, at) => (at > 40 && at < 50 ? { hidden: true } : {}));
  sheet['!cols'] = [{}, {}, {}, { hidden: true }];
};

const groupNames: Cells[] = [['Northern works'], [], ['', 'Active', 'Reactive', '']];

// Workbooks are slow to write: over both clock changes three of them stand for all, which are read from a month.
const overChanges = new Set(['.xlsx with dates', '.xls with dates', '.ods with dates']);
const isShort = ({ readings }: Series): boolean => readings.length < 2000;

const workbooks: Dialect[] = [
  { ...step, name: '.xlsx with dates', write: book() },
  { ...step, name: '.xls with dates', write: book({ bookType: 'biff8' }), fileName: 'plant.xls' },
  { ...step, name: '.ods with dates', write: book({ bookType: 'ods' }), fileName: 'plant.ods' },
  // The 1904 system counts 1462 days less.
  {
    ...step,
    name: 'dates of the 1904 system',
    write: book({ row: (one) => [serialOf(one) - 1462, ...figuresOf(one)], touch: date1904 }),
  },
  { ...step, name: 'dates without a format of dates', write: book({ formats: {} }) },
  { ...step, name: 'dates as text', write: book({ row: (one) => [dotted(one.begin), ...figuresOf(one)] }) },
  {
    ...step,
    name: 'figures as text with decimal commas',
    write: book({
      row: (one) => [
        serialOf(one),
        ...figuresOf(one).map((figure) => (figure === null ? '-' : String(figure).replace('.', ','))),
      ],
    }),
  },
  {
    ...step,
    name: 'every cell as text with thousands commas',
    write: book({
      row: (one) => [
        dotted(one.begin),
        ...figuresOf(one).map((figure) => figure?.toLocaleString('en-US', { maximumFractionDigits: 3 }) ?? ''),
      ],
    }),
  },
  {
    ...step,
    name: 'dates and times of day in two columns',
    write: book({
      header: ['Date', 'Time', ...channelNames],
      formats: { 0: 'dd.mm.yyyy', 1: 'hh:mm' },
      row: (one) => [Math.floor(serialOf(one)), serialOf(one) % 1, ...figuresOf(one)],
    }),
  },
  {
    ...step,
    name: 'date and time of end apart, the last 24:00',
    write: book({
      header: ['Date', 'Time', ...channelNames],
      formats: { 0: 'dd/mm/yyyy', 1: '[hh]:mm' },
      row: (one) => [Math.floor(serialOf(one)), (serialOf(one) % 1) + 1 / 48, ...figuresOf(one)],
    }),
  },
  { ...step, name: 'dates merged over the rows of their day', write: mergedDates },
  {
    ...step,
    name: 'group names merged above the columns',
    write: book({
      preamble: groupNames,
      header: ['Time', 'kWh', 'kvarh lagging', 'kvarh leading'],
      touch: (_whole, sheet) => void (sheet['!merges'] = [{ s: { r: 2, c: 2 }, e: { r: 2, c: 3 } }]),
    }),
  },
  { ...step, name: 'a hidden sheet that is longer', write: book({ touch: hiddenSheet }), notes: ['sheets-hidden'] },
  { ...step, name: 'formulas with kept values', write: book({ touch: formulas }), notes: ['formula-values'] },
  { ...step, name: 'hidden rows and columns', write: book({ touch: hideRows }), notes: ['hidden-cells'] },
  {
    ...step,
    name: 'a day a row',
    fits: (series) => clockChanges(series).length === 0,
    lacksLagging: true,
    lacksLeading: true,
    write: (series) => {
      const names = byDay(series)[0]?.[1].map(({ begin }) => begin.time) ?? [];
      const days = byDay(series).map(([, readings]): Cells => [
        serialOf(readings[0] as TrueReading),
        ...readings.map((one) => figuresOf(one)[0] ?? null),
      ]);
      const sheet = XLSX.utils.aoa_to_sheet([['Energy kWh'], ['Date', ...names], ...days]);
      days.forEach((_day, at) => void Object.assign(cellAt(sheet, at + 2, 0) ?? {}, { z: 'yyyy-mm-dd' }));
      const whole = XLSX.utils.book_new();
      XLSX.utils.book_append_sheet(whole, sheet, 'Days');
      return new Uint8Array(XLSX.write(whole, { type: 'array', bookType: 'xlsx' }) as ArrayBuffer);
    },
  },
];

/** Workbooks. */
export const sheetDialects: Dialect[] = workbooks.map((dialect) => ({
  ...dialect,
  fits: (series) => (overChanges.has(dialect.name) || isShort(series)) && (dialect.fits?.(series) ?? true),
}));
