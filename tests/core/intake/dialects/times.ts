import { wallOf } from '../files';
import { wholeOf, type Carried, type Dialect } from './dialect';
import { clockChanges, wallPlus, type Series, type TrueReading } from './series';
import { american, byDay, channelNames, dotted, iso, long, longRows, plainFigures, plainTable, slashed } from './write';

const step = { stepMinutes: 15 } as const;
const hourly = { stepMinutes: 60 } as const;
const changesByWholeHours = (series: Series): boolean =>
  clockChanges(series).every(({ minutes }) => minutes % 60 === 0);
const changes = (series: Series): boolean => clockChanges(series).length > 0;

const months = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const weekdays = ['Sun', 'Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat'];
const stamped = (
  name: string,
  stamp: (reading: TrueReading, zone: string) => string[],
  header = ['Time'],
): Dialect => ({
  ...step,
  name,
  write: (series) => long(series, { header: [...header, ...channelNames], stamp: (one) => stamp(one, series.zone) }),
});

/** Minutes a zone's clock is ahead of UTC at a reading, as +01:00. */
function offsetOf({ begin, utcMs }: TrueReading): string {
  const minutes = (Date.parse(`${begin.date}T${begin.time}:00Z`) - utcMs) / 60_000;
  const size = Math.abs(minutes);
  const two = (figure: number): string => String(Math.floor(figure)).padStart(2, '0');
  return `${minutes < 0 ? '-' : '+'}${two(size / 60)}:${two(size % 60)}`;
}

const closing = ({ begin, end }: TrueReading): boolean => begin.date !== end.date;

/** Readings in the order of their stamps: the two passes of a repeated hour interleave. */
const interleaved = (series: Series): Series => ({
  ...series,
  readings: [...series.readings].sort((a, b) =>
    iso(a.begin) < iso(b.begin) ? -1 : iso(a.begin) > iso(b.begin) ? 1 : a.utcMs - b.utcMs,
  ),
});

/** The second pass of the repeated hour, whose stamps were met before. */
function secondPass({ readings }: Series): Set<TrueReading> {
  const seen = new Set<string>();
  return new Set(readings.filter(({ begin }) => (seen.has(iso(begin)) ? true : (seen.add(iso(begin)), false))));
}

/** What is left where the second pass is not written. */
function onePass(series: Series): Carried {
  const lost = secondPass(series);
  return wholeOf(
    { ...series, readings: series.readings.map((one) => (lost.has(one) ? { ...one, grade: 'missing' } : one)) },
    {},
  );
}

/** Fillers in the hour that spring skips, as many as it has intervals. */
function withFillers(series: Series, filler: string): string {
  const rows = longRows(series, { header: [], stamp: ({ begin }) => [iso(begin)] }).map((cells) => cells.join(','));
  const skips = clockChanges(series).filter(({ minutes }) => minutes > 0);
  for (const { at, minutes } of skips.reverse()) {
    const before = series.readings[at - 1];
    if (!before) continue;
    const extra = Array.from(
      { length: minutes / 15 },
      (_, turn) => `${iso(wallPlus(before.begin, (turn + 1) * 15))},${filler}`,
    );
    rows.splice(at, 0, ...extra);
  }
  return [['Time', ...channelNames].join(','), ...rows].join('\n');
}

/** Standard time all year: the least offset of the window. */
function standardStamp(series: Series): (reading: TrueReading) => string[] {
  const offsets = series.readings.map(
    ({ begin, utcMs }) => (Date.parse(`${begin.date}T${begin.time}:00Z`) - utcMs) / 60_000,
  );
  const least = offsets.reduce((low, next) => Math.min(low, next));
  return ({ utcMs }) => [new Date(utcMs + least * 60_000).toISOString().slice(0, 16).replace('T', ' ')];
}

/** How dates, times and clock changes are written. */
export const timeDialects: Dialect[] = [
  stamped('day first with points', ({ begin }) => [dotted(begin)]),
  stamped('day first with strokes', ({ begin }) => [slashed(begin)]),
  stamped('month first, twelve-hour clock', ({ begin }) => [american(begin)]),
  stamped('month as a word', ({ begin }) => [
    `${begin.day}-${months[Number(begin.month) - 1] ?? ''}-${begin.year} ${begin.time}`,
  ]),
  stamped('without marks', ({ begin }) => [`${begin.year}${begin.month}${begin.day}${begin.time.replace(':', '')}`]),
  stamped('seconds and a T', ({ begin }) => [`${begin.date}T${begin.time}:00.000`]),
  stamped('two-digit years', ({ begin }) => [`${begin.day}.${begin.month}.${begin.year.slice(2)} ${begin.time}`]),
  stamped('date and time apart', ({ begin }) => [begin.date, begin.time], ['Date', 'Time']),
  stamped('date and time as HHMM', ({ begin }) => [begin.date, begin.time.replace(':', '')], ['Date', 'Time']),
  stamped('a weekday in front', ({ begin }) => [
    `${weekdays[new Date(`${begin.date}T00:00:00Z`).getUTCDay()] ?? ''} ${iso(begin)}`,
  ]),
  stamped('begin and end in two columns', ({ begin, end }) => [iso(begin), iso(end)], ['From', 'To']),
  stamped('a span in one column', ({ begin, end }) => [dotted(begin).slice(0, 10), `${begin.time} - ${end.time}`], [
    'Date',
    'Span',
  ]),
  stamped('end stamps', ({ end }) => [iso(end)]),
  stamped('end stamps by the clock that runs at the end', ({ utcMs }, zone) => [iso(wallOf(utcMs + 900_000, zone))]),
  stamped('midnight as 24:00', (one) => [closing(one) ? `${one.begin.date} 24:00` : iso(one.end)]),
  stamped('date apart and 24:00', (one) => [one.begin.date, closing(one) ? '24:00' : one.end.time], ['Date', 'Time']),
  stamped('midnight with the old date', (one) => [`${one.begin.date} ${one.end.time}`]),
  stamped('ISO with offset', (one) => [`${one.begin.date}T${one.begin.time}:00${offsetOf(one)}`]),
  stamped('ISO in UTC', ({ utcMs }) => [new Date(utcMs).toISOString()]),
  stamped('epoch seconds', ({ utcMs }) => [String(utcMs / 1000)], ['Timestamp']),
  stamped('epoch milliseconds', ({ utcMs }) => [String(utcMs)], ['Timestamp']),
  {
    ...step,
    name: 'second pass after the first',
    fits: changes,
    notes: ['repeated-hour'],
    write: (series) => plainTable(series),
  },
  {
    ...step,
    name: 'passes interleaved',
    fits: changes,
    notes: ['repeated-hour'],
    write: (series) => plainTable(interleaved(series)),
  },
  {
    ...step,
    name: 'end stamps, passes interleaved',
    fits: changes,
    write: (series) => plainTable(interleaved(series), { stamp: ({ end }) => [iso(end)] }),
  },
  {
    ...step,
    name: 'repeated hour written once',
    fits: changes,
    notes: ['repeated-hour-once'],
    carried: onePass,
    write: (series) => {
      const lost = secondPass(series);
      return plainTable({ ...series, readings: series.readings.filter((one) => !lost.has(one)) });
    },
  },
  { ...step, name: 'blank fillers in the skipped hour', fits: changes, write: (series) => withFillers(series, ',,') },
  {
    ...step,
    name: 'nought in the skipped hour',
    fits: changes,
    notes: ['skipped-hour-fillers'],
    write: (series) => withFillers(series, '0,0,0'),
  },
  {
    ...step,
    name: 'standard time all year',
    fits: changes,
    notes: ['standard-time'],
    write: (series) => plainTable(series, { stamp: standardStamp(series) }),
  },
  {
    ...step,
    name: 'latest first',
    write: (series) => plainTable({ ...series, readings: [...series.readings].reverse() }),
  },
  {
    ...hourly,
    name: 'hours 1 to 24, 25 in autumn',
    fits: changesByWholeHours,
    write: (series) =>
      [
        'Date,Hour,' + channelNames.join(','),
        ...byDay(series).flatMap(([date, readings]) =>
          readings.map((one, at) =>
            [date, at + 1, ...(one.grade === 'missing' ? ['', '', ''] : plainFigures(one))].join(','),
          ),
        ),
      ].join('\n'),
  },
  {
    ...step,
    name: 'quarter-hours 1 to 96 counted through the day',
    write: (series) =>
      [
        'Date,Interval,' + channelNames.join(','),
        ...byDay(series).flatMap(([date, readings]) =>
          readings.map((one, at) =>
            [date, at + 1, ...(one.grade === 'missing' ? ['', '', ''] : plainFigures(one))].join(','),
          ),
        ),
      ].join('\n'),
  },
  {
    ...step,
    name: 'spreadsheet serials in text',
    fits: (series) => !changes(series),
    write: (series) =>
      plainTable(series, {
        header: ['Timestamp', ...channelNames],
        stamp: ({ begin }) => [String(Date.parse(`${begin.date}T${begin.time}:00Z`) / 86_400_000 + 25_569)],
      }),
  },
];
