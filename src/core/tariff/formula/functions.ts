/** Functions of the formula language: least and greatest number of values. */
export const functionArity: ReadonlyMap<string, readonly [number, number]> = new Map([
  ['min', [1, 40]],
  ['max', [1, 40]],
  ['abs', [1, 1]],
  ['sqrt', [1, 1]],
  ['hypot', [1, 40]],
  ['excess', [2, 2]],
  ['between', [3, 3]],
  ['tanOf', [1, 1]],
  ['pf', [2, 2]],
  ['ratio', [2, 2]],
  ['if', [3, 3]],
  ['daysSince', [1, 1]],
  ['total', [1, 1]],
]);

/** How values are written behind each function's name, for messages. */
export const functionForms: ReadonlyMap<string, string> = new Map([
  ['min', 'min(a; b)'],
  ['max', 'max(a; b)'],
  ['abs', 'abs(a)'],
  ['sqrt', 'sqrt(a)'],
  ['hypot', 'hypot(a; b)'],
  ['excess', 'excess(a; b)'],
  ['between', 'between(q; a; b)'],
  ['tanOf', 'tanOf(pf)'],
  ['pf', 'pf(active; reactive)'],
  ['ratio', 'ratio(reactive; active)'],
  ['if', 'if(condition; a; b)'],
  ['daysSince', 'daysSince(date)'],
  ['total', 'total(family)'],
]);

/** Words that are part of the language and can be no one's name. */
export const reservedWords: ReadonlySet<string> = new Set(['and', 'or', 'not', 'days', 'hours']);

/** Whether two values are the same to 1e-12 of the greater one; every comparison and step allows that. */
export function isSame(a: number, b: number): boolean {
  return a === b || Math.abs(a - b) <= 1e-12 * Math.max(Math.abs(a), Math.abs(b));
}

/** What a exceeds b by, never below 0; 0 also where the two are the same to 1e-12. */
export function excess(a: number, b: number): number {
  return a > b && !isSame(a, b) ? a - b : 0;
}

/** The part of a quantity that lies from a to b. */
export function between(quantity: number, a: number, b: number): number {
  return excess(Math.min(quantity, Math.max(a, b)), a);
}
