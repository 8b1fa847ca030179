import { dayOfDateNumber } from '../formula/compile';
import { contractFields } from '../grammar/entries';
import { fieldNames } from '../grammar/types';
import type { ContractInput } from '../model';
import { asMap, asNumber, asText, checkFields } from './fields';
import { bindPlace, readPlace } from './places';
import type { Problems } from './problems';
import type { TextContext } from './text-reader';
import { valueOf, type ListTree, type MapEntry, type MapTree } from './tree';

/** Reads one entry of `contract`. */
export function readContractInput(entry: MapEntry, context: TextContext): void {
  const { problems, scope } = context;
  const input = contractInput(entry, problems);
  if (!input) {
    scope.makeBroken(entry.key);
    return;
  }
  scope.make(entry.key, {
    kind: 'contract',
    unit: input.unit === 'flag' ? '' : input.unit,
    hasUnit: true,
    found: context.reader.dimensionOf(input.unit),
  });
  context.contract.push({ ...input, name: entry.key, slot: scope.slots.of(entry.key), path: entry.path });
}

function contractInput(entry: MapEntry, problems: Problems): Omit<ContractInput, 'name' | 'slot' | 'path'> | undefined {
  const map = asMap(
    entry.value,
    problems,
    'Write { unit: kVA, default: 2000, range: [100, 50000], label: Contract power }.',
  );
  if (!map || !checkFields(map, fieldNames(contractFields), 'a contract input', problems)) return undefined;
  const unitTree = valueOf(map, 'unit');
  const unit = unitTree ? asText(unitTree, problems, 'Write unit: kVA, or flag, or date.') : { text: '' };
  const defaultTree = valueOf(map, 'default');
  const standard = defaultTree && asNumber(defaultTree, problems, 'Write a number; a date like 20260115.');
  const range = rangeOf(map, problems);
  if (!unit || (defaultTree && standard === undefined) || range === 'problem') return undefined;
  if (standard !== undefined && range && (standard < range[0] || standard > range[1])) {
    problems.add(
      defaultTree!,
      `${standard} lies outside the range ${range[0]} to ${range[1]}.`,
      'Change the default or the range.',
    );
    return undefined;
  }
  if (unit.text === 'date' && standard !== undefined && !isDateNumber(standard)) {
    problems.add(defaultTree!, `${standard} is not a date.`, 'Write it like 20260115.');
    return undefined;
  }
  return { unit: unit.text, default: standard, range, ...readWords(map, problems) };
}

/** Whether a number is a date written like 20260115. */
export function isDateNumber(date: number): boolean {
  try {
    dayOfDateNumber(date);
    return true;
  } catch {
    return false;
  }
}

function rangeOf(map: MapTree, problems: Problems): [number, number] | undefined | 'problem' {
  const tree = valueOf(map, 'range');
  if (!tree) return undefined;
  const items = tree.kind === 'list' ? (tree as ListTree).items : [];
  const [low, high] = items.map((item) => asNumber(item, problems, 'Write [100, 50000].'));
  if (items.length === 2 && low !== undefined && high !== undefined && low <= high) return [low, high];
  problems.add(tree, 'is not a range.', 'Write the least and the greatest value: [100, 50000].');
  return 'problem';
}

/** Reads `label` and `clause`, which may stand on any entry. */
export function readWords(map: MapTree, problems: Problems): { label?: string; clause?: string } {
  const words: { label?: string; clause?: string } = {};
  for (const field of ['label', 'clause'] as const) {
    const tree = valueOf(map, field);
    const text = tree && asText(tree, problems, 'Write a few words.');
    if (text) words[field] = text.text;
  }
  return words;
}

/** Reads one entry of `rates`. */
export function readRate(entry: MapEntry, context: TextContext): void {
  const { problems, reader, scope, seasons } = context;
  const place = readPlace(entry.value, reader, { seasons, months: true });
  if (!place || place.kind === 'windows') {
    scope.makeBroken(entry.key);
    return;
  }
  const bound = bindPlace(place, undefined, reader);
  const found = place.kind === 'same' ? place.expression.found : undefined;
  scope.make(entry.key, { kind: 'rate', unit: '', hasUnit: false, found });
  context.rates.push({ name: entry.key, slot: scope.slots.of(entry.key), path: entry.path, place: bound });
  if (bound.kind === 'months' && bound.byMonth.size === 0)
    problems.add(entry, 'has no month.', 'Write { months: { 2026-07: 0.0031 } }.');
}
