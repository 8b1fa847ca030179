import { functionTable } from '../grammar/formulas';
import { formulaWords } from '../grammar/words';

/** Functions of the formula language: least and greatest number of values. */
export const functionArity: ReadonlyMap<string, readonly [number, number]> = new Map(
  functionTable.map(({ name, least, most }) => [name, [least, most]]),
);

/** How values are written behind each function's name, for messages. */
export const functionForms: ReadonlyMap<string, string> = new Map(functionTable.map(({ name, form }) => [name, form]));

/** Words that are part of the language and can be no one's name. */
export const reservedWords: ReadonlySet<string> = new Set(formulaWords);

/** Whether two values are the same to 1e-12 of the greater one; every comparison and step allows that. */
export function isSame(a: number, b: number): boolean {
  return a === b || Math.abs(a - b) <= slackOf(a, b);
}

/** What a exceeds b by, never below 0; 0 also where the two are the same to 1e-12. */
export function excess(a: number, b: number): number {
  const beyond = a - b;
  return beyond > 0 && beyond > slackOf(a, b) ? beyond : 0;
}

// A comparison instead of Math.max, whose care for -0 and NaN costs more than all the rest of a step.
function slackOf(a: number, b: number): number {
  const sizeA = Math.abs(a);
  const sizeB = Math.abs(b);
  return 1e-12 * (sizeA > sizeB ? sizeA : sizeB);
}

/** The part of a quantity that lies from a to b. */
export function between(quantity: number, a: number, b: number): number {
  return excess(Math.min(quantity, Math.max(a, b)), a);
}

/** Comparisons as formulas make them. */
export const comparisons = {
  '=': isSame,
  '!=': (a: number, b: number): boolean => !isSame(a, b),
  '<': (a: number, b: number): boolean => a < b && !isSame(a, b),
  '<=': (a: number, b: number): boolean => a <= b || isSame(a, b),
  '>': (a: number, b: number): boolean => a > b && !isSame(a, b),
  '>=': (a: number, b: number): boolean => a >= b || isSame(a, b),
} as const;

/** Length of the vector (a, b). */
export function hypot2(a: number, b: number): number {
  return Math.sqrt(a * a + b * b);
}

/** Power factor of an active and a reactive quantity; without active what `zeroRule` says. */
export function powerFactorOf(active: number, reactive: number, zeroRule: number): number {
  if (active === 0) return zeroRule;
  return reactive === 0 ? 1 : Math.abs(active) / hypot2(active, reactive);
}

/** Reactive over active; without active what `zeroRule` says. */
export function ratioOf(reactive: number, active: number, zeroRule: number): number {
  return active === 0 ? zeroRule : reactive / active;
}

/** Tangent of the angle of a power factor above 0, at most 1. */
export function tangentOf(powerFactor: number): number {
  return Math.sqrt(1 - powerFactor * powerFactor) / powerFactor;
}
