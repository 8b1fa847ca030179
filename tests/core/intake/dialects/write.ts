import type { Wall } from '../files';
import type { Series, TrueReading } from './series';

/** How a table with a row an interval is laid out. */
export interface LongLayout {
  delimiter?: string;
  header: string[];
  stamp: (reading: TrueReading, at: number) => string[];
  figures?: (reading: TrueReading, at: number) => string[];
  /** What stands for a reading that is missing; null leaves the row out. */
  blank?: string | null;
  preamble?: string[];
  footer?: string[];
  lineEnd?: string;
  quote?: (cell: string) => string;
}

export const iso = ({ date, time }: Wall): string => `${date} ${time}`;
export const dotted = ({ day, month, year, time }: Wall): string => `${day}.${month}.${year} ${time}`;
export const slashed = ({ day, month, year, time }: Wall): string => `${day}/${month}/${year} ${time}`;

/** Twelve-hour clock with the month in front. */
export function american({ year, month, day, time }: Wall): string {
  const hour = Number(time.slice(0, 2));
  return `${Number(month)}/${Number(day)}/${year} ${hour % 12 === 0 ? 12 : hour % 12}:${time.slice(3)} ${hour < 12 ? 'AM' : 'PM'}`;
}

export const plainFigures = ({ kwh, lagging, leading }: TrueReading): string[] => [kwh, lagging, leading].map(String);
export const commaFigures = (reading: TrueReading): string[] =>
  plainFigures(reading).map((figure) => figure.replace('.', ','));

/** The rows of a long table, cells not yet joined. */
export function longRows(series: Series, layout: LongLayout): string[][] {
  const { stamp, figures = plainFigures, blank = '' } = layout;
  return series.readings.flatMap((reading, at) => {
    if (reading.grade !== 'missing') return [[...stamp(reading, at), ...figures(reading, at)]];
    return blank === null ? [] : [[...stamp(reading, at), ...figures(reading, at).map(() => blank)]];
  });
}

/** A table with a row an interval. */
export function long(series: Series, layout: LongLayout): string {
  const { delimiter = ',', header, preamble = [], footer = [], lineEnd = '\n', quote = (cell) => cell } = layout;
  const rows = [header, ...longRows(series, layout)].map((cells) => cells.map(quote).join(delimiter));
  return [...preamble, ...rows, ...footer, ''].join(lineEnd);
}

/** Names of the three channels in English. */
export const channelNames = ['Energy kWh', 'Lagging kvarh', 'Leading kvarh'];

export const atBegin = (reading: TrueReading): string[] => [iso(reading.begin)];

/** The usual table: year first, begin stamps, comma. */
export const plainTable = (series: Series, layout: Partial<LongLayout> = {}): string =>
  long(series, { header: ['Time', ...channelNames], stamp: atBegin, ...layout });

/** Bytes of a text in UTF-16, with a mark in front unless left out. */
export function utf16(text: string, isBigEndian: boolean, hasMark = true): Uint8Array {
  const whole = hasMark ? `\uFEFF${text}` : text;
  const bytes = new Uint8Array(whole.length * 2);
  const view = new DataView(bytes.buffer);
  for (let at = 0; at < whole.length; at += 1) view.setUint16(at * 2, whole.charCodeAt(at), !isBigEndian);
  return bytes;
}

/** Bytes of a text whose signs all have their Latin-1 code; the euro sign as Windows-1252 has it. */
export const latin1 = (text: string): Uint8Array =>
  Uint8Array.from(text, (sign) => (sign === '€' ? 0x80 : sign === '–' ? 0x96 : sign.charCodeAt(0)));

/** Readings by local day, in order. */
export function byDay({ readings }: Series): [date: string, readings: TrueReading[]][] {
  const days = new Map<string, TrueReading[]>();
  for (const reading of readings) {
    const own = days.get(reading.begin.date);
    if (own) own.push(reading);
    else days.set(reading.begin.date, [reading]);
  }
  return [...days];
}
