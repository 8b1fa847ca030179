import { didYouMean } from '../nearest';
import type { DemandWindow, SeasonTable, WindowEntry, WindowRule } from '../model';
import { windowKinds } from '../grammar/entries';
import { fieldNames } from '../grammar/types';
import { dayTokens } from '../calendar/day-kinds';
import { asMap, asText, asWords, checkFields } from './fields';
import type { Problems } from './problems';
import { valueOf, type ListTree, type MapEntry, type MapTree, type ScalarTree, type Tree } from './tree';

const noSeason = 255;
const fieldsOf = new Map(windowKinds.map(({ name, fields }) => [name, fieldNames(fields)]));
const spanOfYear = /^(\d{2})-(\d{2})\s+to\s+(\d{2})-(\d{2})$/;

/** Reads `seasons`: spans of the year, both ends included, that fill the year together. */
export function readSeasons(map: MapTree, problems: Problems): SeasonTable | undefined {
  const table: SeasonTable = { names: [], words: [], ofDay: new Uint8Array(13 * 32).fill(noSeason) };
  let rest: MapEntry | undefined;
  for (const entry of map.entries) {
    const index = table.names.push(entry.key) - 1;
    table.words.push('');
    if (!/^[a-z][A-Za-z0-9]*$/.test(entry.key))
      problems.add(entry, `"${entry.key}" is not a name.`, 'A name is a small letter, then letters and digits.');
    const words = asWords(entry.value, problems, 'Write 05-01 to 10-31, or rest.');
    if (!words) return undefined;
    table.words[index] = words.map((word) => word.text).join(', ');
    if (words.length === 1 && words[0]!.text === 'rest') {
      if (rest) problems.add(entry, `"rest" is already the season ${rest.key}.`, 'Only one season can be the rest.');
      rest = entry;
    } else for (const word of words) fillSpan(word, index, table, problems);
  }
  return completeYear(map, rest, table, problems) ? table : undefined;
}

function fillSpan(word: ScalarTree, index: number, table: SeasonTable, problems: Problems): void {
  const [, fromMonth, fromDay, toMonth, toDay] = (spanOfYear.exec(word.text) ?? []).map(Number);
  if (!isDayOfYear(fromMonth, fromDay) || !isDayOfYear(toMonth, toDay)) {
    problems.add(
      word,
      `"${word.text}" is not a span of the year.`,
      'Write 05-01 to 10-31; 11-01 to 03-31 runs over the new year.',
    );
    return;
  }
  const last = toMonth! * 32 + (toMonth === 2 && toDay === 28 ? 29 : toDay!);
  for (let day = fromMonth! * 32 + fromDay!; ; day = nextDay(day)) {
    const other = table.ofDay[day]!;
    if (other !== noSeason && other !== index) {
      problems.add(
        word,
        `${wordDay(day)} is in season "${table.names[other]}" too.`,
        'Every day belongs to one season.',
      );
      return;
    }
    table.ofDay[day] = index;
    if (day === last) return;
  }
}

function completeYear(map: MapTree, rest: MapEntry | undefined, table: SeasonTable, problems: Problems): boolean {
  const restIndex = rest ? table.names.indexOf(rest.key) : noSeason;
  for (let day = 33; ; day = nextDay(day)) {
    if (table.ofDay[day] === noSeason) {
      if (!rest) {
        problems.add(
          map,
          `${wordDay(day)} belongs to no season.`,
          'Together the seasons fill the year; one may be rest.',
        );
        return false;
      }
      table.ofDay[day] = restIndex;
    }
    if (day === 12 * 32 + 31) return true;
  }
}

function isDayOfYear(month: number | undefined, day: number | undefined): boolean {
  if (month === undefined || day === undefined) return false;
  return month >= 1 && month <= 12 && day >= 1 && day <= new Date(Date.UTC(2024, month, 0)).getUTCDate();
}

function nextDay(day: number): number {
  const month = Math.floor(day / 32);
  if (isDayOfYear(month, (day % 32) + 1)) return day + 1;
  return month === 12 ? 33 : (month + 1) * 32 + 1;
}

function wordDay(day: number): string {
  return `${String(Math.floor(day / 32)).padStart(2, '0')}-${String(day % 32).padStart(2, '0')}`;
}

const windowRemedy = 'Write { days: weekdays, hours: 08:00-20:00 }, a list of such rules, or { rest: peak }.';

/** Reads one window of `windows`. `known` are the windows above it. */
export function readWindow(
  entry: MapEntry,
  known: ReadonlyMap<string, WindowEntry>,
  seasons: SeasonTable | undefined,
  problems: Problems,
): WindowEntry | undefined {
  const head = { name: entry.key, path: entry.path };
  if (!/^[a-z][A-Za-z0-9]*$/.test(entry.key)) {
    problems.add(entry, `"${entry.key}" is not a name.`, 'A name is a small letter, then letters and digits.');
    return undefined;
  }
  const { value } = entry;
  const restTree = value.kind === 'map' ? valueOf(value, 'rest') : undefined;
  if (restTree && value.kind === 'map') {
    if (!checkFields(value, fieldsOf.get('rest')!, 'a window that is the rest', problems)) return undefined;
    const words = asWords(restTree, problems, 'Name one window or a list.');
    const names = words?.map((word) =>
      known.has(word.text) ? word.text : unknownWindow(word, known.keys(), problems),
    );
    if (!names || names.some((name) => name === undefined)) return undefined;
    return { ...head, rules: [], restOf: names as string[], words: `all time outside ${names.join(', ')}` };
  }
  const trees: Tree[] = value.kind === 'list' ? (value as ListTree).items : [value];
  const rules = trees.map((tree) => readRule(tree, seasons, problems));
  if (rules.length === 0) problems.add(entry, 'has no rule.', windowRemedy);
  if (rules.length === 0 || rules.some((rule) => rule === undefined)) return undefined;
  return { ...head, rules: rules as WindowRule[], words: trees.map(wordRule).join('; ') };
}

/** Notes a window nobody made. */
export function unknownWindow(word: ScalarTree, known: Iterable<string>, problems: Problems): undefined {
  const names = [...known];
  problems.add(
    word,
    `no window above is called "${word.text}".`,
    didYouMean(word.text, names, names.length ? `There are ${names.join(', ')}.` : 'Make it under windows.'),
  );
  return undefined;
}

function wordRule(tree: Tree): string {
  if (tree.kind !== 'map') return '';
  const part = (key: string): string => {
    const value = valueOf(tree, key);
    if (!value) return '';
    return value.kind === 'list'
      ? value.items.map((item) => (item.kind === 'scalar' ? item.text : '')).join(', ')
      : value.kind === 'scalar'
        ? value.text
        : '';
  };
  return [part('season'), part('days'), part('hours')].filter((text) => text !== '').join(' ');
}

function readRule(tree: Tree, seasons: SeasonTable | undefined, problems: Problems): WindowRule | undefined {
  const map = asMap(tree, problems, windowRemedy);
  if (!map || !checkFields(map, fieldsOf.get('days')!, 'a window', problems)) return undefined;
  const days = valueOf(map, 'days');
  const hours = valueOf(map, 'hours');
  if (!days || !hours) {
    problems.add(
      map,
      `does not say its ${days ? 'hours' : 'days'}.`,
      'Both are required: { days: every day, hours: 22:00-06:00 }.',
    );
    return undefined;
  }
  const mask = readDays(days, problems);
  const spans = readHours(hours, problems);
  const seasonTree = valueOf(map, 'season');
  const inSeasons = seasonTree ? readSeasonNames(seasonTree, seasons, problems) : [];
  return mask === undefined || !spans || !inSeasons ? undefined : { days: mask, spans, seasons: inSeasons };
}

/** Indices of the seasons named. */
export function readSeasonNames(
  tree: Tree,
  seasons: SeasonTable | undefined,
  problems: Problems,
): number[] | undefined {
  const words = asWords(tree, problems, 'Name a season.');
  const indices = words?.map((word) => {
    const index = seasons?.names.indexOf(word.text) ?? -1;
    if (index < 0)
      problems.add(
        word,
        `no season is called "${word.text}".`,
        didYouMean(word.text, seasons?.names ?? [], 'Make it under seasons.'),
      );
    return index;
  });
  return indices?.every((index) => index >= 0) ? indices : undefined;
}

function readDays(tree: Tree, problems: Problems): number | undefined {
  const remedy = `Write ${[...dayTokens.keys()].join(', ')}, or a list of them.`;
  let mask = 0;
  for (const word of asWords(tree, problems, remedy) ?? []) {
    const bit = dayTokens.get(word.text);
    if (bit === undefined) {
      problems.add(word, `"${word.text}" is not a kind of day.`, didYouMean(word.text, dayTokens.keys(), remedy));
      return undefined;
    }
    mask |= bit;
  }
  return mask === 0 ? undefined : mask;
}

function readHours(tree: Tree, problems: Problems): [number, number][] | undefined {
  const remedy = 'Write 08:00-12:00; 22:00-06:00 runs over midnight.';
  const spans: [number, number][] = [];
  for (const word of asWords(tree, problems, remedy) ?? []) {
    const found = /^(\d{2}):(\d{2})-(\d{2}):(\d{2})$/.exec(word.text);
    const [, fromHour, fromMinute, toHour, toMinute] = (found ?? []).map(Number);
    const from = clockMinute(fromHour, fromMinute);
    const to = clockMinute(toHour, toMinute);
    if (from === undefined || to === undefined || from === to || from === 1440) {
      problems.add({ offset: word.offset, path: tree.path }, `"${word.text}" is not a span of the day.`, remedy);
      return undefined;
    }
    if (from < to) spans.push([from, to]);
    else spans.push([from, 1440], [0, to]);
  }
  return spans.length === 0 ? undefined : spans.filter(([from, to]) => from < to);
}

function clockMinute(hour: number | undefined, minute: number | undefined): number | undefined {
  if (hour === undefined || minute === undefined || minute > 59) return undefined;
  const total = hour * 60 + minute;
  return total <= 1440 ? total : undefined;
}

/** Reads `demandWindow`: `15 min` or `30 min rolling every 5 min`. */
export function readDemandWindow(tree: Tree, problems: Problems): DemandWindow | undefined {
  const remedy = 'Write 15 min, or 30 min rolling every 5 min.';
  const word = asText(tree, problems, remedy);
  if (!word) return undefined;
  const found = /^(\d+) min(?: rolling every (\d+) min)?$/.exec(word.text.trim());
  const minutes = Number(found?.[1]);
  const every = found?.[2] === undefined ? undefined : Number(found[2]);
  const divides = (part: number, whole: number): boolean => part > 0 && whole % part === 0;
  if (!found || !divides(minutes, 1440) || (every !== undefined && !divides(every, minutes))) {
    problems.add(word, `"${word.text}" is not a demand window.`, remedy);
    return undefined;
  }
  return every === undefined || every === minutes ? { minutes } : { minutes, everyMinutes: every };
}
