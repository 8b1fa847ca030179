import type { Formula } from '../formula/ast';

/** Unit of a formula as far as it can be told, for words: a ratio, a count and whatever is unclear are bare numbers. */
export function unitOf(node: Formula, unitOfName: (name: string) => string): string {
  const of = (inner: Formula | undefined): string => (inner ? unitOf(inner, unitOfName) : '');
  switch (node.kind) {
    case 'number':
      return '';
    case 'name':
      return unitOfName(node.name);
    case 'sign':
      return node.operator === '-' ? of(node.operand) : '';
    case 'binary':
      return unitOfBinary(node.operator, of(node.left), of(node.right));
    case 'call':
      return unitOfCall(node.fn, node.args.map(of));
  }
}

function unitOfBinary(operator: string, left: string, right: string): string {
  if (operator === '+' || operator === '-') return left || right;
  if (operator === '*') return left === '' ? right : right === '' ? left : '';
  if (operator === '/') return right === '' ? left : '';
  return '';
}

function unitOfCall(fn: string, units: string[]): string {
  if (fn === 'hypot' && units.some((unit) => unit === 'kvarh' || unit === 'kvar')) {
    return units.some((unit) => unit.endsWith('h')) ? 'kVAh' : 'kVA';
  }
  if (fn === 'if') return units.slice(1).find((unit) => unit !== '') ?? '';
  if (['min', 'max', 'hypot', 'excess', 'between', 'abs', 'total'].includes(fn))
    return units.find((unit) => unit !== '') ?? '';
  return '';
}
