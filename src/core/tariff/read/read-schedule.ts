import { allParts } from '../grammar/parts';
import { fieldNames } from '../grammar/types';
import { isCalendarDate } from '../../load';
import { place } from '../formula/compile';
import type { Schedule, ScheduleText } from '../model';
import { didYouMean, nearestName } from '../nearest';
import { readExamples } from './examples';
import { asMap, checkFields } from './fields';
import { readHead } from './head';
import { checkSizes, SizeCount } from './limits';
import { mergeVersion, placedSections, versionSections } from './merge';
import { parseTree } from './parse-tree';
import type { Problems } from './problems';
import { readText, type SharedParts } from './read-text';
import { Slots } from './scope';
import { readStraddle, usualStraddle } from './straddle';
import type { TextContext } from './text-reader';
import { entryOf, isWord, valueOf, type MapEntry, type MapTree } from './tree';
import { addVersionNotes } from './version-notes';
import { addWindowNotes } from './window-notes';

const sections = fieldNames(allParts);
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
  checkSizes(root, problems);
  checkPlaces(root, problems);
  const notes: Schedule['notes'] = [];
  const head = readHead(root, problems);
  const straddle = readStraddle(root, problems) ?? usualStraddle;
  const shared: SharedParts = { problems, slots: new Slots(place.names), currency: head.currency, notes };
  const read = readTexts(root, head.inForce, shared);
  const examples = readExamples(root, head, read, problems);
  problems.throwIfAny();
  checkUnused(root, read, problems);
  problems.throwIfAny();
  const texts = read.map(({ text }) => text);
  const lineOrder = orderLines(texts, root, problems);
  problems.throwIfAny();
  addNotes(root, read, notes);
  return { ...head, ...straddle, texts, slots: shared.slots.byName, lineOrder, examples, notes };
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
  for (const section of placedSections) {
    const map = valueOf(root, section);
    for (const { value } of map?.kind === 'map' ? map.entries : []) {
      const before = value.kind === 'map' ? entryOf(value, 'before') : undefined;
      if (before)
        problems.add(before, 'is said outside a version.', 'Put the entry where it belongs and leave this out.');
    }
  }
}

type ReadText = { text: ScheduleText; context: TextContext; merged: MapTree };

function readTexts(root: MapTree, inForce: string | null, shared: SharedParts): ReadText[] {
  const { problems } = shared;
  const versions = valueOf(root, 'versions');
  let merged: MapTree = {
    ...root,
    entries: root.entries.filter(({ key }) => key !== 'versions' && key !== 'examples'),
  };
  const texts = [{ ...readText(merged, inForce ?? beginningOfTime, undefined, shared), merged }];
  const size = new SizeCount(root, problems);
  if (!size.add(texts[0]!.text)) return texts;
  const map = versions && asMap(versions, problems, 'Write a date with what changes from that day on.');
  const entries = [...(map?.entries ?? [])].sort((a, b) => (a.key < b.key ? -1 : 1));
  for (const entry of entries) {
    const version = checkVersion(entry, inForce, problems);
    if (!version) continue;
    merged = mergeVersion(merged, version, problems);
    const note = valueOf(version, 'note');
    const read = readText(merged, entry.key, note?.kind === 'scalar' ? note.text : undefined, shared);
    texts.push({ ...read, merged });
    if (!size.add(read.text)) break;
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
  addVersionNotes(
    root,
    read.map(({ merged }) => merged),
    texts,
    add,
  );
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
