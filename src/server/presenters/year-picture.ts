import { capital } from '../../components/ui/format';
import { addDays, dayNumber, localDateStartMs, weekdayOf, zoneOffsetMs } from '../../core/load';
import { dayKindsOf } from '../../core/tariff/calendar/day-kinds';
import { holidaysOfYear } from '../../core/tariff/calendar/holidays';
import type { Schedule, ScheduleText, WindowEntry } from '../../core/tariff';
import type { WindowSpan, YearPicture } from '../../schemas/schedule-sheet';
import { wordsOfName } from './schedule';

const dayMinutes = 1440;
const stepMinutes = 5;
const minuteMs = 60_000;

/** A year of a text's windows, holidays resolved; null for a text without windows. */
export function yearPicture(schedule: Schedule, text: ScheduleText, year: number): YearPicture | null {
  const windows = windowsShown(text);
  if (windows.length === 0) return null;
  const dates = datesOf(year);
  const holidays = holidaysOfYear(text.holidays, year);
  const days = dates.map((date) => dayOf(date, text, windows, holidays));
  const patterns = [...new Set(days.map((day) => day.key))];
  const oddDays = dates.flatMap((date, day) => {
    const hours = hoursOf(date, schedule.timeZone);
    return hours === 24 ? [] : [{ day, hours }];
  });
  const spansOf = (day: number) => days[day]!.spans;
  const hours = windows.map((_, index) => hoursOfWindow(index, dates, spansOf, oddDays, schedule.timeZone));
  return {
    year,
    windows: windows.map((window, index) => ({
      name: window.name,
      label: wordsOfName(window.name),
      words: window.words,
      hours: hours[index]!,
      isRest: window.restOf !== undefined,
      bySeason: window.rules.some((rule) => rule.seasons.length > 0),
    })),
    seasons: seasonStretches(
      days.map((day) => day.season),
      text,
    ),
    seasonNames: text.seasons?.names ?? [],
    patterns: patterns.map((key) => days.find((day) => day.key === key)!.spans),
    patternOfDay: days.map((day) => patterns.indexOf(day.key)),
    holidays: dates.flatMap((date, day) => (holidays.has(date) ? [day] : [])),
    oddDays,
    strips: stripsOf(days, patterns, text.seasons?.names ?? []),
    totalHours: oddDays.reduce((sum, odd) => sum + odd.hours - 24, dates.length * 24),
  };
}

interface Day {
  spans: WindowSpan[];
  key: string;
  season: number | null;
  kind: 'weekday' | 'Saturday' | 'Sunday' | 'holiday';
}

/** The windows one energy family tells apart, since those divide the year; else all that are named. */
function windowsShown(text: ScheduleText): WindowEntry[] {
  const families = [...text.families.values()].map((family) => family.windows);
  const [largest] = families.sort((a, b) => b.length - a.length);
  const names = largest ?? [...text.windows.keys()];
  return names.flatMap((name) => text.windows.get(name) ?? []);
}

function datesOf(year: number): string[] {
  const first = `${year}-01-01`;
  const count = dayNumber(`${year + 1}-01-01`) - dayNumber(first);
  return Array.from({ length: count }, (_, day) => addDays(first, day));
}

function dayOf(date: string, text: ScheduleText, windows: WindowEntry[], holidays: ReadonlySet<string>): Day {
  const weekday = weekdayOf(dayNumber(date));
  const isHoliday = holidays.has(date);
  const season = text.seasons ? text.seasons.ofDay[Number(date.slice(5, 7)) * 32 + Number(date.slice(8))]! : null;
  const kinds = dayKindsOf(weekday, isHoliday);
  const spansOf = (window: WindowEntry): (readonly [number, number])[] => {
    if (window.restOf) return outside(window.restOf.flatMap((name) => spansOf(text.windows.get(name)!)));
    const rules = window.rules.filter(
      (rule) => (rule.days & kinds) !== 0 && (rule.seasons.length === 0 || rule.seasons.includes(season ?? -1)),
    );
    return joined(rules.flatMap((rule) => rule.spans));
  };
  const spans = windows.flatMap((window, index) => spansOf(window).map(([from, to]) => ({ window: index, from, to })));
  const kind = isHoliday ? 'holiday' : weekday === 0 ? 'Sunday' : weekday === 6 ? 'Saturday' : 'weekday';
  return { spans, key: JSON.stringify(spans), season, kind };
}

/** Spans in order, touching ones made one. */
function joined(spans: (readonly [number, number])[]): [number, number][] {
  const result: [number, number][] = [];
  for (const [from, to] of [...spans].sort((a, b) => a[0] - b[0])) {
    const last = result.at(-1);
    if (last && from <= last[1]) last[1] = Math.max(last[1], to);
    else result.push([from, to]);
  }
  return result;
}

function outside(spans: (readonly [number, number])[]): [number, number][] {
  const result: [number, number][] = [];
  let reached = 0;
  for (const [from, to] of joined(spans)) {
    if (from > reached) result.push([reached, from]);
    reached = Math.max(reached, to);
  }
  if (reached < dayMinutes) result.push([reached, dayMinutes]);
  return result;
}

const startMs = (date: string, timeZone: string) => localDateStartMs(date, timeZone);
const hoursOf = (date: string, timeZone: string) =>
  (startMs(addDays(date, 1), timeZone) - startMs(date, timeZone)) / (60 * minuteMs);

/** Hours of a window over the year; on days whose clock changes each instant is judged by its own clock. */
function hoursOfWindow(
  window: number,
  dates: string[],
  spansOf: (day: number) => WindowSpan[],
  oddDays: { day: number }[],
  timeZone: string,
): number {
  const odd = new Set(oddDays.map(({ day }) => day));
  const minutes = dates.reduce((sum, date, day) => {
    const own = spansOf(day).filter((span) => span.window === window);
    if (!odd.has(day)) return sum + own.reduce((all, { from, to }) => all + to - from, 0);
    return sum + minutesOfOddDay(date, own, timeZone);
  }, 0);
  return Math.round((minutes / 60) * 100) / 100;
}

function minutesOfOddDay(date: string, spans: WindowSpan[], timeZone: string): number {
  let minutes = 0;
  const end = startMs(addDays(date, 1), timeZone);
  for (let at = startMs(date, timeZone); at < end; at += stepMinutes * minuteMs) {
    const clock = ((at + zoneOffsetMs(at, timeZone)) / minuteMs) % dayMinutes;
    if (spans.some(({ from, to }) => clock >= from && clock < to)) minutes += stepMinutes;
  }
  return minutes;
}

function seasonStretches(seasons: (number | null)[], text: ScheduleText): YearPicture['seasons'] {
  const stretches: YearPicture['seasons'] = [];
  seasons.forEach((season, day) => {
    if (season === null) return;
    const last = stretches.at(-1);
    if (last?.season === season && last.to === day) last.to = day + 1;
    else stretches.push({ season, name: text.seasons!.names[season]!, from: day, to: day + 1 });
  });
  return stretches;
}

/** One line for every pattern of a day, named by the days that have it. */
function stripsOf(days: Day[], patterns: string[], seasonNames: string[]): YearPicture['strips'] {
  return patterns.map((key, pattern) => {
    const own = days.filter((day) => day.key === key);
    const seasons = [...new Set(own.map((day) => day.season))];
    const kinds = new Set(own.map((day) => day.kind));
    const isAllSeasons = seasonNames.length === 0 || seasons.length === seasonNames.length;
    const season = isAllSeasons ? '' : `${seasons.map((index) => seasonNames[index ?? 0]).join(', ')} `;
    return { label: capital(`${season}${kindWords(kinds)}`), pattern };
  });
}

function kindWords(kinds: Set<Day['kind']>): string {
  if (kinds.size === 4) return 'every day';
  const words = ['weekday', kinds.has('Saturday') && kinds.has('Sunday') ? 'weekend' : '', 'holiday'].filter((word) =>
    word === 'weekend' ? true : kinds.has(word as Day['kind']),
  );
  const single = (['Saturday', 'Sunday'] as const).filter((day) => kinds.has(day) && !words.includes('weekend'));
  return [...words.filter((word) => word !== 'holiday'), ...single, ...words.filter((word) => word === 'holiday')].join(
    ', ',
  );
}
