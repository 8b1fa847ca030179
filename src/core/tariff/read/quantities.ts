import { channelOf, isChannelName } from '../channels';
import { quantityFields, quantityKinds } from '../grammar/quantities';
import { fieldNames } from '../grammar/types';
import type { Rounding } from '../../units';
import { clashOf, isEnergyOrPower, wordDimension } from './dimensions';
import { asMap, checkFields, checkTornValues, readRounding } from './fields';
import { readWords } from './inputs';
import { readMeasure, readValue } from './measures';
import { readPast } from './past';
import type { RawQuantity } from './raw-quantity';
import { memberName, type NameInfo } from './scope';
import type { TextContext } from './text-reader';
import { entryOf, valueOf, type MapEntry, type MapTree } from './tree';
import { unitText } from './units';
import { readFormula, readGiven, readPick } from './worked-out';

type Kind = 'sum' | 'highest' | 'lowest' | 'value' | 'formula' | 'pick' | 'past' | 'given';
const kinds = quantityKinds.map(({ name }) => name as Kind);
const common = fieldNames(quantityFields);
const fieldsOf = new Map(quantityKinds.map(({ name, fields }) => [name, fieldNames(fields)]));

/** Reads one entry of `quantities`, expanding it over the windows of its family. */
export function readQuantity(entry: MapEntry, context: TextContext): void {
  const { problems, reader, scope } = context;
  const map = asMap(entry.value, problems, 'Write { sum: kwh }, { formula: ... } and so on.');
  const raw = map && readRaw(entry, map, context);
  const rounding = map ? roundingOf(map, context) : undefined;
  const unit = map ? unitText(map, context) : undefined;
  const windows = raw && (raw.windows ?? reader.windowsOf(raw.expressions, entry));
  const isFine = raw !== undefined && unit !== 'problem' && fitsUnit(map, raw, unit, context);
  const isWhole = windows === undefined || (windows !== 'problem' && hasMembers(entry, raw, windows, context));
  if (!map || !raw || rounding === 'problem' || unit === 'problem' || windows === 'problem' || !isFine || !isWhole) {
    makeBroken(entry, map, context);
    return;
  }
  const words = readWords(map, problems);
  const add = (name: string, window: string | undefined): NameInfo => {
    const { definition, unit: measured } = raw.define(window);
    const shown = unit ?? measured;
    const hasUnit = unit !== undefined || (definition.kind !== 'formula' && definition.kind !== 'pick');
    const plainUnit = shown === 'flag' ? '' : shown;
    context.quantities.push({
      name,
      slot: scope.slots.of(name),
      path: entry.path,
      unit: plainUnit,
      rounding,
      ...words,
      definition,
    });
    const found = shown === '' ? raw.found : reader.dimensionOf(shown);
    return { kind: 'quantity', unit: plainUnit, hasUnit, found };
  };
  if (!windows) {
    scope.make(entry.key, add(entry.key, undefined));
    return;
  }
  const members = windows.map((window) => memberName(entry.key, window));
  const infos = windows.map((window, i) => add(members[i]!, window));
  scope.makeFamily(entry.key, { kind: 'quantity', windows, members }, infos[0]!);
}

/** Whether a unit as said fits what the formula gives. */
function fitsUnit(
  map: MapTree | undefined,
  { found }: RawQuantity,
  unit: string | undefined,
  { problems, reader }: TextContext,
): boolean {
  const said = unit === undefined ? undefined : reader.dimensionOf(unit);
  if (!said || !found || 'literal' in found) return true;
  const clash = clashOf(said, found);
  if (!clash) return true;
  const what = clash === 'thousand' ? 'is a thousand off' : `does not fit: it comes out as ${wordDimension(found, '')}`;
  const at = valueOf(map, 'unit')!;
  // Only energy taken for power, or kilo for mega, is surely wrong; of anything else the author may know more than the formula shows.
  if ([said, found].every(isEnergyOrPower)) {
    problems.add(at, `"${unit}" ${what}.`, 'Check the unit and the names it is worked out from.');
    return false;
  }
  reader.note(at.path, `"${unit}" ${what}.`);
  return true;
}

/** Whether a family's members can have their names, and every family it uses has the windows. */
function hasMembers(
  entry: MapEntry,
  raw: RawQuantity | undefined,
  windows: string[],
  { problems, scope }: TextContext,
): boolean {
  for (const window of windows) {
    const member = memberName(entry.key, window);
    if (scope.made.has(member) || scope.later.has(member)) {
      problems.add(
        entry,
        `makes "${member}" for window "${window}", a name that is used already.`,
        'Every name is used once.',
      );
      return false;
    }
    const lacking = raw?.expressions
      .flatMap(({ families }) => families)
      .find((name) => !scope.families.get(name)?.windows.includes(window));
    if (lacking !== undefined) {
      problems.add(
        entry,
        `"${lacking}" has no value for window "${window}".`,
        'Measure it in this window too, or use total( ).',
      );
      return false;
    }
  }
  return true;
}

/** A broken family keeps its members known too. */
function makeBroken(entry: MapEntry, map: MapTree | undefined, { scope, windows }: TextContext): void {
  const inEach = valueOf(map, 'inEach');
  const words =
    inEach?.kind === 'list' ? inEach.items.flatMap((item) => (item.kind === 'scalar' ? [item.text] : [])) : [];
  const known = words.filter((word) => windows.has(word));
  const info: NameInfo = { kind: 'broken', unit: '', hasUnit: true };
  if (known.length === 0) scope.make(entry.key, info);
  else
    scope.makeFamily(
      entry.key,
      { kind: 'broken', windows: known, members: known.map((word) => memberName(entry.key, word)) },
      info,
    );
}

function roundingOf(map: MapTree, { problems }: TextContext): Rounding | undefined | 'problem' {
  const tree = valueOf(map, 'round');
  return tree ? (readRounding(tree, problems) ?? 'problem') : undefined;
}

function readRaw(entry: MapEntry, map: MapTree, context: TextContext): RawQuantity | undefined {
  const { problems } = context;
  if (checkTornValues(map, problems)) return undefined;
  const kind = kindOf(entry, map, context);
  if (!kind || !checkFields(map, [...fieldsOf.get(kind)!, ...common], `a quantity that says ${kind}`, problems))
    return undefined;
  if (isChannelName(entry.key) && !isPlainlyNamed(entry, map, kind)) {
    const plain = channelOf(entry.key).isPower ? 'highest' : 'sum';
    problems.add(entry, `carries the name of a channel, but is not its plain ${plain}.`, 'Choose another name.');
    return undefined;
  }
  switch (kind) {
    case 'sum':
    case 'highest':
    case 'lowest':
      return readMeasure(map, kind, context);
    case 'value':
      return readValue(map, context);
    case 'formula':
      return readFormula(map, context);
    case 'pick':
      return readPick(map, context);
    case 'past': {
      const past = readPast(map, context);
      return past && { expressions: [past.expression], found: past.found, define: past.define };
    }
    case 'given':
      return readGiven(map, context);
  }
}

function kindOf(entry: MapEntry, map: MapTree, { problems }: TextContext): Kind | undefined {
  const said = kinds.filter((kind) => entryOf(map, kind));
  if (said.length === 1) return said[0];
  const known = [...kinds, ...common, ...[...fieldsOf.values()].flat()];
  if (said.length === 0 && !checkFields(map, known, 'a quantity', problems)) return undefined;
  const several = said.length === 2 ? `says both ${said.join(' and ')}.` : `says ${said.join(', ')} at once.`;
  problems.add(
    entry,
    said.length === 0 ? 'does not say what it is.' : several,
    `Say exactly one of ${kinds.join(', ')}.`,
  );
  return undefined;
}

function isPlainlyNamed(entry: MapEntry, map: MapTree, kind: Kind): boolean {
  const value = valueOf(map, kind);
  const isChannel = value?.kind === 'scalar' && value.text === entry.key;
  return isChannel && (kind === 'sum' || kind === 'highest') && !entryOf(map, 'where');
}
