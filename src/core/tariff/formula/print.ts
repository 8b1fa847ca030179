import type { Formula } from './ast';

const strength: Record<string, number> = { or: 1, and: 2, not: 3, '+': 5, '-': 5, '*': 6, '/': 6, '^': 8 };
const strengthOf = (operator: string): number => strength[operator] ?? 4;
const signStrength = 7;

/**
 * Writes a formula as explanations do: `x` for times, brackets only where needed.
 *
 * @param wordOf  Words of a name, its value for instance. Left out: the name itself
 */
export function printFormula(formula: Formula, wordOf: (name: string) => string = (name) => name): string {
  return print(formula, wordOf, 0);
}

function print(node: Formula, wordOf: (name: string) => string, outer: number): string {
  switch (node.kind) {
    case 'number':
      return node.raw;
    case 'name':
      return bracketNegative(wordOf(node.name), outer);
    case 'call':
      return `${node.fn}(${node.args.map((argument) => print(argument, wordOf, 0)).join('; ')})`;
    case 'sign': {
      const own = node.operator === 'not' ? strengthOf('not') : signStrength;
      const text = `${node.operator === 'not' ? 'not ' : '-'}${print(node.operand, wordOf, own + 1)}`;
      return own < outer ? `(${text})` : text;
    }
    case 'binary': {
      const own = strengthOf(node.operator);
      const left = print(node.left, wordOf, node.operator === '^' || own === strengthOf('=') ? own + 1 : own);
      const right = print(node.right, wordOf, node.operator === '^' ? signStrength : own + 1);
      const sign = node.operator === '*' ? 'x' : node.operator;
      const text = `${left} ${sign} ${right}`;
      return own < outer ? `(${text})` : text;
    }
  }
}

function bracketNegative(text: string, outer: number): string {
  return outer > strengthOf('+') && text.startsWith('-') ? `(${text})` : text;
}
