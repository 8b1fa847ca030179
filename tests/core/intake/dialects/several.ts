import { wholeOf, type Dialect } from './dialect';
import type { Series } from './series';
import { atBegin, channelNames, iso, long, longRows, plainFigures } from './write';

const step = { stepMinutes: 15 } as const;
const meters = ['North 1', 'South 2', '0012'];

const rowsByMeter = (series: Series): string =>
  [
    ['Meter', 'Time', ...channelNames].join(','),
    ...meters.flatMap((meter, index) =>
      longRows(series, {
        header: [],
        stamp: (one) => [meter, iso(one.begin)],
        figures: (one) => plainFigures(index === 1 ? one : { ...one, kwh: one.kwh + 1000 }),
      }).map((cells) => cells.join(',')),
    ),
  ].join('\n');

/** A row a figure: channel, unit and value. */
const stackedRows = (series: Series, names: [channel: string, unit: string][], isByChannel: boolean): string => {
  const rowsOf = (one: Series['readings'][number], index: number): string => {
    const figure = [one.kwh, one.lagging, one.leading][index] ?? Number.NaN;
    return [iso(one.begin), ...(names[index] ?? []), one.grade === 'missing' ? '' : figure].join(',');
  };
  const rows = isByChannel
    ? names.flatMap((_name, index) => series.readings.map((one) => rowsOf(one, index)))
    : series.readings.flatMap((one) => names.map((_name, index) => rowsOf(one, index)));
  return ['Time,Channel,Unit,Value', ...rows].join('\n');
};

const english: [string, string][] = [
  ['Active energy', 'kWh'],
  ['Reactive energy lagging', 'kvarh'],
  ['Reactive energy leading', 'kvarh'],
];
const obis: [string, string][] = [
  ['1-1:1.29.0', 'kWh'],
  ['1-1:5.29.0', 'kvarh'],
  ['1-1:8.29.0', 'kvarh'],
];

/** Two lengths of interval side by side: the finer figures stand in every row, the coarser beside every second. */
const twoSteps =
  (isApart: boolean): Dialect['write'] =>
  (coarse) => {
    const half = (reading: (typeof coarse.readings)[number], part: number): string[] => {
      const minute = reading.begin.time.slice(3) === '00' ? ['00', '15'] : ['30', '45'];
      const stamp = `${reading.begin.date} ${reading.begin.time.slice(0, 3)}${minute[part] ?? ''}`;
      const isLost = reading.grade === 'missing';
      const energy = isLost ? '' : String(reading.kwh / 2);
      const beside = isLost || part === 1 ? ['', ''] : [String(reading.lagging), String(reading.leading)];
      const besideStamp = part === 1 ? '' : iso(reading.begin);
      return isApart ? [stamp, energy, '', besideStamp, ...beside] : [stamp, energy, ...beside];
    };
    const header = isApart
      ? ['Time', 'Energy kWh', '', 'Time', 'Lagging kvarh', 'Leading kvarh']
      : ['Time', 'Energy kWh', 'Lagging kvarh', 'Leading kvarh'];
    const rows = coarse.readings.flatMap((reading) => [half(reading, 0), half(reading, 1)]);
    return [header, ...rows].map((cells) => cells.join(',')).join('\n');
  };

/** Several meters, channels or lengths of interval in one file. */
export const severalDialects: Dialect[] = [
  {
    ...step,
    name: 'one of three meters, picked by the map',
    write: rowsByMeter,
    map: { kind: 'intervals', meter: 'South 2' },
  },
  { ...step, name: 'three meters and none picked', write: rowsByMeter, refused: /3 meters: North 1, South 2, 0012/ },
  {
    ...step,
    name: 'one of two columns of meters, the other left out by the map',
    lacksLagging: true,
    lacksLeading: true,
    write: (series) =>
      long(series, {
        header: ['Time', 'Mill A kWh', 'Mill B kWh'],
        stamp: atBegin,
        figures: (one) => [String(one.kwh), '7'],
      }),
    map: { kind: 'intervals', columns: [{ index: 2, name: 'Mill B kWh', role: 'ignore' }] },
  },
  { ...step, name: 'a row a channel, channels by turns', write: (series) => stackedRows(series, english, false) },
  {
    ...step,
    name: 'a row a channel, one channel after the other',
    write: (series) => stackedRows(series, english, true),
  },
  { ...step, name: 'a row a channel named by OBIS codes', write: (series) => stackedRows(series, obis, false) },
  {
    ...step,
    name: 'a row a channel in Wh and varh',
    write: (series) =>
      stackedRows(
        {
          ...series,
          readings: series.readings.map((one) => ({
            ...one,
            kwh: one.kwh * 1000,
            lagging: one.lagging * 1000,
            leading: one.leading * 1000,
          })),
        },
        [
          ['Active energy', 'Wh'],
          ['Lagging', 'varh'],
          ['Leading', 'varh'],
        ],
        false,
      ),
  },
  {
    stepMinutes: 30,
    name: 'two lengths of interval in one table',
    notes: ['steps-joined'],
    write: twoSteps(false),
    carried: (series) => wholeOf(series, {}),
  },
  { stepMinutes: 30, name: 'two lengths of interval side by side', notes: ['steps-joined'], write: twoSteps(true) },
];
