import { channelTable, type ChannelName } from '../grammar/formulas';
import type { BinaryOperator, Formula } from '../formula/ast';
import { dayOfDateNumber, place, unlessFault } from '../formula/compile';
import type { Expression } from '../model';
import * as ranges from './range';
import { anything, isPoint, maybe, no, point, truthOf, yes, type Range } from './range';
import * as functions from './range-functions';

/** Ends of the values formulas read, by the places of `Schedule.slots`. */
export interface RangeValues {
  low: Float64Array;
  high: Float64Array;
}

/** A formula over ranges: its result holds what the formula gives for every choice of values within theirs; where it has no value, anything. */
export type EvaluateRange = (values: RangeValues) => Range;

const compiled = new WeakMap<Expression, EvaluateRange>();

/** A compiled formula over ranges, made once. */
export function rangeFormula(expression: Expression): EvaluateRange {
  let found = compiled.get(expression);
  if (!found) compiled.set(expression, (found = compileRange(expression.formula, namesOf(expression))));
  return found;
}

/** The value of a formula over ranges. */
export function rangeOf(expression: Expression, values: RangeValues): Range {
  return rangeFormula(expression)(values);
}

type OfName = (name: string) => EvaluateRange;

function namesOf({ names, slots, channels }: Expression): OfName {
  return (name) => {
    const channel = channels.find((used) => used === name);
    if (channel) return channelRanges[channel];
    const slot = name === 'days' ? place.days : name === 'hours' ? place.hours : slots[names.indexOf(name)]!;
    return (v) => ({ low: v.low[slot]!, high: v.high[slot]! });
  };
}

const register =
  (at: number): EvaluateRange =>
  (v) => ({ low: v.low[at]!, high: v.high[at]! });
const active = register(place.cellKwh);
const lagging = register(place.cellKvarhLagging);
const leading = register(place.cellKvarhLeading);
const net: EvaluateRange = (v) => ranges.minus(lagging(v), leading(v));
const apparent: EvaluateRange = (v) => functions.hypotRange(active(v), net(v));
const perHour =
  (energy: EvaluateRange): EvaluateRange =>
  (v) =>
    ranges.over(energy(v), point(v.low[place.cellHours]!));

const made: Record<ChannelName, EvaluateRange> = {
  kwh: active,
  kvarhLagging: lagging,
  kvarhLeading: leading,
  kvarhNet: net,
  kvah: apparent,
  kw: perHour(active),
  kvarLagging: perHour(lagging),
  kvarLeading: perHour(leading),
  kvarNet: perHour(net),
  kva: perHour(apparent),
};

/** The channels of the cell at work over ranges. */
export const channelRanges = Object.fromEntries(channelTable.map(({ name }) => [name, made[name]])) as typeof made;

function compileRange(node: Formula, ofName: OfName): EvaluateRange {
  const compile = (part: Formula): EvaluateRange => compileRange(part, ofName);
  switch (node.kind) {
    case 'number': {
      const value = point(node.value);
      return () => value;
    }
    case 'name':
      return ofName(node.name);
    case 'sign': {
      const operand = compile(node.operand);
      return node.operator === '-' ? (v) => ranges.negated(operand(v)) : (v) => functions.notRange(answer(operand(v)));
    }
    case 'binary':
      return compileBinary(node.operator, compile(node.left), compile(node.right));
    case 'call':
      return compileCall(node.fn, node.args.map(compile));
  }
}

function answer(value: Range): Range {
  const truth = truthOf(value);
  return truth === 'holds' ? yes : truth === 'fails' ? no : maybe;
}

function compileBinary(operator: BinaryOperator, left: EvaluateRange, right: EvaluateRange): EvaluateRange {
  switch (operator) {
    case '+':
      return (v) => ranges.plus(left(v), right(v));
    case '-':
      return (v) => ranges.minus(left(v), right(v));
    case '*':
      return (v) => ranges.times(left(v), right(v));
    case '/':
      return (v) => ranges.over(left(v), right(v));
    case '^':
      return (v) => functions.powerRange(left(v), right(v));
    case 'and':
      return (v) => ranges.lesser(answer(left(v)), answer(right(v)));
    case 'or':
      return (v) => ranges.greater(answer(left(v)), answer(right(v)));
    default:
      return (v) => functions.compareRange(operator, left(v), right(v));
  }
}

function compileCall(fn: string, args: EvaluateRange[]): EvaluateRange {
  const [a, b, c] = args as [EvaluateRange, EvaluateRange, EvaluateRange];
  const folded =
    (fold: (x: Range, y: Range) => Range): EvaluateRange =>
    (v) =>
      args.slice(1).reduce((result, argument) => fold(result, argument(v)), a(v));
  switch (fn) {
    case 'min':
      return folded(ranges.lesser);
    case 'max':
      return folded(ranges.greater);
    case 'hypot':
      return args.length === 1 ? (v) => ranges.sizeOfRange(a(v)) : folded(functions.hypotRange);
    case 'total':
      return folded(ranges.plus);
    case 'abs':
      return (v) => ranges.sizeOfRange(a(v));
    case 'sqrt':
      return (v) => functions.rootRange(a(v));
    case 'excess':
      return (v) => functions.excessRange(a(v), b(v));
    case 'between':
      return (v) => functions.betweenRange(a(v), b(v), c(v));
    case 'tanOf':
      return (v) => functions.tangentRange(a(v));
    case 'pf':
      return (v) => functions.powerFactorRange(a(v), b(v), v.low[place.zeroPf]!);
    case 'ratio':
      return (v) => functions.ratioRange(a(v), b(v), v.low[place.zeroRatio]!);
    case 'if':
      return (v) =>
        chosen(
          truthOf(a(v)),
          () => b(v),
          () => c(v),
        );
    case 'daysSince':
      return (v) => daysSince(a(v), v.low[place.firstDay]!);
    default:
      throw new RangeError(`fn must be a function of the language, got ${fn}`);
  }
}

function chosen(truth: ReturnType<typeof truthOf>, whereTrue: () => Range, whereFalse: () => Range): Range {
  if (truth === 'holds') return whereTrue();
  return truth === 'fails' ? whereFalse() : ranges.hull(whereTrue(), whereFalse());
}

function daysSince(date: Range, firstDay: number): Range {
  const day = isPoint(date) ? unlessFault(() => dayOfDateNumber(date.low)) : undefined;
  return day === undefined ? anything : point(firstDay - day);
}
