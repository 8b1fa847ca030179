import { chargeFields, chargeKinds } from '../grammar/charges';
import { windowKinds } from '../grammar/entries';
import { versionParts } from '../grammar/parts';
import { quantityFields, quantityKinds } from '../grammar/quantities';
import { fieldNames } from '../grammar/types';
import { didYouMean } from '../nearest';
import type { Problems } from './problems';
import { entryOf, isWord, valueOf, type MapEntry, type MapTree, type Tree } from './tree';

/** Sections whose entries keep an order that decides what a bill says. */
const orderedSections: ReadonlySet<string> = new Set(['quantities', 'charges']);

/** Sections of named entries that a version may change one by one. */
const entrySections: ReadonlySet<string> = new Set(
  fieldNames(versionParts.filter(({ takes }) => takes.kind === 'entries')),
);

/** Sections a version may change. */
export const versionSections = fieldNames(versionParts);

/** Sections whose entries, added by a version, may say where they stand. */
export const placedSections = ['contract', 'windows', 'quantities', 'charges'] as const;

/** Fields that say what kind of thing an entry is; a version that says another kind drops what belonged to the old one. */
const kindFields = {
  quantities: quantityKinds.map(({ name }) => name),
  charges: chargeKinds.map(({ name }) => name),
  windows: windowKinds.map(({ name }) => name),
} as const;
const lastingFields: ReadonlySet<string> = new Set(fieldNames([...quantityFields, ...chargeFields]));

/**
 * The text of a schedule from a version's day on: the earlier text with what the version changes.
 *
 * Entries keep their place; added ones stand where `before` says. A map by season, window or month is changed key by key where all keys
 * of the version are known to it (months are always added), else replaced; lists are replaced whole.
 *
 * @param base  The whole schedule as it was
 * @param version  What the version says
 */
export function mergeVersion(base: MapTree, version: MapTree, problems: Problems): MapTree {
  let merged = base;
  for (const section of version.entries) {
    if (section.key === 'note') continue;
    merged = setEntry(merged, { ...section, value: mergeSection(section, valueOf(base, section.key), problems) });
  }
  return merged;
}

function mergeSection(section: MapEntry, base: Tree | undefined, problems: Problems): Tree {
  const { value } = section;
  if (base?.kind === 'map' && value.kind === 'map') {
    return entrySections.has(section.key) ? mergeEntries(section.key, base, value, problems) : mergeFields(base, value);
  }
  return value;
}

function mergeEntries(section: string, base: MapTree, changes: MapTree, problems: Problems): MapTree {
  let merged = base;
  for (const [i, change] of changes.entries.entries()) {
    const existing = entryOf(merged, change.key);
    if (isWord(change.value, 'removed')) {
      if (existing) merged = { ...merged, entries: merged.entries.filter((entry) => entry !== existing) };
      else
        problems.add(
          change,
          'is not there to be removed.',
          didYouMean(
            change.key,
            merged.entries.map((entry) => entry.key),
          ),
        );
    } else if (existing) {
      const before = change.value.kind === 'map' ? entryOf(change.value, 'before') : undefined;
      if (before)
        problems.add(
          before,
          'is said of an entry that is there already.',
          'Only a new entry says where it stands; leave it out.',
        );
      const value = mergeEntry(section, existing.value, change.value);
      merged = {
        ...merged,
        entries: merged.entries.map((entry) => (entry === existing ? { ...change, value } : entry)),
      };
    } else {
      const following = changes.entries.slice(i + 1).map((entry) => entry.key);
      merged = { ...merged, entries: insert(section, merged.entries, { added: change, following }, problems) };
    }
  }
  return merged;
}

/**
 * Puts a new entry in its place: where `before` says; in sections whose order decides no bill, which need not say it, above the next
 * entry of the version that is there already, so that this one may use it.
 */
function insert(
  section: string,
  entries: MapEntry[],
  { added, following }: { added: MapEntry; following: string[] },
  problems: Problems,
): MapEntry[] {
  const before = added.value.kind === 'map' ? valueOf(added.value, 'before') : undefined;
  const names = entries.map((entry) => entry.key);
  if (before === undefined && !orderedSections.has(section)) {
    const next = entries.findIndex((entry) => following.includes(entry.key));
    return next < 0 ? [...entries, added] : [...entries.slice(0, next), added, ...entries.slice(next)];
  }
  if (before?.kind !== 'scalar') {
    const remedy = didYouMean(added.key, names, 'Add before: and the name it stands before, or before: end.');
    problems.add(added, 'is new in this version but does not say where it stands.', remedy);
    return [...entries, added];
  }
  const entry = withoutPlace(added);
  if (before.text === 'end') return [...entries, entry];
  const index = names.indexOf(before.text);
  if (index < 0) {
    problems.add(before, `nothing in ${section} is called "${before.text}".`, didYouMean(before.text, names));
    return [...entries, added];
  }
  return [...entries.slice(0, index), entry, ...entries.slice(index)];
}

/** Once an entry stands in its place, `before` has said all it says. */
function withoutPlace(entry: MapEntry): MapEntry {
  if (entry.value.kind !== 'map') return entry;
  return { ...entry, value: { ...entry.value, entries: entry.value.entries.filter(({ key }) => key !== 'before') } };
}

function mergeEntry(section: string, base: Tree, change: Tree): Tree {
  if (base.kind !== 'map' || change.kind !== 'map') return change;
  return mergeFields(dropOldKind(section, base, change), change);
}

function dropOldKind(section: string, base: MapTree, change: MapTree): MapTree {
  if (section !== 'quantities' && section !== 'charges' && section !== 'windows') return base;
  const kinds = kindFields[section];
  const kindOf = (map: MapTree): string | undefined => kinds.find((field) => entryOf(map, field));
  const newKind = kindOf(change);
  // What a percentage is taken per belongs to it: only `percentOf: removed` makes the charge another one.
  const isPartOfPercent =
    newKind === 'per' && entryOf(base, 'percentOf') && !isWord(valueOf(change, 'percentOf'), 'removed');
  if (newKind === undefined || entryOf(base, newKind) || isPartOfPercent) return dropPriceForm(base, change);
  return { ...base, entries: base.entries.filter((entry) => lastingFields.has(entry.key)) };
}

/** `rate` and `tiers` stand for each other: saying one drops the other. */
function dropPriceForm(base: MapTree, change: MapTree): MapTree {
  const dropped = entryOf(change, 'tiers') ? 'rate' : entryOf(change, 'rate') ? 'tiers' : undefined;
  return dropped === undefined ? base : { ...base, entries: base.entries.filter((entry) => entry.key !== dropped) };
}

function mergeFields(base: MapTree, change: MapTree): MapTree {
  let merged = base;
  for (const field of change.entries) {
    if (isWord(field.value, 'removed')) {
      merged = { ...merged, entries: merged.entries.filter((entry) => entry.key !== field.key) };
      continue;
    }
    const old = valueOf(merged, field.key);
    merged = setEntry(merged, { ...field, value: mergeField(field.key, old, field.value) });
  }
  return { ...merged, offset: change.offset, path: change.path };
}

function mergeField(key: string, old: Tree | undefined, value: Tree): Tree {
  if (old?.kind !== 'map' || value.kind !== 'map') return value;
  const isKnown = value.entries.every((entry) => entryOf(old, entry.key));
  return isKnown || key === 'months' ? mergeFields(old, value) : value;
}

function setEntry(map: MapTree, entry: MapEntry): MapTree {
  const index = map.entries.findIndex((existing) => existing.key === entry.key);
  if (index < 0) return { ...map, entries: [...map.entries, entry] };
  return { ...map, entries: map.entries.map((existing, i) => (i === index ? entry : existing)) };
}
