import { shareOf, type ColumnProfile } from './cells';
import { StampScanner } from './stamps';
import type { ColumnUse } from './column-map';

/** Time-of-day columns of a wide table: a day a row. */
export interface WideColumns {
  columns: ColumnUse[];
  stepMinutes: number;
  why: string;
  sure: boolean;
}

interface NamedTime {
  profile: ColumnProfile;
  /** Minutes after midnight as named. */
  minute: number;
  isSpan: boolean;
}

const validSteps = [5, 10, 15, 20, 30, 60];

/** Finds the columns of a wide table by names that are times, spans of time or numbers in sequence; null if it is none. */
export function findWideColumns(profiles: readonly ColumnProfile[]): WideColumns | null {
  const isFigures = (profile: ColumnProfile): boolean =>
    shareOf(profile, 'number') > 0.9 || profile.kinds.blank === profile.sampled;
  const figures = profiles.filter(isFigures);
  const scanner = new StampScanner();
  const times = figures.flatMap((profile) => {
    const time = timeOfName(profile.name, scanner);
    return time ? [{ profile, ...time }] : [];
  });
  return times.length >= 20 ? byTimes(times) : byOrdinals(figures);
}

function timeOfName(name: string, scanner: StampScanner): { minute: number; isSpan: boolean } | null {
  const found =
    /(\d{1,2}[:.h]\d{2}(?::\d{2})?\s*(?:[ap]\.?m\.?)?\s*(?:[-–]|to)?\s*(?:\d{1,2}[:.h]\d{2}(?::\d{2})?)?)/i.exec(name);
  if (!found) {
    const compact = /^(?:kwh|h|t|v)?[\s_]*([0-2]\d[0-5]\d)$/i.exec(name.trim());
    const digits = compact?.[1];
    return digits && Number(digits) <= 2400
      ? { minute: Number(digits.slice(0, 2)) * 60 + Number(digits.slice(2)), isSpan: false }
      : null;
  }
  const text = (found[1] ?? '')
    .replace(/(\d)[.h](\d)/gi, '$1:$2')
    .replace(/[–]|to/gi, '-')
    .trim();
  if (!scanner.scan(text, 0, text.length) || !scanner.resolve('DMY') || !Number.isNaN(scanner.day)) return null;
  return { minute: scanner.minute, isSpan: scanner.isSpan };
}

function byTimes(times: NamedTime[]): WideColumns | null {
  const leaps = times.slice(1).map((time, at) => time.minute - (times[at]?.minute ?? 0));
  const stepMinutes = mode(leaps.filter((leap) => leap > 0));
  if (!validSteps.includes(stepMinutes)) return null;
  const first = times[0]?.minute ?? 0;
  const isSpan = times.every((time) => time.isSpan);
  const last = times.at(-1)?.minute ?? 0;
  const isEnd = !isSpan && first === stepMinutes && (last === 0 || last === 1440);
  const isBegin = isSpan || first === 0;
  const columns = times.map(({ profile, minute }, at) => {
    const isMidnight = isEnd && minute === 0 && at > 0;
    return column(profile, (isMidnight ? 1440 : minute) - (isEnd ? stepMinutes : 0));
  });
  const sense = isSpan
    ? 'each names a span'
    : isEnd
      ? 'the first ends one step after midnight'
      : 'the first begins at midnight';
  return {
    columns,
    stepMinutes,
    why: `${columns.length} columns are named by times of day; ${sense}`,
    sure: isEnd || isBegin,
  };
}

/** Columns named H1..H24, 1..48 or nameless, as many as a day has intervals (and perhaps an hour's more for the autumn day). */
function byOrdinals(figures: readonly ColumnProfile[]): WideColumns | null {
  const numbered = figures.flatMap((profile) => {
    const found = /^(?:[a-z]{1,8}[\s_.-]*)?0*(\d{1,3})$/i.exec(profile.name.trim());
    return found ? [{ profile, ordinal: Number(found[1]) }] : [];
  });
  const runs = longestRun(numbered);
  const nameless = figures.filter((profile) => profile.name === '');
  const chosen = runs.length >= 23 ? runs.map((entry) => entry.profile) : nameless;
  const stepMinutes = [24, 25, 48, 50, 96, 100, 144, 288].includes(chosen.length)
    ? 60 / (Math.floor(chosen.length / 24) || 1)
    : 0;
  if (!validSteps.includes(stepMinutes)) return null;
  const columns = chosen.map((profile, at) => column(profile, at * stepMinutes));
  return { columns, stepMinutes, why: `${columns.length} columns in sequence fill a day`, sure: runs.length >= 23 };
}

function longestRun(numbered: { profile: ColumnProfile; ordinal: number }[]): typeof numbered {
  let best: typeof numbered = [];
  let run: typeof numbered = [];
  for (const entry of numbered) {
    const follows = run.at(-1)?.ordinal === entry.ordinal - 1;
    run = follows ? [...run, entry] : [entry];
    if (run.length > best.length) best = run;
  }
  return best;
}

const column = (profile: ColumnProfile, minuteOfDay: number): ColumnUse => ({
  index: profile.index,
  name: profile.name,
  role: 'day-value',
  minuteOfDay,
});

function mode(values: readonly number[]): number {
  const counts = new Map<number, number>();
  for (const entry of values) counts.set(entry, (counts.get(entry) ?? 0) + 1);
  let best = 0;
  let most = 0;
  for (const [entry, count] of counts) if (count > most) [best, most] = [entry, count];
  return best;
}
