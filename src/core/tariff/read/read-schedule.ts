import { addWindowNotes } from './window-notes';
import { isCalendarDate, isTimeZone } from '../../load';
import { place } from '../formula/compile';
import type { Schedule, ScheduleSource, ScheduleText, Straddle } from '../model';
import { didYouMean, nearestName } from '../nearest';
import { asMap, asText, checkFields } from './fields';
import { mergeVersion, versionSections } from './merge';
import { parseTree } from './parse-tree';
import type { Problems } from './problems';
import { readText, type SharedParts } from './read-text';
import { Slots } from './scope';
import type { TextContext } from './text-reader';
import { entryOf, isWord, valueOf, type MapEntry, type MapTree } from './tree';

const sections = [
  'schedule',
  'title',
  'currency',
  'timeZone',
  'source',
  'inForce',
  'demandWindow',
  'holidays',
  'straddle',
  'rounding',
  'zeroKwh',
  'contract',
  'rates',
  'seasons',
  'windows',
  'quantities',
  'charges',
  'versions',
];
const beginningOfTime = '0001-01-01';

/**
 * Parses and validates a schedule written in the schedule language.
 *
 * @param yamlText  Text of a schedule file: YAML 1.2 core, at most 200 kB
 * @returns the schedule, with notes on what the file leaves open
 * @throws {ScheduleError} with the place and remedy of every problem, at most one for each entry
 */
export function readSchedule(yamlText: string): Schedule {
  const { root: tree, problems } = parseTree(yamlText);
  checkFields(tree, sections, 'a schedule', problems);
  const root = withMeantParts(tree, sections);
  checkPlaces(root, problems);
  const notes: Schedule['notes'] = [];
  const head = readHead(root, problems);
  const shared: SharedParts = { problems, slots: new Slots(place.names), currency: head.currency, notes };
  const read = readTexts(root, head.inForce, shared);
  problems.throwIfAny();
  checkUnused(root, read, problems);
  problems.throwIfAny();
  const texts = read.map(({ text }) => text);
  const lineOrder = orderLines(texts, root, problems);
  problems.throwIfAny();
  addNotes(root, read, notes);
  return { ...head, straddle: head.straddle ?? 'days', texts, slots: shared.slots.byName, lineOrder, notes };
}

/** A misspelt part is read as the one that is meant, so that what it holds stays known and causes no further problems. */
function withMeantParts(map: MapTree, known: readonly string[]): MapTree {
  const lacking = known.filter((part) => !entryOf(map, part));
  const entries = map.entries.map((entry) => {
    const meant = known.includes(entry.key) ? undefined : nearestName(entry.key, lacking);
    return meant === undefined ? entry : { ...entry, key: meant };
  });
  return { ...map, entries };
}

/** Outside versions the file's own order holds: `before` says nothing there. */
function checkPlaces(root: MapTree, problems: Problems): void {
  for (const section of ['quantities', 'charges']) {
    const map = valueOf(root, section);
    for (const { value } of map?.kind === 'map' ? map.entries : []) {
      const before = value.kind === 'map' ? entryOf(value, 'before') : undefined;
      if (before)
        problems.add(before, 'is said outside a version.', 'Put the entry where it belongs and leave this out.');
    }
  }
}

type Head = Omit<Schedule, 'texts' | 'slots' | 'lineOrder' | 'notes' | 'straddle'> & { straddle?: Straddle };

function readHead(root: MapTree, problems: Problems): Head {
  const text = (key: string, remedy: string, isRequired: boolean): string => {
    const tree = valueOf(root, key);
    if (!tree && isRequired) problems.add({ offset: root.offset, path: key }, 'is missing.', remedy);
    return (tree && asText(tree, problems, remedy)?.text) ?? '';
  };
  const id = text('schedule', 'Write schedule: and an id such as millrace-large.', true);
  if (id !== '' && !/^[a-z0-9]+(-[a-z0-9]+)*$/.test(id)) {
    problems.add(
      entryOf(root, 'schedule')!,
      `"${id}" is not an id.`,
      'Write small letters, digits and single hyphens: millrace-large.',
    );
  }
  const currency = text('currency', 'Write currency: EUR.', true);
  const isCurrency = /^[A-Z]{3}$/.test(currency);
  if (currency !== '' && !isCurrency)
    problems.add(entryOf(root, 'currency')!, `"${currency}" is not a currency.`, 'Write its three letters: EUR.');
  const timeZone = text('timeZone', 'Write timeZone: Europe/Lisbon.', true);
  if (timeZone !== '' && !isTimeZone(timeZone))
    problems.add(
      entryOf(root, 'timeZone')!,
      `"${timeZone}" is not a time zone.`,
      'Write its name in the time zone database: Europe/Lisbon.',
    );
  return {
    id,
    title: text('title', 'Write title: and a few words.', false) || id,
    currency: isCurrency ? currency : 'EUR',
    timeZone,
    source: readSource(root, problems),
    inForce: readInForce(root, problems),
    straddle: readStraddle(root, problems),
  };
}

function readInForce(root: MapTree, problems: Problems): string | null {
  const tree = valueOf(root, 'inForce');
  const word = tree && asText(tree, problems, 'Write inForce: 2026-01-01.');
  if (!word) return null;
  if (isCalendarDate(word.text)) return word.text;
  problems.add(word, `"${word.text}" is not a date.`, 'Write 2026-01-01.');
  return null;
}

function readStraddle(root: MapTree, problems: Problems): Straddle | undefined {
  const known = ['intervals', 'days', 'start', 'end'] as const;
  const tree = valueOf(root, 'straddle');
  const word = tree && asText(tree, problems, `Write ${known.join(', ')}.`);
  const found = known.find((rule) => rule === word?.text);
  if (word && !found)
    problems.add(
      word,
      `"${word.text}" is no way to divide a bill.`,
      didYouMean(word.text, known, `Write ${known.join(', ')}.`),
    );
  return found;
}

function readSource(root: MapTree, problems: Problems): ScheduleSource {
  const tree = valueOf(root, 'source');
  const map = tree && asMap(tree, problems, 'Write { publisher: ..., title: ..., date: 2026-01-01, status: found }.');
  const source: ScheduleSource = {};
  if (!map || !checkFields(map, ['publisher', 'title', 'date', 'status', 'url'], 'a source', problems)) return source;
  for (const entry of map.entries) {
    const word = asText(entry.value, problems, 'Write a few words.');
    if (!word) continue;
    if (entry.key === 'status') {
      const statuses = ['found', 'memory', 'invented'] as const;
      source.status = statuses.find((status) => status === word.text);
      if (!source.status) problems.add(word, `"${word.text}" is not a status.`, `Write ${statuses.join(', ')}.`);
    } else source[entry.key as 'publisher' | 'title' | 'date' | 'url'] = word.text;
  }
  return source;
}

type ReadText = { text: ScheduleText; context: TextContext };

function readTexts(root: MapTree, inForce: string | null, shared: SharedParts): ReadText[] {
  const { problems } = shared;
  const versions = valueOf(root, 'versions');
  let merged: MapTree = { ...root, entries: root.entries.filter((entry) => entry.key !== 'versions') };
  const texts = [readText(merged, inForce ?? beginningOfTime, undefined, shared)];
  const map = versions && asMap(versions, problems, 'Write a date with what changes from that day on.');
  const entries = [...(map?.entries ?? [])].sort((a, b) => (a.key < b.key ? -1 : 1));
  for (const entry of entries) {
    const version = checkVersion(entry, inForce, problems);
    if (!version) continue;
    merged = mergeVersion(merged, version, problems);
    const note = valueOf(version, 'note');
    texts.push(readText(merged, entry.key, note?.kind === 'scalar' ? note.text : undefined, shared));
  }
  return texts;
}

function checkVersion(entry: MapEntry, inForce: string | null, problems: Problems): MapTree | undefined {
  if (!isCalendarDate(entry.key)) {
    problems.add(entry, `"${entry.key}" is not a date.`, 'Write 2026-08-01.');
    return undefined;
  }
  if (inForce !== null && entry.key <= inForce) {
    problems.add(
      entry,
      `does not lie after inForce, ${inForce}.`,
      'Move the date, or put the change into the text above.',
    );
    return undefined;
  }
  const map = asMap(entry.value, problems, 'Write what changes from that day on.');
  if (!map || checkFields(map, versionSections, 'a version', problems)) return map;
  const { entries } = withMeantParts(map, versionSections);
  return { ...map, entries: entries.filter(({ key }) => versionSections.includes(key)) };
}

/** Rates and contract inputs that no text uses, and windows that a version makes and nothing uses, are slips. */
function checkUnused(root: MapTree, read: ReadText[], problems: Problems): void {
  const used = new Set(read.flatMap(({ context }) => [...context.scope.used]));
  const others = new Set(
    read.flatMap(({ context }) => [...context.rates, ...context.contract].map(({ name }) => name)),
  );
  const usedOthers = [...others].filter((name) => used.has(name));
  for (const tree of [root, ...versionMaps(root)]) {
    for (const section of ['contract', 'rates']) {
      const map = valueOf(tree, section);
      for (const entry of map?.kind === 'map' ? map.entries : []) {
        if (!used.has(entry.key) && !isWord(entry.value, 'removed'))
          problems.add(entry, 'is used nowhere.', didYouMean(entry.key, usedOthers, 'Use it or leave it out.'));
      }
    }
  }
  checkUnusedWindows(root, read, problems);
}

function checkUnusedWindows(root: MapTree, read: ReadText[], problems: Problems): void {
  const base = valueOf(root, 'windows');
  const baseNames = base?.kind === 'map' ? base.entries.map((entry) => entry.key) : [];
  const used = new Set(
    read.flatMap(({ context }) => [
      ...context.usedWindows,
      ...[...context.windows.values()].flatMap((window) => window.restOf ?? []),
    ]),
  );
  for (const version of versionMaps(root)) {
    const windows = valueOf(version, 'windows');
    for (const entry of windows?.kind === 'map' ? windows.entries : []) {
      if (baseNames.includes(entry.key) || used.has(entry.key)) continue;
      problems.add(
        entry,
        'is new in this version and used nowhere.',
        didYouMean(entry.key, baseNames, 'Use it or leave it out.'),
      );
    }
  }
}

function versionMaps(root: MapTree): MapTree[] {
  const versions = valueOf(root, 'versions');
  return (versions?.kind === 'map' ? versions.entries : []).flatMap((entry) =>
    entry.value.kind === 'map' ? [entry.value] : [],
  );
}

/** One order of all lines over all texts, each text's own order kept. */
function orderLines(texts: ScheduleText[], root: MapTree, problems: Problems): string[] {
  const order: string[] = [];
  for (const text of texts) {
    let at = 0;
    for (const { name } of text.charges) {
      const index = order.indexOf(name);
      if (index < 0) order.splice(at++, 0, name);
      else if (index >= at) at = index + 1;
      else
        problems.add(
          entryOf(root, 'versions') ?? root,
          `line "${name}" changes its place from ${text.from} on.`,
          'Give the line that comes back another name.',
        );
    }
  }
  return order;
}

function addNotes(root: MapTree, read: ReadText[], notes: Schedule['notes']): void {
  const add = (path: string, message: string): void => {
    if (!notes.some((note) => note.path === path && note.message === message)) notes.push({ path, message });
  };
  const texts = read.map(({ text }) => text);
  const isDivided = texts.length > 1 || texts.some((text) => text.dependsOnSeason || text.dependsOnMonth);
  if (isDivided && !valueOf(root, 'straddle'))
    add('straddle', 'The file does not say how a bill across two texts, seasons or rider months is divided: by days.');
  if (!valueOf(root, 'inForce'))
    add('inForce', 'The file does not say from which day it holds: every period is priced.');
  if (!valueOf(root, 'source')) add('source', 'The file does not say where the tariff was read.');
  if (!texts.some((text) => text.charges.length > 0)) add('charges', 'The schedule charges nothing.');
  for (const { text, context } of read) {
    const needsWindow = text.quantities.some(
      ({ definition }) => definition.kind === 'measure' && definition.each === 'demand window',
    );
    if (needsWindow && !text.demandWindow)
      add('demandWindow', "The file does not say the demand window: the series' own interval is taken.");
    for (const quantity of text.quantities) {
      if (!context.scope.used.has(quantity.name) && !isFamilyUsed(quantity.name, context))
        add(quantity.path, `"${quantity.name}" is used by no line: it is shown, not charged.`);
    }
    addWindowNotes(text, add);
  }
}

function isFamilyUsed(member: string, { scope }: TextContext): boolean {
  return [...scope.families].some(([name, family]) => family.members.includes(member) && scope.used.has(name));
}
