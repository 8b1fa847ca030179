import type { Formula } from '../formula/ast';
import { bare, clashOf, powerOf, productOf, quotientOf, wordDimension, type Dimension, type Found } from './dimensions';

/** What the check of a formula's units is told, and whom it tells. */
export interface UnitJudge {
  /** What is known of a name. */
  look(name: string): Found;
  /** Unit of a part of the formula, for words. */
  unitOf(node: Formula): string;
  /** Values that do not go together. */
  refuse(node: Formula, message: string, remedy: string): void;
  /** Values that go together only seldom. */
  doubt(message: string): void;
}

/** Remedy where energy meets power. */
export const energyRemedy = 'Energy goes with energy, power with power; a power times hours is an energy.';

const togetherWords: Record<string, string> = {
  '+': 'be added',
  '-': 'be subtracted',
  hypot: 'be added',
  pf: 'make a power factor',
  if: 'stand for each other',
};
const active: ReadonlySet<string> = new Set(['kWh', 'kW']);
const reactive: ReadonlySet<string> = new Set(['kvarh', 'kvar']);

/** Kind of a formula's value; parts that do not go together are told. */
export function checkUnits(node: Formula, judge: UnitJudge): Found {
  const of = (inner: Formula): Found => checkUnits(inner, judge);
  switch (node.kind) {
    case 'number':
      return { literal: node.value };
    case 'name':
      return judge.look(node.name);
    case 'sign': {
      const found = of(node.operand);
      if (node.operator === 'not') return bare;
      return found && 'literal' in found ? { literal: -found.literal } : found;
    }
    case 'binary':
      return checkBinary(node, of(node.left), of(node.right), judge);
    case 'call':
      return checkCall(node, node.args.map(of), judge);
  }
}

type Binary = Formula & { kind: 'binary' };
type Call = Formula & { kind: 'call' };

function checkBinary(node: Binary, left: Found, right: Found, judge: UnitJudge): Found {
  const parts = [node.left, node.right];
  switch (node.operator) {
    case '*':
      return productOf(left, right);
    case '/':
      return quotientOf(left, right);
    case '^':
      return powerOf(left, right);
    case '+':
    case '-':
      doubtRightAngles(node, left, right, judge);
      return together(parts, [left, right], node.operator, judge);
    case 'and':
    case 'or':
      return bare;
    default:
      together(parts, [left, right], '', judge);
      return bare;
  }
}

function checkCall({ fn, args }: Call, found: Found[], judge: UnitJudge): Found {
  switch (fn) {
    case 'abs':
    case 'total':
      return found[0];
    case 'sqrt':
      return powerOf(found[0], { literal: 0.5 });
    case 'tanOf':
      return bare;
    case 'ratio':
      return quotientOf(found[0], found[1]);
    case 'pf':
      together(args, found, fn, judge);
      if (reactive.has(judge.unitOf(args[0]!)) && active.has(judge.unitOf(args[1]!)))
        judge.refuse(args[0]!, 'pf( ) takes the active value first.', 'Write pf(active; reactive).');
      return bare;
    case 'if':
      return together(args.slice(1), found.slice(1), fn, judge);
    case 'min':
    case 'max':
    case 'excess':
    case 'between':
    case 'hypot':
      return together(args, found, fn, judge);
    default:
      return undefined;
  }
}

/** Values that must be of one kind; numbers as written go with any. */
function together(nodes: Formula[], found: Found[], how: string, judge: UnitJudge): Found {
  const known = nodes.flatMap((node, i) => {
    const value = found[i];
    return value && !('literal' in value) ? [{ node, value }] : [];
  });
  const base = known.find(({ value }) => !value.isScaled) ?? known[0];
  if (!base) return undefined;
  for (const { node, value } of known) {
    const clash = clashOf(base.value, value);
    if (clash) {
      refuse(judge, clash, base, { node, value }, togetherWords[how] ?? 'be compared');
      return undefined;
    }
  }
  const isOneKind = known.every(
    ({ value }) =>
      value.energy === base.value.energy && value.power === base.value.power && value.money === base.value.money,
  );
  return isOneKind ? { ...base.value, isScaled: known.every(({ value }) => value.isScaled) } : undefined;
}

interface Part {
  node: Formula;
  value: Dimension;
}

function refuse(judge: UnitJudge, clash: 'kind' | 'thousand', a: Part, b: Part, how: string): void {
  const [first, second] = a.node.start < b.node.start ? [a, b] : [b, a];
  const units = [judge.unitOf(first.node), judge.unitOf(second.node)] as const;
  if (clash === 'thousand') {
    judge.refuse(second.node, `${units[0]} and ${units[1]} differ by a thousand.`, 'Multiply one by 1000.');
    return;
  }
  const words = `${wordDimension(first.value, units[0])} and ${wordDimension(second.value, units[1])} cannot ${how}.`;
  const hasMoney = first.value.money !== second.value.money;
  judge.refuse(second.node, words, hasMoney ? 'Multiply by a rate first.' : energyRemedy);
}

function doubtRightAngles(node: Binary, left: Found, right: Found, judge: UnitJudge): void {
  const isAsMeasured = [left, right].every((found) => found && !('literal' in found) && !found.isScaled);
  const units = [judge.unitOf(node.left), judge.unitOf(node.right)];
  const [a = '', b = ''] = units;
  if (!isAsMeasured || !((active.has(a) && reactive.has(b)) || (reactive.has(a) && active.has(b)))) return;
  const verb = node.operator === '+' ? `adds ${a} to ${b}` : `subtracts ${b} from ${a}`;
  judge.doubt(`The formula ${verb} as they are: active and reactive stand at right angles, hypot(a; b) adds them.`);
}
