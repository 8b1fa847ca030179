import { asNumber, asText } from './fields';
import type { RawQuantity } from './raw-quantity';
import type { TextContext } from './text-reader';
import { valueOf, type MapTree } from './tree';

/** Reads a `formula`. */
export function readFormula(map: MapTree, { reader }: TextContext): RawQuantity | undefined {
  const raw = reader.parse(valueOf(map, 'formula')!);
  if (!raw) return undefined;
  return {
    expressions: [raw],
    found: raw.found,
    define: (window) => {
      const expression = reader.bind(raw, window);
      return { unit: '', definition: { kind: 'formula', expression } };
    },
  };
}

/** Reads a `pick` with its steps. */
export function readPick(map: MapTree, { problems, reader }: TextContext): RawQuantity | undefined {
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

/** Reads a `given`. */
export function readGiven(map: MapTree, { problems }: TextContext): RawQuantity | undefined {
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
