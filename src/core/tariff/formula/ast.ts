/** Binary operators of formulas, as written. */
export type BinaryOperator = '+' | '-' | '*' | '/' | '^' | '=' | '!=' | '<' | '<=' | '>' | '>=' | 'and' | 'or';

interface Span {
  /** Offsets of the first character and behind the last one, in the formula's text. */
  start: number;
  end: number;
}

/** A parsed formula. Immutable; numbers keep their digits as written. */
export type Formula =
  | (Span & { kind: 'number'; value: number; raw: string })
  | (Span & { kind: 'name'; name: string })
  | (Span & { kind: 'call'; fn: string; args: Formula[] })
  | (Span & { kind: 'sign'; operator: '-' | 'not'; operand: Formula })
  | (Span & { kind: 'binary'; operator: BinaryOperator; left: Formula; right: Formula });

/** Calls `visit` for every node of a formula, parents first. */
export function walkFormula(formula: Formula, visit: (node: Formula) => void): void {
  visit(formula);
  if (formula.kind === 'call') for (const argument of formula.args) walkFormula(argument, visit);
  else if (formula.kind === 'sign') walkFormula(formula.operand, visit);
  else if (formula.kind === 'binary') {
    walkFormula(formula.left, visit);
    walkFormula(formula.right, visit);
  }
}

/** Names a formula uses, each once, in order of first use. */
export function namesIn(formula: Formula): string[] {
  const names = new Set<string>();
  walkFormula(formula, (node) => {
    if (node.kind === 'name') names.add(node.name);
  });
  return [...names];
}

/** The same formula with every name replaced as told; a node may also be replaced as a whole. */
export function mapFormula(formula: Formula, replace: (node: Formula) => Formula | undefined): Formula {
  const replaced = replace(formula);
  if (replaced) return replaced;
  switch (formula.kind) {
    case 'call':
      return { ...formula, args: formula.args.map((argument) => mapFormula(argument, replace)) };
    case 'sign':
      return { ...formula, operand: mapFormula(formula.operand, replace) };
    case 'binary':
      return { ...formula, left: mapFormula(formula.left, replace), right: mapFormula(formula.right, replace) };
    default:
      return formula;
  }
}

/** A formula that is one number. */
export function numberFormula(value: number, raw = String(value)): Formula {
  return { kind: 'number', value, raw, start: 0, end: raw.length };
}
