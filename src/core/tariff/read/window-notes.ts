import { dayKindsOf, dayTokens } from '../calendar/day-kinds';
import { windowsOfDay, type DayWindows } from '../calendar/membership';
import type { ScheduleText } from '../model';

/** Most stretches of time a note names. */
const most = 4;

/** A kind of day: weekday and whether it is a holiday. */
const dayKinds = [false, true].flatMap((isHoliday) =>
  Array.from({ length: 7 }, (_, day) => dayKindsOf(day, isHoliday)),
);

/** Kinds of days by the stretch of their clock that is meant, season by season. */
type Stretches = Map<string, number[]>[];

/** A list of windows that a family is measured in, with the time in which more than one of them holds, and none. */
interface Coverage {
  path: string;
  windows: string[];
  twice: Stretches;
  never: Stretches;
}

/** Notes overlaps and gaps between the windows of one family, over all kinds of days and seasons, with their hours. */
export function addWindowNotes(text: ScheduleText, add: (path: string, message: string) => void): void {
  const seasons = text.seasons?.names ?? [''];
  const found = familiesMeasured(text, seasons.length);
  // Windows are laid out a day at a time: a file may name thousands of them.
  for (let season = 0; found.length > 0 && season < seasons.length; season++) {
    for (const kinds of dayKinds) {
      const ofDay = windowsOfDay(text, season, kinds);
      for (const coverage of found) cover(coverage, ofDay, season, kinds);
    }
  }
  for (const { path, windows, twice, never } of found) {
    const names = windows.join(', ');
    const overlaps = wordStretches(twice, seasons);
    const gaps = wordStretches(never, seasons);
    if (overlaps !== '') add(path, `The windows ${names} overlap, that time counts twice: ${overlaps}.`);
    if (gaps !== '') add(path, `The windows ${names} leave gaps, that time counts in none: ${gaps}.`);
  }
}

/** The lists of windows that families are measured in, each once. */
function familiesMeasured(text: ScheduleText, seasons: number): Coverage[] {
  const found = new Map<string, Coverage>();
  const none = (): Stretches => Array.from({ length: seasons }, () => new Map<string, number[]>());
  for (const [family, { windows }] of text.families) {
    const key = windows.join(', ');
    const isMeasured = text.quantities.some(
      ({ name, definition }) =>
        definition.kind === 'measure' && name.startsWith(family) && definition.window !== undefined,
    );
    if (isMeasured && !found.has(key))
      found.set(key, { path: `quantities.${family}`, windows, twice: none(), never: none() });
  }
  return [...found.values()];
}

function cover({ windows, twice, never }: Coverage, ofDay: DayWindows, season: number, kinds: number): void {
  const count = new Uint16Array(1440);
  for (const window of windows) {
    const inside = ofDay.get(window)!;
    for (let minute = 0; minute < 1440; minute++) count[minute]! += inside[minute]!;
  }
  const note = (stretches: Stretches, span: string) => {
    if (span !== '') stretches[season]!.set(span, [...(stretches[season]!.get(span) ?? []), kinds]);
  };
  note(
    twice,
    wordSpans((minute) => count[minute]! > 1),
  );
  note(
    never,
    wordSpans((minute) => count[minute] === 0),
  );
}

/** Stretches of time in words: `weekdays 12:00-14:00 in winter`. */
function wordStretches(stretches: Stretches, seasons: string[]): string {
  const bySpan = new Map<string, string[]>();
  for (const [season, days] of stretches.entries()) {
    for (const [span, kinds] of days) {
      const words = `${wordDays(kinds)} ${span}`;
      bySpan.set(words, [...(bySpan.get(words) ?? []), seasons[season]!]);
    }
  }
  const all = [...bySpan].map(([words, names]) =>
    names.length === seasons.length ? words : `${words} in ${names.join(' and ')}`,
  );
  const more = all.length > most ? `; and ${all.length - most} more` : '';
  return `${all.slice(0, most).join('; ')}${more}`;
}

function wordSpans(isMeant: (minute: number) => boolean): string {
  const spans: string[] = [];
  let from = -1;
  for (let minute = 0; minute <= 1440; minute++) {
    const isIn = minute < 1440 && isMeant(minute);
    if (isIn && from < 0) from = minute;
    if (isIn || from < 0) continue;
    spans.push(`${wordClock(from)}-${wordClock(minute)}`);
    from = -1;
  }
  return spans.join(' and ');
}

function wordClock(minute: number): string {
  return `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;
}

/** Words of the language that together mean these kinds of days. */
function wordDays(kinds: number[]): string {
  const words: string[] = [];
  let left = kinds;
  for (const [word, bit] of dayTokens) {
    const meant = dayKinds.filter((kind) => (kind & bit) !== 0);
    const isNew = left.some((kind) => (kind & bit) !== 0);
    if (!isNew || !meant.every((kind) => kinds.includes(kind))) continue;
    words.push(word);
    left = left.filter((kind) => (kind & bit) === 0);
  }
  return [...words, ...(left.length > 0 ? ['some holidays'] : [])].join(', ');
}
