import { isChannelName, type ChannelName } from '../channels';
import { cells } from '../grammar/words';
import type { CellKind } from '../model';
import { didYouMean } from '../nearest';
import { unknownWindow } from './clock';
import { asNumber, asText, asWords } from './fields';
import type { RawQuantity } from './raw-quantity';
import type { TextContext } from './text-reader';
import { valueOf, type MapTree } from './tree';

/** Reads a `sum`, `highest` or `lowest`. */
export function readMeasure(
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
    found: raw.found,
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
  const found = cells.find((cell) => cell === word?.text);
  if (found) return found;
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

/** Reads a `value` at the instant of another measure. */
export function readValue(map: MapTree, context: TextContext): RawQuantity | undefined {
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
    found: raw.found,
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
