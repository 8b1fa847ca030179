import { chargeFields, chargeKinds } from '../grammar/charges';
import { fieldNames } from '../grammar/types';
import { groups } from '../grammar/words';
import type { ChargeDefinition, ChargeEntry, ChargeGroup, Expression } from '../model';
import { didYouMean } from '../nearest';
import { money } from './dimensions';
import type { RawExpression } from './expressions';
import { asMap, asText, asWords, checkFields, checkTornValues, readRounding } from './fields';
import { readWords } from './inputs';
import { bindPlace, expressionsIn, readPlace } from './places';
import { readPrice } from './prices';
import { memberName } from './scope';
import type { TextContext } from './text-reader';
import { entryOf, valueOf, type MapEntry, type MapTree, type Tree } from './tree';

type Kind = 'amount' | 'per' | 'percentOf' | 'topUp' | 'cap';
const common = fieldNames(chargeFields);
const fieldsOf = new Map(chargeKinds.map(({ name, fields }) => [name, fieldNames(fields)]));

/** A charge parsed: its formulas, for the families they use, and its definition for a window. */
interface RawCharge {
  expressions: RawExpression[];
  define(window: string | undefined): ChargeDefinition;
}

/** Reads one entry of `charges`, expanding it over the windows of its family. */
export function readCharge(entry: MapEntry, context: TextContext): void {
  const { problems, reader, scope } = context;
  const map = asMap(entry.value, problems, 'Write { per: kwh, rate: 0.10, group: energy } and so on.');
  const raw = map && readRaw(entry, map, context);
  const head = map && readHead(entry, map, context);
  const windows = raw && head && reader.windowsOf([...raw.expressions, ...(head.when ? [head.when] : [])], entry);
  if (!raw || !head || windows === 'problem') {
    scope.makeBroken(entry.key);
    return;
  }
  const add = (name: string, window: string | undefined): void => {
    const when = head.when && reader.bind(head.when, window);
    const heading = head.words.label ?? wordsOf(entry.key);
    const label = window === undefined ? heading : `${heading}, ${wordsOf(window).toLowerCase()}`;
    const charge: ChargeEntry = {
      name,
      slot: scope.slots.of(name),
      path: entry.path,
      group: head.group,
      rounding: head.rounding,
      ...head.words,
      heading,
      label,
      when,
      definition: raw.define(window),
    };
    context.charges.push(charge);
  };
  const info = { kind: 'line', unit: context.currency, hasUnit: true, found: money } as const;
  if (!windows) {
    add(entry.key, undefined);
    scope.make(entry.key, info);
    return;
  }
  const members = windows.map((window) => memberName(entry.key, window));
  for (const member of members)
    if (scope.made.has(member) || scope.later.has(member)) {
      problems.add(entry, `makes a line "${member}", a name that is used already.`, 'Every name is used once.');
    }
  for (const [i, window] of windows.entries()) add(members[i]!, window);
  scope.makeFamily(entry.key, { kind: 'line', windows, members }, info);
}

/** `fuelRider` in words: `Fuel rider`. */
function wordsOf(name: string): string {
  const words = name.replace(
    /([a-z0-9])([A-Z])/g,
    (_, before: string, after: string) => `${before} ${after.toLowerCase()}`,
  );
  return words.charAt(0).toUpperCase() + words.slice(1);
}

interface Head {
  group: ChargeGroup;
  rounding: ChargeEntry['rounding'];
  when?: RawExpression;
  words: { label?: string; clause?: string };
}

function readHead(entry: MapEntry, map: MapTree, context: TextContext): Head | undefined {
  const { problems, reader } = context;
  const groupTree = valueOf(map, 'group');
  if (!groupTree) {
    problems.add(entry, 'does not say its group.', `Add group: ${groups.join(', ')}.`);
    return undefined;
  }
  const group = asText(groupTree, problems, `Write ${groups.join(', ')}.`);
  const known = groups.find((name) => name === group?.text);
  if (group && !known) {
    problems.add(
      groupTree,
      `"${group.text}" is not a group.`,
      didYouMean(group.text, groups, `Write ${groups.join(', ')}.`),
    );
    return undefined;
  }
  const roundTree = valueOf(map, 'round');
  const rounding = roundTree ? readRounding(roundTree, problems) : context.rounding;
  const whenTree = valueOf(map, 'when');
  const when = whenTree && reader.parse(whenTree);
  if (!known || !rounding || (whenTree && !when)) return undefined;
  return { group: known, rounding, when, words: readWords(map, problems) };
}

function kindOf(entry: MapEntry, map: MapTree, context: TextContext): Kind | undefined {
  const said = (['amount', 'percentOf', 'topUp', 'cap'] as const).filter((kind) => entryOf(map, kind));
  const all: Kind[] = said.length === 0 && entryOf(map, 'per') ? ['per'] : said;
  if (all.length === 1) return all[0]!;
  const known = [...new Set([...fieldsOf.values()].flat()), ...common];
  if (all.length === 0 && !checkFields(map, known, 'a charge', context.problems)) return undefined;
  const message = all.length === 0 ? 'does not say what it charges.' : `says both ${all.join(' and ')}.`;
  context.problems.add(entry, message, 'Say exactly one of amount, per, percentOf, topUp, cap.');
  return undefined;
}

function readRaw(entry: MapEntry, map: MapTree, context: TextContext): RawCharge | undefined {
  const { problems, reader, seasons } = context;
  if (checkTornValues(map, problems)) return undefined;
  const kind = kindOf(entry, map, context);
  if (!kind || !checkFields(map, [...fieldsOf.get(kind)!, ...common], `a charge that says ${kind}`, problems))
    return undefined;
  switch (kind) {
    case 'amount': {
      const amount = readPlace(valueOf(map, 'amount')!, reader, { seasons });
      if (!amount) return undefined;
      return {
        expressions: expressionsIn(amount),
        define: (window) => ({ kind, amount: bindPlace(amount, window, reader) }),
      };
    }
    case 'per':
      return readPer(map, context);
    case 'percentOf':
      return readPercent(map, context);
    default:
      return readLimit(kind, map, context);
  }
}

function readPer(map: MapTree, context: TextContext): RawCharge | undefined {
  const per = readPerName(map, context);
  if (!per) return undefined;
  const price = readPrice(map, per, context);
  if (!price) return undefined;
  return {
    expressions: [per, ...price.expressions],
    define: (window) => ({ kind: 'per', ...perOf(per, window, context), price: price.bind(window) }),
  };
}

function perOf(
  raw: RawExpression,
  window: string | undefined,
  { reader, scope }: TextContext,
): { per: Expression; perName: string; unit: string } {
  const per = reader.bind(raw, window);
  const perName = per.names[0] ?? (raw.formula.kind === 'name' ? raw.formula.name : '');
  return { per, perName, unit: scope.made.get(perName)?.unit ?? perName };
}

function readPerName(map: MapTree, context: TextContext): RawExpression | undefined {
  const { problems, reader, scope } = context;
  const tree = valueOf(map, 'per')!;
  const raw = reader.parse(tree);
  if (!raw) return undefined;
  if (raw.formula.kind !== 'name') {
    problems.add(tree, 'takes the name of a quantity.', 'Make a quantity of the formula, and name it here.');
    return undefined;
  }
  const { name } = raw.formula;
  const info = scope.made.get(scope.families.get(name)?.members[0] ?? name);
  if (info?.kind === 'quantity' && !info.hasUnit) {
    problems.add(tree, `"${name}" is a formula without a unit.`, `Give it one: ${name}: { formula: ..., unit: kWh }.`);
    return undefined;
  }
  return raw;
}

function readPercent(map: MapTree, context: TextContext): RawCharge | undefined {
  const of = readLines(valueOf(map, 'percentOf')!, context);
  const hasPer = valueOf(map, 'per') !== undefined;
  const per = hasPer ? readPerNameOfPercent(map, context) : undefined;
  if (!of || (hasPer && !per)) return undefined;
  const price = readPrice(map, per, context);
  if (!price) return undefined;
  return {
    expressions: [...(per ? [per] : []), ...price.expressions],
    define: (window) => ({
      kind: 'percent',
      ...of,
      ...(per ? perOf(per, window, context) : {}),
      price: price.bind(window),
    }),
  };
}

function readPerNameOfPercent(map: MapTree, { problems, reader }: TextContext): RawExpression | undefined {
  const tree = valueOf(map, 'per')!;
  const raw = reader.parse(tree);
  if (raw && raw.formula.kind !== 'name') {
    problems.add(tree, 'takes the name of a quantity.', 'Make a quantity of the formula, and name it here.');
    return undefined;
  }
  return raw;
}

/** Names of lines above: `all above`, one name or a list; a family means all its lines. */
function readLines(tree: Tree, context: TextContext): { of: string[]; isAllAbove: boolean } | undefined {
  const { problems, scope, charges } = context;
  if (tree.kind === 'scalar' && tree.text === 'all above')
    return { of: charges.map((charge) => charge.name), isAllAbove: true };
  const words = asWords(tree, problems, 'Name lines above: [demand, energy], or all above.');
  const of: string[] = [];
  for (const word of words ?? []) {
    const family = scope.families.get(word.text);
    const kind = family?.kind ?? scope.made.get(word.text)?.kind;
    if (kind === 'line' || kind === 'broken') of.push(...(family?.members ?? [word.text]));
    else {
      const isBelow = scope.later.get(word.text)?.words === 'a charge';
      const lines = charges.map((charge) => charge.name);
      if (isBelow) problems.add(tree, `"${word.text}" stands below this line;`, 'move this one down.');
      else if (kind) problems.add(word, `"${word.text}" is not a line of the bill.`, 'Name charges above.');
      else
        problems.add(
          word,
          `no line above is called "${word.text}".`,
          didYouMean(word.text, lines, 'Name charges above.'),
        );
      return undefined;
    }
  }
  if (new Set(of).size < of.length) {
    problems.add(tree, 'names a line twice.', 'Name each once.');
    return undefined;
  }
  return words && { of, isAllAbove: false };
}

function readLimit(kind: 'topUp' | 'cap', map: MapTree, context: TextContext): RawCharge | undefined {
  const { problems, reader, seasons } = context;
  const toTree = valueOf(map, 'to');
  if (!toTree) {
    problems.add(map, 'does not say to what.', 'Add to: and an amount.');
    return undefined;
  }
  const of = readLines(valueOf(map, kind)!, context);
  const to = readPlace(toTree, reader, { seasons });
  if (!of || !to) return undefined;
  return { expressions: expressionsIn(to), define: (window) => ({ kind, ...of, to: bindPlace(to, window, reader) }) };
}
