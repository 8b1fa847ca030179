import { formatDate } from '../../components/ui/format';
import { describeSchedule, type Schedule, type ScheduleDescription, type ScheduleProblem } from '../../core/tariff';
import type { ChargeRow, QuantityRow, ScheduleSheetView } from '../../schemas/schedule-sheet';
import { contractFields, straddleWords, wordsOfName } from './schedule';
import { linesOf, type LineOf } from './text-lines';
import { yearPicture } from './year-picture';

type TextDescription = ScheduleDescription['versions'][number];
type Sheet = NonNullable<ScheduleSheetView['sheet']>;
/** A schedule's file as its page reads, with the year drawn for one year. */
export function presentScheduleSheet(
  file: {
    id: string;
    fileName: string;
    sha256: string;
    text: string;
    schedule: Schedule | null;
    problems: ScheduleProblem[];
  },
  today: string,
): ScheduleSheetView {
  const { id, fileName, sha256, text, schedule, problems } = file;
  const lines = text.replace(/\n$/, '').split('\n');
  return { id, fileName, sha256, lines, problems, sheet: schedule && sheetOf(schedule, linesOf(text), today) };
}

function sheetOf(schedule: Schedule, lineOf: LineOf, today: string): Sheet {
  const description = describeSchedule(schedule);
  const at = schedule.texts.findLastIndex((text) => text.from <= today);
  const index = Math.max(0, at);
  const text = schedule.texts[index]!;
  const described = description.versions[index]!;
  const { publisher, title, date, status } = schedule.source;
  return {
    title: schedule.title,
    publisher: publisher ?? null,
    sourceWords: [publisher, title, date && formatDate(date)].filter(Boolean).join(', '),
    status: status ?? null,
    currency: schedule.currency,
    timeZone: schedule.timeZone,
    inForce: schedule.inForce,
    charges: described.charges.map((charge, place) => chargeRow(charge, text.charges[place]!.path, lineOf)),
    quantities: tellApart(
      described.quantities.map((quantity, place) => quantityRow(quantity, text.quantities[place]!.path, lineOf)),
    ),
    contract: contractFields(schedule),
    versions: description.versions.map(({ from, note }, place) => ({
      from,
      note: note ?? (place === 0 ? (title ?? 'first text') : ''),
      current: place === index,
    })),
    rules: rulesOf(description, described, lineOf),
    notes: description.notes.map(({ path, message }) => ({ where: path, message, line: lineOf(path) })),
    year: yearPicture(schedule, text, Number(today.slice(0, 4))),
  };
}

function chargeRow(charge: TextDescription['charges'][number], path: string, lineOf: LineOf): ChargeRow {
  const { name, label, words, group, clause, when } = charge;
  return { name, label, words: when ? `${words}, when ${when}` : words, group, clause, line: lineOf(path) };
}

function quantityRow(quantity: TextDescription['quantities'][number], path: string, lineOf: LineOf): QuantityRow {
  const { name, label, words, unit, clause } = quantity;
  return { name, label: label ?? wordsOfName(name), words, unit, clause, line: lineOf(path) };
}

/** Quantities of one label, members of a family, get their names beside it. */
function tellApart(rows: QuantityRow[]): QuantityRow[] {
  const count = (label: string) => rows.filter((row) => row.label === label).length;
  return rows.map((row) => (count(row.label) > 1 ? { ...row, label: `${row.label} (${row.name})` } : row));
}

/** A rider of many months in short: how many, from when to when, between which values. */
function rateWords(words: string): string {
  const months = [...words.matchAll(/(\d{4}-\d{2}) (-?[\d.]+)/g)];
  if (months.length < 5) return words;
  const values = months.map(([, , value]) => Number(value));
  return `${months.length} months, ${months[0]![1]} to ${months.at(-1)![1]}: ${Math.min(...values)} to ${Math.max(...values)}`;
}

/** What else the text says, each with its line. */
function rulesOf(description: ScheduleDescription, text: TextDescription, lineOf: LineOf): Sheet['rules'] {
  const { demandWindow, rounding, zeroKwh, holidays } = text;
  const rolling = demandWindow?.everyMinutes ? `, rolling every ${demandWindow.everyMinutes} min` : '';
  const holidayWords = [
    holidays.calendar && `public holidays of ${holidays.calendar}`,
    holidays.add.length > 0 && `and ${holidays.add.map((day) => formatDate(day)).join(', ')}`,
    holidays.drop.length > 0 && `without ${holidays.drop.map((day) => formatDate(day)).join(', ')}`,
  ].filter(Boolean);
  const zeroWords = [
    zeroKwh.pf !== null && `power factor counts as ${zeroKwh.pf}`,
    zeroKwh.ratio !== null && `kvarh per kWh counts as ${zeroKwh.ratio}`,
  ].filter(Boolean);
  const all: [string, string, string][] = [
    ['Several meters', description.meters === 'summed' ? 'summed before anything is measured' : '', 'meters'],
    ['Demand window', demandWindow ? `${demandWindow.minutes} min${rolling}` : '', 'demandWindow'],
    ['Holidays', holidayWords.join(' '), 'holidays'],
    ['Two texts in a bill', straddleWords(description), 'straddle'],
    [
      'Cents',
      `each line to ${rounding.step}, ${rounding.mode === 'nearest' ? 'half away from nought' : rounding.mode}`,
      'rounding',
    ],
    ['No kWh', zeroWords.join('; '), 'zeroKwh'],
    ...text.seasons.map(({ name, words }): [string, string, string] => [`Season ${name}`, words, `seasons.${name}`]),
    ...text.windows.map(({ name, words }): [string, string, string] => [
      `Window ${wordsOfName(name).toLowerCase()}`,
      words,
      `windows.${name}`,
    ]),
    ...text.rates.map(({ name, words }): [string, string, string] => [
      `Rate ${wordsOfName(name).toLowerCase()}`,
      rateWords(words),
      `rates.${name}`,
    ]),
  ];
  return all.flatMap(([label, words, path]) => (words ? [{ label, words, line: lineOf(path) }] : []));
}
