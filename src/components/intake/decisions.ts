import type { ColumnMap, Guess } from '../../core/intake';
import type { IntakePreview } from '../../schemas/intake';
import type { SelectOption } from '../ui/Field';

/** A decision about the whole file that a person can correct. */
export interface Decision {
  key: Guess['key'] | 'sheet';
  label: string;
  value: string;
  options: SelectOption[];
  /** The map with another answer; what depended on the old one is detected again. */
  apply: (map: ColumnMap, value: string) => ColumnMap;
}

const words: Partial<Record<Guess['key'], Record<string, string>>> = {
  delimiter: { ',': 'Comma', ';': 'Semicolon', '\t': 'Tabulator', '|': 'Vertical bar' },
  'decimal-mark': { '.': 'Point, 1,234.5', ',': 'Comma, 1.234,5' },
  'date-order': {
    DMY: 'Day, month, year',
    MDY: 'Month, day, year',
    YMD: 'Year, month, day',
    serial: 'Day number of a workbook',
    epoch: 'Seconds since 1970',
  },
  marks: {
    begin: 'Beginning of the interval',
    end: 'End of the interval',
    'own-day-end': 'End, 00:00 closing its own day',
  },
  clock: {
    local: 'Local, with summer time',
    standard: 'Local, no summer time',
    utc: 'UTC',
    offset: 'Offset in each stamp',
  },
  step: { 1: '1 min', 5: '5 min', 10: '10 min', 15: '15 min', 20: '20 min', 30: '30 min', 60: '60 min' },
  'period-ends': { inclusive: 'Last day belongs to it', exclusive: 'Last day is the next one’s first' },
};

const labels: Record<Guess['key'], string> = {
  'header-row': 'Names of the columns',
  delimiter: 'Between columns',
  'decimal-mark': 'Decimal mark',
  layout: 'Layout',
  'date-order': 'Order of dates',
  marks: 'Stamps name',
  clock: 'Clock',
  step: 'Length of interval',
  'period-ends': 'End of period',
  year: 'Year of the first bill',
  meter: 'Meter',
  member: 'File in the archive',
};

/** The map without its columns: they are detected anew. */
function without(map: ColumnMap, ...names: Exclude<keyof ColumnMap, 'kind'>[]): ColumnMap {
  const rest = { ...map };
  for (const name of names) delete rest[name];
  return rest;
}

const stamped = (map: ColumnMap, stamp: NonNullable<ColumnMap['stamp']>): ColumnMap => ({
  ...map,
  stamp: { ...map.stamp, ...stamp },
});

const current: Record<Guess['key'], (map: ColumnMap) => string | undefined> = {
  'header-row': (map) => (map.headerRow === null ? 'none' : map.headerRow?.toString()),
  delimiter: (map) => map.delimiter,
  'decimal-mark': (map) => map.decimalMark,
  layout: (map) => map.layout,
  'date-order': (map) => map.stamp?.order,
  marks: (map) => map.stamp?.marks,
  clock: (map) => map.stamp?.clock,
  step: (map) => map.stamp?.stepMinutes?.toString(),
  'period-ends': (map) => map.periodEnds,
  year: (map) => map.year?.toString(),
  meter: (map) => map.meter,
  member: (map) => map.member,
};

/** Layouts, by what the file holds. */
const layouts: Record<IntakePreview['kind'], Record<string, string>> = {
  intervals: { long: 'A row for each reading', wide: 'A row for each day' },
  bills: { long: 'A row for each bill', transposed: 'A column for each bill', items: 'A row for each line of a bill' },
};

type Stamp = NonNullable<ColumnMap['stamp']>;

const apply: Record<Guess['key'], (map: ColumnMap, value: string) => ColumnMap> = {
  'header-row': (map, value) => ({
    ...without(map, 'columns', 'firstRow'),
    headerRow: value === 'none' ? null : Number(value),
  }),
  delimiter: (map, value) => ({ ...without(map, 'columns', 'firstRow', 'headerRow'), delimiter: value }),
  'decimal-mark': (map, value) => ({ ...map, decimalMark: value as '.' | ',' }),
  layout: (map, value) => ({ ...without(map, 'columns'), layout: value as ColumnMap['layout'] }),
  'date-order': (map, value) => stamped(map, { order: value as Stamp['order'] }),
  marks: (map, value) => stamped(map, { marks: value as Stamp['marks'] }),
  clock: (map, value) => stamped(map, { clock: value as Stamp['clock'] }),
  step: (map, value) => stamped(map, { stepMinutes: Number(value) }),
  'period-ends': (map, value) => ({ ...map, periodEnds: value as ColumnMap['periodEnds'] }),
  year: (map, value) => ({ ...map, year: Number(value) }),
  meter: (map, value) => ({ ...map, meter: value }),
  member: (map, value) => ({ kind: map.kind, member: value }),
};

function optionsOf(key: Guess['key'], preview: IntakePreview): SelectOption[] {
  if (key === 'header-row') {
    const rows = preview.rows.map((row) => ({ value: String(row.number), label: `Row ${row.number}` }));
    return [...rows, { value: 'none', label: 'The file has none' }];
  }
  if (key === 'meter') return preview.meters.map((meter) => ({ value: meter, label: meter }));
  if (key === 'member') return (preview.dialect.members ?? []).map((member) => ({ value: member, label: member }));
  if (key === 'year') return yearsAround(preview.columnMap.year);
  const wordsOfKey = key === 'layout' ? layouts[preview.kind] : words[key];
  return Object.entries(wordsOfKey ?? {}).map(([value, label]) => ({ value, label }));
}

const yearsAround = (year = 0): SelectOption[] =>
  [-2, -1, 0, 1, 2].map((step) => ({ value: String(year + step), label: String(year + step) }));

/** A guess of the reader as a decision one can correct. A value that is none of the usual ones is offered too. */
export function decisionOf(guess: Guess, preview: IntakePreview): Decision {
  const value = current[guess.key](preview.columnMap) ?? '';
  const options = optionsOf(guess.key, preview);
  const known = options.some((option) => option.value === value);
  const shown = known ? options : [{ value, label: value === '' ? 'not decided' : guess.takenAs }, ...options];
  return { key: guess.key, label: labels[guess.key], value, options: shown, apply: apply[guess.key] };
}

/** Which sheet of a workbook is read; null where there is one only. */
export function sheetDecision(preview: IntakePreview): Decision | null {
  const { sheets = [], sheet = '' } = preview.dialect;
  if (sheets.length < 2) return null;
  return {
    key: 'sheet',
    label: 'Sheet',
    value: sheet,
    options: sheets.map((name) => ({ value: name, label: name })),
    apply: (map, value) => ({ kind: map.kind, member: map.member, sheet: value }),
  };
}

/** How the bytes became cells, in words for the reference column. */
export function dialectWords(preview: IntakePreview): string[] {
  const { encoding, delimiter, decimalMark, sheet } = preview.dialect;
  const text = [
    delimiter && (words.delimiter?.[delimiter] ?? delimiter),
    decimalMark && (decimalMark === '.' ? 'point as decimal mark' : 'comma as decimal mark'),
    encoding,
  ].filter(Boolean);
  const formats = { delimited: 'Delimited text', spreadsheet: 'Workbook', espi: 'ESPI XML', nem12: 'NEM12' };
  return [formats[preview.format], sheet ? `Sheet ${sheet}` : '', text.join(', ')].filter((line) => line !== '');
}
