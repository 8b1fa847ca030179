import type { Dialect } from './dialect';
import { clockChanges, type Series, type TrueReading } from './series';
import { byDay } from './write';

const clock = (minute: number): string =>
  `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;
const figureOf = (one: TrueReading | undefined, key: 'kwh' | 'lagging' | 'leading'): string =>
  !one || one.grade === 'missing' ? '' : String(one[key]);

const channels = [
  ['kWh', 'kwh'],
  ['kvarh lagging', 'lagging'],
  ['kvarh leading', 'leading'],
] as const;

/** Times of the columns of a day. */
const times = (stepMinutes: number): string[] =>
  Array.from({ length: 1440 / stepMinutes }, (_, at) => clock(at * stepMinutes));

/** A row a day and channel; `cells` lays the day's readings into the columns. */
function table(
  series: Series,
  names: string[],
  cells: (readings: TrueReading[]) => (TrueReading | undefined)[],
): string {
  const rows = byDay(series).flatMap(([date, readings]) => {
    const laid = cells(readings);
    return channels.map(([name, key]) => [date, name, ...laid.map((one) => figureOf(one, key))].join(';'));
  });
  return [['Date', 'Channel', ...names].join(';'), ...rows].join('\n');
}

/** Readings counted through the day: 23, 24 or 25 hours of them. */
const counted =
  (name: (at: number) => string): Dialect['write'] =>
  (series) => {
    const longest = Math.max(...byDay(series).map(([, readings]) => readings.length));
    const names = Array.from({ length: longest }, (_, at) => name(at + 1));
    return table(series, names, (readings) => names.map((_name, at) => readings[at]));
  };

/** Columns named by times, those of the repeated hour a second time behind the first. */
const doubled: Dialect['write'] = (series) => {
  const repeated = new Set(
    clockChanges(series)
      .filter(({ minutes }) => minutes < 0)
      .flatMap(({ at, minutes }) =>
        series.readings.slice(at, at - minutes / series.stepMinutes).map(({ begin }) => begin.time),
      ),
  );
  const own = times(series.stepMinutes);
  const last = own.findLastIndex((time) => repeated.has(time));
  const slots = own.map((time) => ({ time, pass: 0 }));
  slots.splice(last + 1, 0, ...[...repeated].map((time) => ({ time, pass: 1 })));
  return table(
    series,
    slots.map(({ time }) => time),
    (readings) => slots.map(({ time, pass }) => readings.filter(({ begin }) => begin.time === time)[pass]),
  );
};

const wholeHours = (series: Series): boolean => clockChanges(series).every(({ minutes }) => minutes % 60 === 0);
const steady = (series: Series): boolean => clockChanges(series).length === 0;
const byTimes =
  (names: (stepMinutes: number) => string[]): Dialect['write'] =>
  (series) =>
    table(series, names(series.stepMinutes), (readings) => readings);

/** A day a row. */
export const wideDialects: Dialect[] = [
  { stepMinutes: 15, name: '96 columns named by times', fits: steady, write: byTimes(times) },
  {
    stepMinutes: 30,
    name: '48 columns named by times of end',
    fits: steady,
    write: byTimes((minutes) => [...times(minutes).slice(1), '24:00']),
  },
  {
    stepMinutes: 60,
    name: '24 columns named by spans',
    fits: steady,
    write: byTimes(() => times(60).map((time, at) => `${time}-${clock((at + 1) * 60)}`)),
  },
  {
    stepMinutes: 60,
    name: '24 or 25 columns counted through the day',
    fits: wholeHours,
    write: counted((at) => `H${at}`),
  },
  {
    stepMinutes: 30,
    name: '48 or 50 columns counted through the day',
    fits: wholeHours,
    write: counted((at) => String(at)),
  },
  {
    stepMinutes: 15,
    name: '96 or 100 columns counted through the day',
    fits: wholeHours,
    write: counted((at) => `Q${at}`),
  },
  {
    stepMinutes: 60,
    name: 'hours with a second column for the repeated one',
    fits: (series) => wholeHours(series) && !steady(series),
    write: doubled,
  },
  {
    stepMinutes: 15,
    name: 'quarter-hours with second columns for the repeated hour',
    fits: (series) => !steady(series),
    write: doubled,
  },
];
