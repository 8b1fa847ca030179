import type { Formula } from './ast';
import { between, comparisons, excess, hypot2, powerFactorOf, ratioOf, tangentOf } from './functions';

/** The array of values formulas read: places of the cell's channels, the period's facts and the rules for zero kWh. Names follow. */
export const place = {
  cellKwh: 0,
  cellKvarhLagging: 1,
  cellKvarhLeading: 2,
  cellHours: 3,
  days: 4,
  hours: 5,
  zeroPf: 6,
  zeroRatio: 7,
  firstDay: 8,
  names: 9,
} as const;

/** A compiled formula: reads the values and gives its result. */
export type Evaluate = (values: Float64Array) => number;

/** An impossible step of arithmetic, with its place in the formula. */
export class FormulaFault extends Error {
  constructor(
    message: string,
    readonly start: number,
    readonly end: number,
  ) {
    super(message);
    this.name = 'FormulaFault';
  }
}

/** The result of some work; nothing where a formula in it has none. */
export function unlessFault<T>(work: () => T): T | undefined {
  try {
    return work();
  } catch (error) {
    if (error instanceof FormulaFault) return undefined;
    throw error;
  }
}

/**
 * Turns a formula into a closure; no code is generated and nothing is looked up by name afterwards.
 *
 * @param evaluateName  Closure of a name of the formula
 * @returns closure throwing {@link FormulaFault} at a division by zero, the root of a negative number or an infinite power
 */
export function compileFormula(formula: Formula, evaluateName: (name: string) => Evaluate): Evaluate {
  const compile = (node: Formula): Evaluate => compileFormula(node, evaluateName);
  switch (formula.kind) {
    case 'number': {
      const { value } = formula;
      return () => value;
    }
    case 'name':
      return evaluateName(formula.name);
    case 'sign': {
      const operand = compile(formula.operand);
      return formula.operator === '-' ? (v) => -operand(v) : (v) => (operand(v) === 0 ? 1 : 0);
    }
    case 'binary':
      return compileBinary(formula, compile(formula.left), compile(formula.right));
    case 'call':
      return compileCall(formula, formula.args.map(compile));
  }
}

function compileBinary(node: Formula & { kind: 'binary' }, left: Evaluate, right: Evaluate): Evaluate {
  switch (node.operator) {
    case '+':
      return (v) => left(v) + right(v);
    case '-':
      return (v) => left(v) - right(v);
    case '*':
      return (v) => left(v) * right(v);
    case '/':
      return compileDivision(node, left, right);
    case '^':
      return compilePower(node, left, right);
    case 'and':
      return (v) => (left(v) !== 0 && right(v) !== 0 ? 1 : 0);
    case 'or':
      return (v) => (left(v) !== 0 || right(v) !== 0 ? 1 : 0);
    default:
      return compileComparison(node.operator, left, right);
  }
}

function compileComparison(operator: keyof typeof comparisons, left: Evaluate, right: Evaluate): Evaluate {
  const compare = comparisons[operator];
  return (v) => (compare(left(v), right(v)) ? 1 : 0);
}

function compileDivision({ start, end }: Formula, left: Evaluate, right: Evaluate): Evaluate {
  return (v) => {
    const divisor = right(v);
    if (divisor === 0) throw new FormulaFault('divides by zero', start, end);
    return left(v) / divisor;
  };
}

function compilePower({ start, end }: Formula, left: Evaluate, right: Evaluate): Evaluate {
  return (v) => {
    const result = left(v) ** right(v);
    if (!Number.isFinite(result)) throw new FormulaFault('is a power that has no finite value', start, end);
    return result;
  };
}

function compileCall(node: Formula & { kind: 'call' }, args: Evaluate[]): Evaluate {
  const a = args[0]!;
  const b = args[1] ?? a;
  const c = args[2] ?? a;
  const { start, end } = node;
  switch (node.fn) {
    case 'min':
      return args.length === 2 ? (v) => Math.min(a(v), b(v)) : (v) => foldArgs(args, v, Math.min);
    case 'max':
      return args.length === 2 ? (v) => Math.max(a(v), b(v)) : (v) => foldArgs(args, v, Math.max);
    case 'hypot':
      return args.length === 2 ? (v) => hypot2(a(v), b(v)) : (v) => foldArgs(args, v, hypot2);
    case 'total':
      return (v) => foldArgs(args, v, add);
    case 'abs':
      return (v) => Math.abs(a(v));
    case 'sqrt':
      return (v) => rootOf(a(v), start, end);
    case 'excess':
      return (v) => excess(a(v), b(v));
    case 'between':
      return (v) => between(a(v), b(v), c(v));
    case 'tanOf':
      return (v) => checkedTangent(a(v), start, end);
    case 'pf':
      return (v) => powerFactorOf(a(v), b(v), v[place.zeroPf]!);
    case 'ratio':
      return (v) => ratioOf(a(v), b(v), v[place.zeroRatio]!);
    case 'if':
      return (v) => (a(v) !== 0 ? b(v) : c(v));
    case 'daysSince':
      return (v) => v[place.firstDay]! - dayOfDateNumber(a(v), start, end);
    default:
      throw new RangeError(`fn must be a function of the language, got ${node.fn}`);
  }
}

function add(a: number, b: number): number {
  return a + b;
}

function foldArgs(args: Evaluate[], values: Float64Array, fold: (a: number, b: number) => number): number {
  let result = args[0]!(values);
  if (args.length === 1 && fold === hypot2) return Math.abs(result);
  for (let i = 1; i < args.length; i++) result = fold(result, args[i]!(values));
  return result;
}

function rootOf(value: number, start: number, end: number): number {
  if (value < 0) throw new FormulaFault(`is the root of a negative number, ${value}`, start, end);
  return Math.sqrt(value);
}

function checkedTangent(powerFactor: number, start: number, end: number): number {
  if (!(powerFactor > 0 && powerFactor <= 1)) {
    throw new FormulaFault(`takes a power factor above 0, at most 1, and is given ${powerFactor}`, start, end);
  }
  return tangentOf(powerFactor);
}

/** Days since 1970-01-01 of a date written as a number: 20260115. */
export function dayOfDateNumber(date: number, start = 0, end = 0): number {
  const year = Math.floor(date / 10_000);
  const month = Math.floor(date / 100) % 100;
  const day = date % 100;
  const ms = Date.UTC(year, month - 1, day);
  const back = new Date(ms);
  if (!(year >= 1900 && year <= 9999) || back.getUTCMonth() !== month - 1 || back.getUTCDate() !== day) {
    throw new FormulaFault(`takes a date written like 20260115 and is given ${date}`, start, end);
  }
  return ms / 86_400_000;
}
