import type { NumberPlace, SeasonTable } from '../model';
import { didYouMean } from '../nearest';
import type { ExpressionReader, RawExpression } from './expressions';
import { asMap, checkTornValues } from './fields';
import { entryOf, valueOf, type MapTree, type Tree } from './tree';

/** A number place parsed, families not yet bound. */
export type RawPlace =
  | { kind: 'same'; expression: RawExpression }
  | { kind: 'seasons'; bySeason: RawExpression[] }
  | { kind: 'months'; byMonth: ReadonlyMap<string, RawExpression>; path: string }
  | { kind: 'windows'; byWindow: ReadonlyMap<string, RawPlace> };

/** What the place of a number allows. */
export interface PlaceRules {
  seasons?: SeasonTable;
  /** A map by month may stand here. */
  months?: boolean;
  /** Windows of the charge's family; a map by window may stand here. */
  windows?: string[];
}

/** Reads a number, a formula, or a map by window, season or month. A problem gives nothing. */
export function readPlace(tree: Tree, reader: ExpressionReader, rules: PlaceRules): RawPlace | undefined {
  if (tree.kind !== 'map') {
    const expression = reader.parse(tree, { makesMoney: true });
    return expression && { kind: 'same', expression };
  }
  if (checkTornValues(tree, reader.problems)) return undefined;
  const months = entryOf(tree, 'months');
  if (months) return rules.months ? readMonths(tree, months.value, reader) : misplacedMonths(tree, reader);
  if (rules.windows?.some((window) => entryOf(tree, window))) return readByWindow(tree, reader, rules, rules.windows);
  return readBySeason(tree, reader, rules);
}

function misplacedMonths(tree: MapTree, reader: ExpressionReader): undefined {
  reader.problems.add(
    tree,
    'gives values by month, which only rates can.',
    'Name it under rates and use its name here.',
  );
  return undefined;
}

function readMonths(tree: MapTree, months: Tree, reader: ExpressionReader): RawPlace | undefined {
  const { problems } = reader;
  const map = asMap(months, problems, 'Write { 2026-07: 0.0031 }.');
  if (!map) return undefined;
  const byMonth = new Map<string, RawExpression>();
  for (const entry of map.entries) {
    if (!/^\d{4}-(0[1-9]|1[0-2])$/.test(entry.key)) {
      problems.add(entry, `"${entry.key}" is not a month.`, 'Write 2026-07.');
      return undefined;
    }
    const expression = reader.parse(entry.value, { makesMoney: true });
    if (!expression) return undefined;
    byMonth.set(entry.key, expression);
  }
  return { kind: 'months', byMonth, path: `${tree.path}.months` };
}

function readByWindow(
  tree: MapTree,
  reader: ExpressionReader,
  rules: PlaceRules,
  windows: string[],
): RawPlace | undefined {
  const { problems } = reader;
  const byWindow = new Map<string, RawPlace>();
  for (const entry of tree.entries) {
    if (windows.includes(entry.key)) continue;
    problems.add(
      entry,
      `"${entry.key}" is not one of the windows charged here.`,
      didYouMean(entry.key, windows, `They are ${windows.join(', ')}.`),
    );
    return undefined;
  }
  for (const window of windows) {
    const value = valueOf(tree, window);
    if (!value) {
      problems.add(tree, `no value for window "${window}".`, 'Give one for every window.');
      return undefined;
    }
    const inner = readPlace(value, reader, { ...rules, windows: undefined });
    if (!inner) return undefined;
    byWindow.set(window, inner);
  }
  return { kind: 'windows', byWindow };
}

function readBySeason(tree: MapTree, reader: ExpressionReader, { seasons, windows }: PlaceRules): RawPlace | undefined {
  const { problems } = reader;
  const names = seasons?.names ?? [];
  for (const entry of tree.entries) {
    if (names.includes(entry.key)) continue;
    const known = [...names, ...(windows ?? [])];
    const fallback = known.length ? `Known are ${known.join(', ')}.` : 'Make it under seasons.';
    problems.add(entry, `no season is called "${entry.key}".`, didYouMean(entry.key, known, fallback));
    return undefined;
  }
  const bySeason: RawExpression[] = [];
  for (const season of names) {
    const value = valueOf(tree, season);
    if (!value) {
      problems.add(tree, `no value for season "${season}".`, 'Give one for every season.');
      return undefined;
    }
    const expression = reader.parse(value, { makesMoney: true });
    if (!expression) return undefined;
    bySeason.push(expression);
  }
  return { kind: 'seasons', bySeason };
}

/** Formulas in a place, for the families they use. */
export function expressionsIn(place: RawPlace | undefined): RawExpression[] {
  switch (place?.kind) {
    case undefined:
      return [];
    case 'same':
      return [place.expression];
    case 'seasons':
      return place.bySeason;
    case 'months':
      return [...place.byMonth.values()];
    case 'windows':
      return [...place.byWindow.values()].flatMap(expressionsIn);
  }
}

/** Binds a place to a window of its family, or to none. */
export function bindPlace(place: RawPlace, window: string | undefined, reader: ExpressionReader): NumberPlace {
  switch (place.kind) {
    case 'same':
      return { kind: 'same', expression: reader.bind(place.expression, window) };
    case 'seasons':
      return { kind: 'seasons', bySeason: place.bySeason.map((raw) => reader.bind(raw, window)) };
    case 'months': {
      const bound = [...place.byMonth].map(([month, raw]) => [month, reader.bind(raw, window)] as const);
      return { kind: 'months', byMonth: new Map(bound), path: place.path };
    }
    case 'windows':
      return bindPlace(place.byWindow.get(window ?? '') ?? [...place.byWindow.values()][0]!, window, reader);
  }
}
