import { bytesOf } from '../files';
import { zip } from '../zip';
import { wholeOf, type Carried, type Dialect } from './dialect';
import type { Series, TrueReading } from './series';

// Records as the meter data file format of the Australian market lays them out (AEMO, MDFF, NEM12): market time is UTC+10 all
// year, a 300 record holds a market day.
const marketMs = 10 * 3_600_000;
const dayMs = 86_400_000;

interface Layout {
  /** Names of the streams drawn, lagging and leading, and their units. */
  streams?: [suffix: string, unit: string, scale: number][];
  hasFrame?: boolean;
  tail?: string;
  nmis?: string[];
  /** Day and quality of a day with marks of its own: by 400 records, or as values left out. */
  isVariable?: boolean;
}

const usual: [string, string, number][] = [
  ['E1', 'kWh', 1],
  ['Q1', 'kvarh', 1],
  ['K1', 'KVARH', 1],
];

type Slot = TrueReading | null;

/** The series cut at market days; null before its beginning and after its end. */
function marketDays({ readings, startMs, stepMinutes }: Series): { date: string; slots: Slot[] }[] {
  const stepMs = stepMinutes * 60_000;
  const first = Math.floor((startMs + marketMs) / dayMs);
  const endMs = startMs + readings.length * stepMs;
  const last = Math.ceil((endMs + marketMs) / dayMs);
  const perDay = dayMs / stepMs;
  return Array.from({ length: last - first }, (_, day) => {
    const openMs = (first + day) * dayMs - marketMs;
    return {
      date: new Date((first + day) * dayMs).toISOString().slice(0, 10).replaceAll('-', ''),
      slots: Array.from(
        { length: perDay },
        (_unused, at) => readings[(openMs + at * stepMs - startMs) / stepMs] ?? null,
      ),
    };
  });
}

const gradeOf = (slot: Slot): 'A' | 'S14' | 'N' =>
  !slot || slot.grade === 'missing' ? 'N' : slot.grade === 'estimated' ? 'S14' : 'A';

/** Ranges of one quality, numbered from 1, both ends included. */
function ranges(slots: readonly Slot[]): { from: number; to: number; grade: string }[] {
  const found: { from: number; to: number; grade: string }[] = [];
  slots.forEach((slot, at) => {
    const open = found.at(-1);
    if (open?.grade === gradeOf(slot)) open.to = at + 1;
    else found.push({ from: at + 1, to: at + 1, grade: gradeOf(slot) });
  });
  return found;
}

function dayRecords(
  date: string,
  slots: readonly Slot[],
  figure: (one: TrueReading) => number,
  tail: string,
): string[] {
  const own = ranges(slots);
  // A null reading is meaningless, not nought: any figure may stand there.
  const figures = slots.map((slot) => (slot ? figure(slot) : 999));
  const [only] = own;
  if (own.length === 1 && only) return [`300,${date},${figures.join(',')},${only.grade},,,20250602090000,${tail}`];
  return [
    `300,${date},${figures.join(',')},V,,,20250602090000,${tail}`,
    ...own.map(({ from, to, grade }) => `400,${from},${to},${grade},,${tail}`),
  ];
}

function text(series: Series, { streams = usual, hasFrame = true, tail = '', nmis = ['NINV000001'] }: Layout): string {
  const days = marketDays(series);
  const body = nmis.flatMap((nmi, meter) =>
    streams.flatMap(([suffix, unit, scale], index) => {
      const figure = (one: TrueReading): number =>
        ([one.kwh, one.lagging, one.leading, 0.5][index] ?? 0) * scale + meter * 7;
      return [
        `200,${nmi},E1Q1K1,1,${suffix},N1,METER${meter},${unit},${series.stepMinutes},20250901${tail}`,
        ...days.flatMap(({ date, slots }) => dayRecords(date, slots, figure, tail)),
      ];
    }),
  );
  const lines = hasFrame ? ['100,NEM12,202506020900,INVMDP,INVRET', ...body, '900'] : body;
  return lines.join('\r\n');
}

/** Whole market days: nothing is read before the series begins and after it ends. */
function wholeDays(series: Series): Carried {
  const whole = wholeOf(series, { marksEstimates: true });
  const slots = marketDays(series).flatMap((day) => day.slots);
  const before = slots.findIndex((slot) => slot !== null);
  const after = slots.length - before - series.readings.length;
  const lay = (figures: number[], filler: number): number[] => [
    ...new Array<number>(before).fill(filler),
    ...figures,
    ...new Array<number>(after).fill(filler),
  ];
  return {
    startMs: series.startMs - before * series.stepMinutes * 60_000,
    kwh: lay(whole.kwh, Number.NaN),
    lagging: lay(whole.lagging, Number.NaN),
    leading: lay(whole.leading, Number.NaN),
    quality: lay(whole.quality, 2),
  };
}

const written = (layout: Layout = {}): Pick<Dialect, 'write' | 'carried' | 'fileName'> => ({
  write: (series) => text(series, layout),
  carried: wholeDays,
  fileName: 'm#1.csv',
});

/** NEM12. */
export const nemDialects: Dialect[] = [
  { name: 'NEM12 of 5 minutes', stepMinutes: 5, ...written() },
  { name: 'NEM12 of 15 minutes', stepMinutes: 15, ...written() },
  { name: 'NEM12 of 30 minutes', stepMinutes: 30, ...written() },
  {
    name: 'NEM12 in Wh and varh',
    stepMinutes: 30,
    ...written({
      streams: [
        ['E1', 'Wh', 1000],
        ['Q1', 'varh', 1000],
        ['K1', 'VARH', 1000],
      ],
    }),
  },
  {
    name: 'NEM12 with export beside',
    stepMinutes: 30,
    notes: ['export-left-out'],
    ...written({ streams: [...usual, ['B1', 'kWh', 1]] }),
  },
  {
    name: 'NEM12 without its first and last record',
    stepMinutes: 30,
    notes: ['no-end-record'],
    ...written({ hasFrame: false }),
  },
  { name: 'NEM12 padded with commas', stepMinutes: 30, ...written({ tail: ',,,' }) },
  {
    name: 'NEM12 of two meters, one picked',
    stepMinutes: 30,
    ...written({ nmis: ['NINV000001', 'NINV000002'] }),
    map: { kind: 'intervals', meter: 'NINV000001' },
  },
  {
    name: 'NEM12 of two meters and none picked',
    stepMinutes: 30,
    ...written({ nmis: ['NINV000001', 'NINV000002'] }),
    refused: /2 meters: NINV000001, NINV000002/,
  },
  {
    name: 'NEM12 in a ZIP',
    stepMinutes: 30,
    carried: wholeDays,
    fileName: 'nem.zip',
    write: (series) => zip([{ name: 'm#1.csv', bytes: bytesOf(text(series, {})) }]),
  },
];
