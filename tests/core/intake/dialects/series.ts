import { wallOf, type Wall } from '../files';

/** The one true series of an invented plant, at one length of interval: what every dialect is written from and read back to. */
export interface Series {
  zone: string;
  startMs: number;
  stepMinutes: number;
  readings: TrueReading[];
}

export interface TrueReading {
  utcMs: number;
  /** Wall clock of the beginning, and of the end by the clock that ran at the beginning. */
  begin: Wall;
  end: Wall;
  /** Energy as it flowed, known to the generator even where the meter lost it. */
  kwh: number;
  lagging: number;
  leading: number;
  grade: 'measured' | 'estimated' | 'missing';
}

// Windows of local days that hold both clock changes of the zone, three days around each; a month where there is none.
const windows: Record<string, [from: string, days: number]> = {
  UTC: ['2025-03-27', 37],
  'Asia/Kolkata': ['2025-03-27', 37],
  'America/Chicago': ['2025-03-06', 245],
  'Europe/Lisbon': ['2025-03-27', 217],
  'Australia/Lord_Howe': ['2025-10-02', 189],
};

const baseMinutes = 5;
const perHour = 60 / baseMinutes;
// Hours after the beginning without readings, and with estimated ones; the halves are half an hour.
const lostHours = new Set([30, 31, 400, 777]);
const lostHalf = 200;
const estimatedHours = new Set([50, 51, 300]);
const estimatedHalf = 620;

const gradeOf = (at: number): TrueReading['grade'] => {
  const hour = Math.floor(at / perHour);
  const isFirstHalf = at % perHour < perHour / 2;
  if (lostHours.has(hour) || (hour === lostHalf && isFirstHalf)) return 'missing';
  return estimatedHours.has(hour) || (hour === estimatedHalf && isFirstHalf) ? 'estimated' : 'measured';
};

// Eighths of a kWh: sums, differences and decimal texts of them are exact in binary, so that readings can be held bit for bit.
const kwhOf = (at: number): number => (3200 + ((at * 7) % 2003)) / 8;
const kvarhOf = (at: number): number => (400 + ((at * 11) % 1021)) / 8;
/** Leading in the first five hours of every twenty-four, lagging else, never both. */
const isLeading = (at: number): boolean => Math.floor(at / perHour) % 24 < 5;

/** The instant at which a zone's clock shows the midnight that opens a day, found with the platform's calendar. */
function midnightOf(zone: string, date: string): number {
  for (let hours = -14; hours <= 14; hours += 0.5) {
    const ms = Date.parse(`${date}T00:00:00Z`) + hours * 3_600_000;
    const wall = wallOf(ms, zone);
    if (wall.date === date && wall.time === '00:00') return ms;
  }
  throw new Error(`no midnight of ${date} in ${zone}`);
}

const later = (date: string, days: number): string =>
  new Date(Date.parse(`${date}T00:00:00Z`) + days * 86_400_000).toISOString().slice(0, 10);

/** The wall clock moved on by minutes as a clock on the wall moves, whatever changes lie ahead. */
export function wallPlus(wall: Wall, minutes: number): Wall {
  const [date = '', rest = ''] = new Date(Date.parse(`${wall.date}T${wall.time}:00Z`) + minutes * 60_000)
    .toISOString()
    .split('T');
  const [year = '', month = '', day = ''] = date.split('-');
  return { date, year, month, day, time: rest.slice(0, 5) };
}

const made = new Map<string, Series>();

/** The true series over a zone's window at 5, 15, 30 or 60 minutes; `clock` is the zone whose days it is cut at. */
export function seriesOf(zone: string, stepMinutes: number): Series {
  const key = `${zone} ${stepMinutes}`;
  const known = made.get(key);
  if (known) return known;
  const [from, days] = windows[zone] ?? ['2025-03-27', 37];
  const startMs = midnightOf(zone, from);
  const count = (midnightOf(zone, later(from, days)) - startMs) / (stepMinutes * 60_000);
  const parts = stepMinutes / baseMinutes;
  const readings = Array.from({ length: count }, (_, at): TrueReading => {
    const utcMs = startMs + at * stepMinutes * 60_000;
    const begin = wallOf(utcMs, zone);
    const reading: TrueReading = {
      utcMs,
      begin,
      end: wallPlus(begin, stepMinutes),
      kwh: 0,
      lagging: 0,
      leading: 0,
      grade: 'measured',
    };
    for (let base = at * parts; base < (at + 1) * parts; base += 1) {
      reading.kwh += kwhOf(base);
      reading[isLeading(base) ? 'leading' : 'lagging'] += kvarhOf(base);
      const grade = gradeOf(base);
      if (grade === 'missing' || (grade === 'estimated' && reading.grade === 'measured')) reading.grade = grade;
    }
    return reading;
  });
  const series = { zone, startMs, stepMinutes, readings };
  made.set(key, series);
  return series;
}

/** Clock changes of the series: the first reading after each and how far its clock moved. */
export function clockChanges({ readings, stepMinutes }: Series): { at: number; minutes: number }[] {
  return readings.flatMap(({ begin }, at) => {
    const before = readings[at - 1];
    if (!before) return [];
    const minutes =
      (Date.parse(`${begin.date}T${begin.time}Z`) - Date.parse(`${before.begin.date}T${before.begin.time}Z`)) / 60_000;
    return minutes === stepMinutes ? [] : [{ at, minutes: minutes - stepMinutes }];
  });
}
