import { minorUnitDecimals } from '../../units';
import { mostMonths } from '../grammar/examples';
import type { ScheduleExample } from '../model';
import { didYouMean } from '../nearest';
import { asMap, asNumber, asNumbers, checkTornValues } from './fields';
import type { Problems } from './problems';
import type { TextContext } from './text-reader';
import { valueOf, type MapEntry, type MapTree, type Tree } from './tree';

/** Figures of a bill that are no quantity and no line. */
const sums = ['total', 'reactiveCost'];

/** Names an example may use, over all texts; broken entries are among each, so that they cause no further problems. */
export interface KnownNames {
  contract: Set<string>;
  given: Set<string>;
  quantities: Set<string>;
  lines: Set<string>;
  members: Map<string, readonly string[]>;
}

/** The names of all texts of a schedule. */
export function namesOf(texts: { context: TextContext }[]): KnownNames {
  const known: KnownNames = {
    contract: new Set(),
    given: new Set(),
    quantities: new Set(),
    lines: new Set(),
    members: new Map(),
  };
  for (const { context } of texts) {
    const setOf = { contract: known.contract, quantity: known.quantities, line: known.lines };
    for (const [name, { kind }] of context.scope.made) {
      if (kind === 'broken') for (const set of [...Object.values(setOf), known.given]) set.add(name);
      else if (kind !== 'rate') setOf[kind].add(name);
    }
    for (const { name, definition } of context.quantities) if (definition.kind === 'given') known.given.add(name);
    for (const [name, { members }] of context.scope.families) known.members.set(name, members);
  }
  return known;
}

/** Whether a name is allowed here; if not, a problem is noted. */
function isKnownName(
  entry: MapEntry,
  what: string,
  allowed: ReadonlySet<string>,
  known: KnownNames,
  problems: Problems,
): boolean {
  if (allowed.has(entry.key)) return true;
  const members = known.members.get(entry.key);
  if (members?.every((member) => allowed.has(member))) {
    const remedy = `Name ${members.join(', ')}.`;
    problems.add(entry, `"${entry.key}" stands for one value per window.`, remedy);
    return false;
  }
  const fallback = allowed.size > 0 ? `Known are ${[...allowed].join(', ')}.` : 'There is none; leave it out.';
  const isMeasured = known.quantities.has(entry.key);
  if (isMeasured && what === 'quantity given by the bill') {
    problems.add(entry, `"${entry.key}" is worked out from the readings.`, 'Leave it out, or leave the readings out.');
    return false;
  }
  problems.add(entry, `no ${what} is called "${entry.key}".`, didYouMean(entry.key, allowed, fallback));
  return false;
}

/** Numbers by name, all of one kind. */
export function numbersOf(
  map: MapTree,
  field: 'contract' | 'quantities',
  what: string,
  allowed: ReadonlySet<string>,
  known: KnownNames,
  problems: Problems,
): Record<string, number> | undefined | 'problem' {
  const tree = valueOf(map, field);
  if (!tree) return undefined;
  const numbered = asMap(tree, problems, 'Write names with their numbers: { maxKva: 2100 }.');
  if (!numbered || checkTornValues(numbered, problems)) return 'problem';
  const numbers = numbered.entries.map((entry) => {
    if (!isKnownName(entry, what, allowed, known, problems)) return undefined;
    const value = asNumber(entry.value, problems, 'Write a number without unit: 2100.');
    return value === undefined ? undefined : ([entry.key, value] as const);
  });
  if (numbers.some((number) => number === undefined)) return 'problem';
  return Object.fromEntries(numbers as (readonly [string, number])[]);
}

/** Lists of numbers by quantity or line. */
export function historyOf(
  map: MapTree,
  known: KnownNames,
  problems: Problems,
): Record<string, number[]> | undefined | 'problem' {
  const tree = valueOf(map, 'history');
  if (!tree) return undefined;
  const remedy = 'Write the months before the period, the oldest first: { maxKva: [2900, 3000] }.';
  const allowed = new Set([...known.quantities, ...known.lines]);
  const lists = asMap(tree, problems, remedy)?.entries.map((entry) => {
    if (!isKnownName(entry, 'quantity or line', allowed, known, problems)) return undefined;
    const values = asNumbers(entry.value, mostMonths, problems, remedy);
    return values && ([entry.key, values] as const);
  });
  if (!lists || lists.some((list) => list === undefined)) return 'problem';
  return Object.fromEntries(lists as (readonly [string, number[]])[]);
}

/** What must come out, with tolerances. */
export function expectOf(
  map: MapTree,
  currency: string,
  known: KnownNames,
  problems: Problems,
): ScheduleExample['expect'] | undefined {
  const tree = valueOf(map, 'expect');
  const remedy = 'Add expect: { total: 126874.37 }.';
  if (!tree) {
    problems.add(map, 'does not say what must come out.', remedy);
    return undefined;
  }
  const figures = asMap(tree, problems, remedy);
  const within = withinOf(map, problems);
  if (!figures || within === 'problem' || checkTornValues(figures, problems)) return undefined;
  if (figures.entries.length === 0) {
    problems.add(tree, 'says nothing that must come out.', remedy);
    return undefined;
  }
  const allowed = new Set([...sums, ...known.lines, ...known.quantities]);
  const expect = figures.entries.map((entry) => {
    if (!isKnownName(entry, 'line or quantity', allowed, known, problems)) return undefined;
    const value = asNumber(entry.value, problems, 'Write a number: 126874.37.');
    if (value === undefined) return undefined;
    return { name: entry.key, value, tolerance: within ?? usualTolerance(entry.value, currency) };
  });
  return expect.some((figure) => figure === undefined) ? undefined : (expect as ScheduleExample['expect']);
}

function withinOf(map: MapTree, problems: Problems): number | undefined | 'problem' {
  const tree = valueOf(map, 'within');
  if (!tree) return undefined;
  const within = asNumber(tree, problems, 'Write within: 0.005.');
  if (within === undefined) return 'problem';
  if (within > 0) return within;
  problems.add(tree, `${within} is no tolerance.`, 'Write a number above 0: within: 0.005.');
  return 'problem';
}

/** Half the currency's minor unit, or half a unit of the last digit written where that is less; 1e-9 for binary crumbs. */
function usualTolerance(tree: Tree, currency: string): number {
  const written = tree.kind === 'scalar' ? (/\.(\d+)$/.exec(tree.text)?.[1]?.length ?? 0) : 0;
  return 0.5 * 10 ** -Math.max(minorUnitDecimals(currency), written) + 1e-9;
}
