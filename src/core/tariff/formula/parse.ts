import type { BinaryOperator, Formula } from './ast';
import { functionArity, functionForms } from './functions';
import { FormulaMistake, readTokens, type Token } from './tokens';
import { didYouMean } from '../nearest';

/** Longest formula. [characters] */
export const longestFormula = 500;
/** Deepest nesting of a formula: brackets, calls, signs and powers within one another. [levels] */
export const deepestFormula = 40;

/**
 * Parses a formula of the schedule language.
 *
 * @param text  At most {@link longestFormula} characters, nested at most {@link deepestFormula} levels
 * @throws {FormulaMistake} with the offset of the mistake in the text and its remedy
 */
export function parseFormula(text: string): Formula {
  if (text.length > longestFormula) {
    throw new FormulaMistake(
      0,
      `the formula has ${text.length} characters, at most ${longestFormula} are read.`,
      'Split it in two.',
    );
  }
  const parser = new Parser(readTokens(text));
  return parser.wholeFormula();
}

const comparisons: ReadonlySet<string> = new Set(['=', '!=', '<', '<=', '>', '>=']);

class Parser {
  private position = 0;
  /** The whole formula is level 0. */
  private depth = -1;

  constructor(private readonly tokens: Token[]) {}

  wholeFormula(): Formula {
    const formula = this.either();
    if (this.next().kind !== 'end') throw this.unexpected();
    return formula;
  }

  private next(): Token {
    return this.tokens[this.position]!;
  }

  private take(): Token {
    return this.tokens[this.position++]!;
  }

  private isNext(text: string): boolean {
    const token = this.next();
    return (token.kind === 'mark' || token.kind === 'word') && token.text === text;
  }

  private nested<T>(read: () => T): T {
    if (++this.depth > deepestFormula) {
      throw new FormulaMistake(
        this.next().start,
        `the formula is nested deeper than ${deepestFormula} levels.`,
        'Name a part of it.',
      );
    }
    const result = read();
    this.depth--;
    return result;
  }

  private chain(operators: string[], read: () => Formula): Formula {
    let left = read();
    while (operators.some((operator) => this.isNext(operator))) {
      const operator = this.take().text as BinaryOperator;
      const right = read();
      left = { kind: 'binary', operator, left, right, start: left.start, end: right.end };
    }
    return left;
  }

  private either(): Formula {
    return this.nested(() => this.chain(['or'], () => this.both()));
  }

  private both(): Formula {
    return this.chain(['and'], () => this.negation());
  }

  private negation(): Formula {
    if (!this.isNext('not')) return this.comparison();
    const { start } = this.take();
    const operand = this.comparison();
    return { kind: 'sign', operator: 'not', operand, start, end: operand.end };
  }

  private comparison(): Formula {
    const left = this.sum();
    if (!comparisons.has(this.next().text) || this.next().kind !== 'mark') return left;
    const operator = this.take().text as BinaryOperator;
    const right = this.sum();
    return { kind: 'binary', operator, left, right, start: left.start, end: right.end };
  }

  private sum(): Formula {
    return this.chain(['+', '-'], () => this.chain(['*', '/'], () => this.signed()));
  }

  private signed(): Formula {
    if (!this.isNext('-')) return this.power();
    const { start } = this.take();
    const operand = this.nested(() => this.signedOperand());
    return { kind: 'sign', operator: '-', operand, start, end: operand.end };
  }

  private signedOperand(): Formula {
    if (this.isNext('-')) throw this.unexpected();
    return this.power();
  }

  private power(): Formula {
    const left = this.value();
    if (!this.isNext('^')) return left;
    this.take();
    const right = this.nested(() => this.signed());
    return { kind: 'binary', operator: '^', left, right, start: left.start, end: right.end };
  }

  private value(): Formula {
    const token = this.next();
    if (token.kind === 'number') {
      this.take();
      return { kind: 'number', value: Number(token.text), raw: token.text, start: token.start, end: token.end };
    }
    if (token.kind === 'word' && token.text !== 'and' && token.text !== 'or' && token.text !== 'not') {
      this.take();
      if (this.isNext('(')) return this.call(token);
      return { kind: 'name', name: token.text, start: token.start, end: token.end };
    }
    if (!this.isNext('(')) throw this.unexpected();
    this.take();
    const inner = this.either();
    const { end } = this.closing(token);
    return { ...inner, start: token.start, end };
  }

  private closing(opening: Token): Token {
    if (this.isNext(')')) return this.take();
    if (this.next().kind === 'end')
      throw new FormulaMistake(opening.start, 'a bracket opens here and never closes.', 'Add a ).');
    throw this.unexpected();
  }

  private call(name: Token): Formula {
    const arity = functionArity.get(name.text);
    if (arity === undefined) throw noFunction(name);
    const opening = this.take();
    const args = [this.either()];
    while (this.isNext(';')) {
      this.take();
      args.push(this.either());
    }
    const { end } = this.closing(opening);
    if (args.length < arity[0] || args.length > arity[1]) {
      const many = args.length === 1 ? '1 value' : `${args.length} values`;
      throw new FormulaMistake(
        name.start,
        `"${name.text}" is given ${many}.`,
        `Write ${functionForms.get(name.text)}.`,
      );
    }
    return { kind: 'call', fn: name.text, args, start: name.start, end };
  }

  private unexpected(): FormulaMistake {
    const token = this.next();
    if (token.kind === 'end')
      return new FormulaMistake(token.start, 'the formula ends too early.', 'Complete or shorten it.');
    return new FormulaMistake(token.start, `"${token.text}" is not expected here.`, expectation(token));
  }
}

function expectation(token: Token): string {
  if (token.text === ';') return 'A semicolon stands between the values of a function only.';
  if (token.kind === 'mark') return 'A value belongs here: a number, a name, a function or a bracket.';
  return 'Write an operator between two values: + - * / ^ = != < <= > >= and or.';
}

function noFunction(name: Token): FormulaMistake {
  if (/^(round|floor|ceil|trunc)/i.test(name.text)) {
    return new FormulaMistake(
      name.start,
      `there is no function "${name.text}".`,
      'Give the quantity round: 0.01 instead.',
    );
  }
  const fallback = `There are ${[...functionArity.keys()].join(', ')}.`;
  return new FormulaMistake(
    name.start,
    `there is no function "${name.text}".`,
    didYouMean(name.text, functionArity.keys(), fallback),
  );
}
