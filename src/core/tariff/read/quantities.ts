import { channelOf, isChannelName, type ChannelName } from '../channels';
import type { CellKind, QuantityDefinition, QuantityEntry } from '../model';
import type { Rounding } from '../../units';
import { didYouMean, nearestName } from '../nearest';
import type { RawExpression } from './expressions';
import { asMap, asNumber, asText, asWords, checkFields, checkTornValues, readRounding } from './fields';
import { readWords } from './inputs';
import { readPast, type RawPast } from './past';
import { memberName, type NameInfo } from './scope';
import type { TextContext } from './text-reader';
import { unknownWindow } from './clock';
import { entryOf, valueOf, type MapEntry, type MapTree } from './tree';

const kinds = ['sum', 'highest', 'lowest', 'value', 'formula', 'pick', 'past', 'given'] as const;
type Kind = (typeof kinds)[number];
const common = ['unit', 'round', 'label', 'clause', 'before'];
const fieldsOf: Record<Kind, string[]> = {
  sum: ['each', 'in', 'inEach', 'where'],
  highest: ['each', 'in', 'inEach', 'where', 'count', 'days'],
  lowest: ['each', 'in', 'inEach', 'where', 'count', 'days'],
  value: ['at'],
  formula: [],
  pick: ['from', 'otherwise'],
  past: ['take', 'over', 'season'],
  given: ['default', 'unity'],
};
const cells: readonly string[] = ['interval', 'demand window', 'hour', 'day'];

/** A quantity parsed: its definition for each window of its family, or for none. */
interface RawQuantity {
  expressions: RawExpression[];
  windows?: string[];
  define(window: string | undefined): { definition: QuantityDefinition; unit: string };
}

/** Reads one entry of `quantities`, expanding it over the windows of its family. */
export function readQuantity(entry: MapEntry, context: TextContext): void {
  const { problems, reader, scope } = context;
  const map = asMap(entry.value, problems, 'Write { sum: kwh }, { formula: ... } and so on.');
  const raw = map && readRaw(entry, map, context);
  const rounding = map ? roundingOf(map, context) : undefined;
  const unit = map ? unitText(map, context) : undefined;
  const familyWindows = raw && (raw.windows ?? reader.windowsOf(raw.expressions, entry));
  if (!map || !raw || rounding === 'problem' || unit === 'problem' || familyWindows === 'problem') {
    makeBroken(entry, map, context);
    return;
  }
  const words = readWords(map, problems);
  const add = (name: string, window: string | undefined): NameInfo => {
    const { definition, unit: measured } = raw.define(window);
    const shown = unit ?? measured;
    const hasUnit = unit !== undefined || (definition.kind !== 'formula' && definition.kind !== 'pick');
    const quantity: QuantityEntry = {
      name,
      slot: scope.slots.of(name),
      path: entry.path,
      unit: shown === 'flag' ? '' : shown,
      rounding,
      ...words,
      definition,
    };
    context.quantities.push(quantity);
    return { kind: 'quantity', unit: quantity.unit, hasUnit };
  };
  if (!familyWindows) {
    scope.make(entry.key, add(entry.key, undefined));
    return;
  }
  const members = familyWindows.map((window) => memberName(entry.key, window));
  for (const [i, member] of members.entries())
    if (scope.made.has(member) || scope.later.has(member)) {
      problems.add(
        entry,
        `makes "${member}" for window "${familyWindows[i]}", a name that is used already.`,
        'Every name is used once.',
      );
    }
  const infos = familyWindows.map((window, i) => add(members[i]!, window));
  scope.makeFamily(entry.key, { kind: 'quantity', windows: familyWindows, members }, infos[0]!);
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

const meterUnits = ['kWh', 'kvarh', 'kVAh', 'kW', 'kvar', 'kVA'];
const otherUnits: ReadonlySet<string> = new Set([
  ...meterUnits,
  'kV',
  'MW',
  'MWh',
  'Mvar',
  'Mvarh',
  'MVA',
  'MVAh',
  'Wh',
  'var',
  'VA',
]);

/**
 * The unit as said. By its unit a quantity is known to be energy, which decides how its line is shared between parts of a period:
 * so a slip in a meter's unit is refused.
 */
function unitText(map: MapTree, { problems }: TextContext): string | undefined | 'problem' {
  const tree = valueOf(map, 'unit');
  if (!tree) return undefined;
  const word = asText(tree, problems, 'Write unit: kVA.');
  if (!word) return 'problem';
  const near = nearestName(word.text, meterUnits, 1);
  if (otherUnits.has(word.text) || near === undefined) return word.text;
  problems.add(word, `"${word.text}" is not a unit of a meter.`, `Did you mean "${near}"?`);
  return 'problem';
}

function roundingOf(map: MapTree, { problems }: TextContext): Rounding | undefined | 'problem' {
  const tree = valueOf(map, 'round');
  return tree ? (readRounding(tree, problems) ?? 'problem') : undefined;
}

function readRaw(entry: MapEntry, map: MapTree, context: TextContext): RawQuantity | undefined {
  const { problems } = context;
  if (checkTornValues(map, problems)) return undefined;
  const said = kinds.filter((kind) => entryOf(map, kind));
  if (said.length !== 1) {
    const isStrange =
      said.length === 0 &&
      !checkFields(map, [...kinds, ...common, ...kinds.flatMap((kind) => fieldsOf[kind])], 'a quantity', problems);
    if (isStrange) return undefined;
    const message =
      said.length === 0
        ? 'does not say what it is.'
        : said.length === 2
          ? `says both ${said.join(' and ')}.`
          : `says ${said.join(', ')} at once.`;
    problems.add(entry, message, `Say exactly one of ${kinds.join(', ')}.`);
    return undefined;
  }
  const kind = said[0]!;
  if (!checkFields(map, [kind, ...fieldsOf[kind], ...common], `a quantity that says ${kind}`, problems))
    return undefined;
  if (isChannelName(entry.key) && !isPlainlyNamed(entry, map, kind)) {
    problems.add(
      entry,
      `carries the name of a channel, but is not its plain ${channelOf(entry.key).isPower ? 'highest' : 'sum'}.`,
      'Choose another name.',
    );
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
    case 'past':
      return fromPast(readPast(map, context));
    case 'given':
      return readGiven(map, context);
  }
}

function isPlainlyNamed(entry: MapEntry, map: MapTree, kind: Kind): boolean {
  const value = valueOf(map, kind);
  const isChannel = value?.kind === 'scalar' && value.text === entry.key;
  return isChannel && (kind === 'sum' || kind === 'highest') && !entryOf(map, 'where');
}

function readMeasure(
  map: MapTree,
  operation: 'sum' | 'highest' | 'lowest',
  context: TextContext,
): RawQuantity | undefined {
  const { problems, reader } = context;
  const tree = valueOf(map, operation)!;
  const raw = reader.parse(tree, { channels: true });
  const whereTree = valueOf(map, 'where');
  const where = whereTree && reader.parse(whereTree, { channels: true });
  const windows = windowsOf(map, context);
  const each = eachOf(map, operation, context);
  const count = countOf(map, context);
  if (!raw || (whereTree && !where) || windows === 'problem' || each === 'problem' || !count) return undefined;
  const channel = raw.formula.kind === 'name' && isChannelName(raw.formula.name) ? raw.formula.name : undefined;
  const unit = reader.unitOf(reader.bind(raw, undefined, { channels: true }));
  if (operation === 'sum' && !mayBeSummed(map, tree.path, unit, channel, each, whereTree !== undefined, context))
    return undefined;
  if (reader.bind(raw, undefined, { channels: true }).channels.length === 0) {
    problems.add(
      tree,
      'reads no channel of the meter.',
      'Measure a channel such as kwh or kva, or write formula: instead.',
    );
    return undefined;
  }
  return {
    expressions: [raw, ...(where ? [where] : [])],
    windows: windows.inEach,
    define: (window) => ({
      unit,
      definition: {
        kind: 'measure',
        operation,
        expression: reader.bind(raw, window, { channels: true }),
        channel,
        each: each ?? (operation === 'sum' ? undefined : 'demand window'),
        window: windows.inEach ? window : windows.in,
        where: where && reader.bind(where, window, { channels: true }),
        ...count,
      },
    }),
  };
}

function mayBeSummed(
  map: MapTree,
  path: string,
  unit: string,
  channel: ChannelName | undefined,
  each: CellKind | undefined,
  hasWhere: boolean,
  { problems }: TextContext,
): boolean {
  const at = { offset: valueOf(map, 'sum')!.offset, path };
  if (['kW', 'kvar', 'kVA'].includes(unit)) {
    const what = channel ? `"${channel}" is a power; powers are not summed.` : 'adds powers; powers are not summed.';
    problems.add(at, what, 'Use highest, or the energy channel.');
    return false;
  }
  const isPlain = channel !== undefined && channel !== 'kvah' && !hasWhere;
  if (isPlain || each) return true;
  const what = channel && !hasWhere ? `sums ${channel}` : hasWhere ? 'sums under a condition' : 'sums a formula';
  problems.add(
    { ...at, path: map.path },
    `${what} but does not say over what.`,
    'Add each: interval, hour or day. For the whole period write a formula.',
  );
  return false;
}

function windowsOf(
  map: MapTree,
  { problems, windows, usedWindows }: TextContext,
): { in?: string; inEach?: string[] } | 'problem' {
  const single = valueOf(map, 'in');
  const each = valueOf(map, 'inEach');
  if (single && each) {
    problems.add(map, 'says both in and inEach.', 'Say in for one window, inEach for one value per window.');
    return 'problem';
  }
  if (single && single.kind !== 'scalar') {
    problems.add(
      single,
      'takes one window.',
      'Say inEach for one value per window; to pool them, define a window that holds them together.',
    );
    return 'problem';
  }
  const tree = single ?? each;
  if (!tree) return {};
  const words = asWords(tree, problems, 'Name windows: [peak, offPeak].') ?? [];
  const names = words.map((word) =>
    windows.has(word.text) ? word.text : unknownWindow(word, windows.keys(), problems),
  );
  if (names.length === 0 || names.some((name) => name === undefined)) return 'problem';
  for (const name of names) usedWindows.add(name!);
  if (new Set(names).size < names.length) {
    problems.add(tree, 'names a window twice.', 'Name each once.');
    return 'problem';
  }
  return single ? { in: names[0] } : { inEach: names as string[] };
}

function eachOf(map: MapTree, operation: string, { problems }: TextContext): CellKind | undefined | 'problem' {
  const tree = valueOf(map, 'each');
  if (!tree) return undefined;
  const remedy = `Write each: ${operation === 'sum' ? 'interval, hour or day' : 'interval, demand window, hour or day'}.`;
  const word = asText(tree, problems, remedy);
  if (word && cells.includes(word.text)) return word.text as CellKind;
  if (word)
    problems.add(word, `"${word.text}" is nothing a measure is settled over.`, didYouMean(word.text, cells, remedy));
  return 'problem';
}

function countOf(map: MapTree, { problems }: TextContext): { count: number; isDistinctDays: boolean } | undefined {
  const tree = valueOf(map, 'count');
  const days = valueOf(map, 'days');
  const count = tree ? asNumber(tree, problems, 'Write count: 3.') : 1;
  if (count === undefined) return undefined;
  if (tree && !(Number.isInteger(count) && count >= 1 && count <= 1000)) {
    problems.add(tree, `${count} is not a count.`, 'Write a whole number from 1 to 1000.');
    return undefined;
  }
  if (days && !(days.kind === 'scalar' && days.text === 'distinct')) {
    problems.add(days, 'is not known here.', 'Write days: distinct, or leave it out.');
    return undefined;
  }
  return { count, isDistinctDays: days !== undefined };
}

function readValue(map: MapTree, context: TextContext): RawQuantity | undefined {
  const { problems, reader, scope } = context;
  const raw = reader.parse(valueOf(map, 'value')!, { channels: true });
  const atTree = valueOf(map, 'at');
  if (!atTree)
    problems.add(map, 'does not say at which instant.', 'Add at: and the name of a highest or lowest above.');
  const at = atTree && reader.parse(atTree);
  if (!raw || !at) return undefined;
  if (at.formula.kind !== 'name' || !hasInstant(at.formula.name, context)) {
    if (at.formula.kind !== 'name' || scope.made.get(at.formula.name)?.kind !== 'broken') {
      problems.add(atTree, `"${at.tree.text}" has no instant.`, 'Name a highest or lowest above.');
    }
    return undefined;
  }
  const unit = reader.unitOf(reader.bind(raw, undefined, { channels: true }));
  const channel = raw.formula.kind === 'name' && isChannelName(raw.formula.name) ? raw.formula.name : undefined;
  return {
    expressions: [raw, at],
    define: (window) => ({
      unit,
      definition: {
        kind: 'value',
        expression: reader.bind(raw, window, { channels: true }),
        channel,
        at: reader.bind(at, window).names[0]!,
      },
    }),
  };
}

function hasInstant(name: string, { quantities, scope }: TextContext): boolean {
  const members = scope.families.get(name)?.members ?? [name];
  return members.every((member) => {
    const definition = quantities.find((quantity) => quantity.name === member)?.definition;
    return definition?.kind === 'measure' && definition.operation !== 'sum';
  });
}

function readFormula(map: MapTree, { reader }: TextContext): RawQuantity | undefined {
  const raw = reader.parse(valueOf(map, 'formula')!);
  if (!raw) return undefined;
  return {
    expressions: [raw],
    define: (window) => {
      const expression = reader.bind(raw, window);
      return { unit: '', definition: { kind: 'formula', expression } };
    },
  };
}

function readPick(map: MapTree, { problems, reader }: TextContext): RawQuantity | undefined {
  const of = reader.parse(valueOf(map, 'pick')!);
  const from = valueOf(map, 'from');
  const otherwiseTree = valueOf(map, 'otherwise');
  if (!from || from.kind !== 'map' || from.entries.length === 0) {
    problems.add(from ?? map, 'has no steps to pick from.', 'Add from: { 0.95: 0, 0.80: 0.04 }.');
    return undefined;
  }
  if (!otherwiseTree) {
    problems.add(map, 'does not say what holds below the last step.', 'Add otherwise: and a value.');
    return undefined;
  }
  const otherwise = reader.parse(otherwiseTree);
  const steps = from.entries.map((step) => {
    const isNumber = /^-?\d+(\.\d+)?$/.test(step.key);
    if (!isNumber)
      problems.add(step, `"${step.key}" is not a number.`, 'Each step begins with the number it holds from.');
    return { from: Number(step.key), raw: step.key, value: isNumber ? reader.parse(step.value) : undefined };
  });
  if (!of || !otherwise || steps.some((step) => step.value === undefined)) return undefined;
  if (new Set(steps.map((step) => step.from)).size < steps.length) {
    problems.add(from, 'has two steps from the same number.', 'Keep one.');
    return undefined;
  }
  steps.sort((a, b) => b.from - a.from);
  return {
    expressions: [of, otherwise, ...steps.map((step) => step.value!)],
    define: (window) => ({
      unit: '',
      definition: {
        kind: 'pick',
        of: reader.bind(of, window),
        steps: steps.map((step) => ({ from: step.from, raw: step.raw, value: reader.bind(step.value!, window) })),
        otherwise: reader.bind(otherwise, window),
      },
    }),
  };
}

function fromPast(raw: RawPast | undefined): RawQuantity | undefined {
  return raw && { expressions: [raw.expression], define: raw.define };
}

function readGiven(map: MapTree, { problems }: TextContext): RawQuantity | undefined {
  const unit = asText(valueOf(map, 'given')!, problems, 'Write given: kWh, or flag.');
  const numberOf = (field: string): number | undefined | 'problem' => {
    const tree = valueOf(map, field);
    return tree ? (asNumber(tree, problems, 'Write a number.') ?? 'problem') : undefined;
  };
  const standard = numberOf('default');
  const unity = numberOf('unity');
  if (!unit || standard === 'problem' || unity === 'problem') return undefined;
  return {
    expressions: [],
    define: () => ({ unit: unit.text, definition: { kind: 'given', default: standard, unity } }),
  };
}
