import type { LoadSource, LoadTestView, ShaftLoadView, SubmeterFileView } from '../../schemas/shaft-load';
import { formatDate, formatDelivered, formatList, formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

/** What tells a load, in a sentence. */
export const sourceWords: Record<LoadSource, string> = {
  calendar: 'shift calendar',
  profile: 'profile by hour',
  submeter: 'submeter',
};

/** What the source gives over the year. */
export function yearSentence(name: string, { source, year }: ShaftLoadView): string {
  if (year.hoursRunning === 0) return `By its ${sourceWords[source]} ${name} stands still all year.`;
  const kw = formatQuantity(year.usualShaftKw, 'kW');
  return `By its ${sourceWords[source]} ${name} runs ${formatNumber(year.hoursRunning)} hours of the year, most often at ${kw} of shaft load.`;
}

/** What the submeter does not tell, and what stands in; null where nothing is missing. */
export function gapSentence({ source, whenMissing, year }: ShaftLoadView): string | null {
  if (source !== 'submeter') return null;
  const stand = whenMissing === 'calendar' ? 'the shift calendar stands in' : 'the motor is taken to stand still';
  const parts = [
    year.hoursMissing > 0 &&
      `It has no reading for ${formatNumber(year.hoursMissing)} hours of the year: there ${stand}.`,
    year.hoursBeyond > 0 &&
      `In ${formatNumber(year.hoursBeyond, { upTo: 1 })} hours it reads more than the field of today can hold: check that field, and whether the meter has other loads behind it.`,
  ].filter(Boolean);
  return parts.length > 0 ? parts.join(' ') : null;
}

/** Files of a submeter. */
export function fileTable(files: SubmeterFileView[], timeZone: string): LedgerData {
  return {
    columns: [
      { key: 'file', head: 'File', wrap: true },
      { key: 'span', head: 'Days', wrap: true },
      { key: 'step', head: 'Interval', unit: 'min', kind: 'number' },
      { key: 'missing', head: 'Missing', unit: '%', kind: 'number', decimals: 1 },
      { key: 'highest', head: 'Highest', unit: 'kW', kind: 'number' },
      { key: 'total', head: 'Energy', unit: 'MWh', kind: 'number' },
    ],
    rows: files.map((file) => ({
      id: String(file.id),
      cells: {
        file: {
          value: file.fileName,
          note: file.factor === 1 ? undefined : `times ${formatNumber(file.factor, { upTo: 4 })}`,
        },
        span: `${formatDate(file.fromMs, timeZone)} to ${formatDate(file.toMs - 1, timeZone)}`,
        step: file.stepMinutes,
        missing: (100 * file.missing) / file.intervals,
        highest: file.highestKw,
        total: file.totalKwh / 1000,
      },
    })),
  };
}

/** Difference of volts and amperes from kW and kvar above which a row's instruments disagree. [%] */
const instrumentsPercent = 5;

const faultWords = { stands: 'below the losses', 'pull-out': 'beyond pull-out' } as const;

/** The load test beside the motor's data. */
export function testTable(test: LoadTestView): LedgerData {
  return {
    columns: [
      { key: 'row', head: 'Row' },
      { key: 'shaft', head: 'Shaft load', unit: 'kW', kind: 'number', strong: true },
      { key: 'percent', head: 'Of rated', unit: '%', kind: 'number' },
      { key: 'kvar', head: 'By the data', unit: 'kvar', align: 'right' },
      { key: 'kvarOff', head: 'Data less reading', unit: 'kvar delivered', kind: 'number', signed: true },
      { key: 'lineOff', head: 'Data less reading', unit: 'stator A', kind: 'number', signed: true, decimals: 1 },
      { key: 'said', head: 'Reading', wrap: true },
    ],
    rows: test.rows.map((row, index) => ({
      id: String(index),
      kind: row.fault ? ('refused' as const) : undefined,
      cells: {
        row: String(index + 1),
        shaft: row.fault ? null : row.shaftKw,
        percent: row.fault ? null : row.shaftPercent,
        kvar: row.fault ? null : formatDelivered(row.kvarDelivered),
        kvarOff: row.fault ? null : row.kvarOff,
        lineOff: row.fault ? null : row.lineOffA,
        said: saidOf(row),
      },
    })),
  };
}

function saidOf({ fault, instrumentsOffPercent: off }: LoadTestView['rows'][number]) {
  if (fault) return { value: faultWords[fault], tone: 'fault' as const };
  if (off === null || Math.abs(off) <= instrumentsPercent) return '';
  const words = `volts and amperes give ${formatNumber(Math.abs(off))} % ${off > 0 ? 'more' : 'less'} than kW and kvar`;
  return { value: words, tone: 'warn' as const };
}

/** What the load test says of the motor's data. */
export function testSentence({ offPercent, compared, agrees, suspects, rows }: LoadTestView): string {
  const faults = rows.filter(({ fault }) => fault !== null).length;
  const left =
    faults > 0 ? ` ${formatNumber(faults)} of ${formatNumber(rows.length)} rows cannot be: read them again.` : '';
  if (offPercent === null)
    return `No row can be compared with the motor’s data: read kvar, power factor or stator amperes too.${left}`;
  const off = `${formatNumber(offPercent, { decimals: 1 })} % of rated kVA`;
  if (agrees) return `Readings and motor data agree within ${off}.${left}`;
  const differ = `Readings and motor data differ by ${off}.`;
  if (suspects.length === 0)
    return `${differ} No single value explains it: check ratios of the instruments and read again.${left}`;
  const others = suspects.map(
    ({ label, unit, value, fitted, assumed, leftPercent }) =>
      `${label} ${formatNumber(fitted, { upTo: 2 })} ${unit} in place of ${formatNumber(value, { upTo: 2 })}${assumed ? ' (assumed)' : ''}, which leaves ${formatNumber(leftPercent, { decimals: 1 })} %`,
  );
  const alone = compared === 1 ? ' One row cannot tell them apart: read a second load at another field.' : '';
  return `${differ} It would be explained by ${others.length > 1 ? 'either ' : ''}${formatOr(others)}.${alone} Confirm it before the plate is changed.${left}`;
}

const formatOr = (words: string[]) => (words.length > 1 ? words.join(', or ') : formatList(words));
