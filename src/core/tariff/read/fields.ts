import { didYouMean } from '../nearest';
import type { Rounding, RoundingMode } from '../../units';
import type { Problems } from './problems';
import type { ListTree, MapTree, ScalarTree, Tree } from './tree';

/** Refuses entries of a map that are not among those known. */
export function checkFields(map: MapTree, known: readonly string[], ofWhat: string, problems: Problems): boolean {
  let isFine = true;
  for (const entry of map.entries) {
    if (known.includes(entry.key)) continue;
    isFine = false;
    // { per: kwh, rate:0.10 }: without the blank the whole is a key.
    const [, key, value] = /^([A-Za-z]+):(\S.*)$/.exec(entry.key) ?? [];
    if (key !== undefined) {
      problems.add(entry, 'no blank stands behind the colon.', `Write ${key}: ${value}.`);
      continue;
    }
    const fallback = `Known are ${known.join(', ')}.`;
    problems.add(entry, `is not a part of ${ofWhat}.`, didYouMean(entry.key, known, fallback));
  }
  return isFine;
}

/** The map, or a problem. */
export function asMap(tree: Tree, problems: Problems, remedy: string): MapTree | undefined {
  if (tree.kind === 'map') return tree;
  problems.add(tree, tree.kind === 'list' ? 'is a list, not a set of entries.' : 'is not a set of entries.', remedy);
  return undefined;
}

/** The text of a single value, or a problem. */
export function asText(tree: Tree, problems: Problems, remedy: string): ScalarTree | undefined {
  if (tree.kind === 'scalar' && tree.text !== '') return tree;
  problems.add(tree, tree.kind === 'scalar' ? 'is empty.' : 'is not a single value.', remedy);
  return undefined;
}

/** One value or a list of single values. */
export function asWords(tree: Tree, problems: Problems, remedy: string): ScalarTree[] | undefined {
  const items = tree.kind === 'list' ? (tree as ListTree).items : [tree];
  if (items.length === 0) {
    problems.add(tree, 'is an empty list.', remedy);
    return undefined;
  }
  const words = items.map((item) => asText(item, problems, remedy));
  return words.every((word) => word !== undefined) ? words : undefined;
}

/** A plain number, or a problem. */
export function asNumber(tree: Tree, problems: Problems, remedy: string): number | undefined {
  if (tree.kind === 'scalar' && typeof tree.value === 'number' && Number.isFinite(tree.value) && tree.text !== '')
    return tree.value;
  const text = tree.kind === 'scalar' ? `"${tree.text}" is not a number.` : 'is not a number.';
  const comma = tree.kind === 'scalar' ? /^(-?\d+),(\d+)$/.exec(tree.text) : null;
  problems.add(tree, text, comma ? withoutComma(comma[1]!, comma[2]!) : remedy);
  return undefined;
}

/** A number without its comma: three digits behind it may be thousands or decimals. */
function withoutComma(whole: string, behind: string): string {
  return behind.length === 3 ? `Write ${whole}${behind}, or ${whole}.${behind}.` : `Write ${whole}.${behind}.`;
}

/** A list of plain numbers, at least one and at most `most`, or a problem. */
export function asNumbers(tree: Tree, most: number, problems: Problems, remedy: string): number[] | undefined {
  if (tree.kind !== 'list' || tree.items.length === 0) {
    problems.add(tree, tree.kind === 'list' ? 'is an empty list.' : 'is not a list of numbers.', remedy);
    return undefined;
  }
  if (tree.items.length > most) {
    problems.add(tree, `holds ${tree.items.length} numbers, at most ${most} are read.`, 'Leave some out.');
    return undefined;
  }
  const numbers = tree.items.map((item) => asNumber(item, problems, remedy));
  return numbers.every((number) => number !== undefined) ? numbers : undefined;
}

const modes: ReadonlyMap<string, RoundingMode> = new Map([
  ['', 'nearest'],
  ['down', 'down'],
  ['up', 'up'],
  ['half down', 'half down'],
]);

/** `0.01`, `1 half down`: a step and a mode. */
export function readRounding(tree: Tree, problems: Problems): Rounding | undefined {
  const found = tree.kind === 'scalar' ? /^(\d+(?:\.\d+)?)(?:\s+(down|up|half down))?$/.exec(tree.text.trim()) : null;
  const step = Number(found?.[1]);
  const mode = modes.get(found?.[2] ?? '');
  if (found && step > 0 && mode) return { step, mode };
  const text = tree.kind === 'scalar' ? `"${tree.text}" is not a step of rounding.` : 'is not a step of rounding.';
  problems.add(tree, text, 'Write 0.01, or 1 half down, 1 down, 1 up.');
  return undefined;
}

const nullKey = /[)\]]\s*$/;

/**
 * Finds what a comma inside `{ }` tore apart: a decimal comma, or a comma between the values of a function.
 *
 * @returns whether a problem was added
 */
export function checkTornValues(map: MapTree, problems: Problems): boolean {
  for (const [i, entry] of map.entries.entries()) {
    const before = map.entries[i - 1];
    if (entry.value.kind !== 'scalar' || entry.value.value !== null || before?.value.kind !== 'scalar') continue;
    const whole = /^-?\d+$/.exec(before.value.text);
    if (whole && /^\d+$/.test(entry.key)) {
      const what = entry.key.length === 3 ? 'a comma inside a number' : 'a decimal comma';
      problems.add(before, `${what} was read as two entries.`, withoutComma(before.value.text, entry.key));
      return true;
    }
    const isOpen = (before.value.text.match(/\(/g) ?? []).length > (before.value.text.match(/\)/g) ?? []).length;
    if (isOpen || nullKey.test(entry.key)) {
      problems.add(
        { offset: entry.offset, path: before.path },
        'a comma ends the value here.',
        'Write ; between the values: max(a; b).',
      );
      return true;
    }
  }
  return false;
}
