/** A mistake in a formula, with the offset in its text. */
export class FormulaMistake extends Error {
  constructor(
    readonly offset: number,
    message: string,
    readonly remedy: string,
  ) {
    super(message);
    this.name = 'FormulaMistake';
  }
}

/** A number, word or mark of a formula; `end` closes every list of tokens. */
export interface Token {
  kind: 'number' | 'word' | 'mark' | 'end';
  text: string;
  start: number;
  end: number;
}

const shapes: [Token['kind'], RegExp][] = [
  ['number', /(?:\d+(?:\.\d+)?|\.\d+)(?:[eE][+-]?\d+)?/y],
  ['word', /[A-Za-z][A-Za-z0-9]*/y],
  ['mark', /!=|<=|>=|[-+*/^=<>();]/y],
];

/** Splits a formula into tokens. Throws {@link FormulaMistake} at a character that is no part of the language. */
export function readTokens(text: string): Token[] {
  const tokens: Token[] = [];
  let offset = 0;
  while (offset < text.length) {
    if (/\s/.test(text[offset]!)) {
      offset++;
      continue;
    }
    const token = tokenAt(text, offset);
    const last = tokens[tokens.length - 1];
    if (last?.kind === 'number' && token.kind !== 'mark' && last.end === offset) {
      throw new FormulaMistake(
        last.start,
        `"${last.text}${token.text}" is neither a number nor a name.`,
        'Write * between the two, or a name that begins with a small letter.',
      );
    }
    tokens.push(token);
    offset = token.end;
  }
  tokens.push({ kind: 'end', text: '', start: text.length, end: text.length });
  return tokens;
}

function tokenAt(text: string, offset: number): Token {
  for (const [kind, shape] of shapes) {
    shape.lastIndex = offset;
    const found = shape.exec(text);
    if (found) return { kind, text: found[0], start: offset, end: offset + found[0].length };
  }
  throw strangeCharacter(text, offset);
}

function strangeCharacter(text: string, offset: number): FormulaMistake {
  const character = text[offset]!;
  if (character === ',') {
    const digits = /\d+$/.exec(text.slice(0, offset))?.[0];
    const decimals = /^\d+/.exec(text.slice(offset + 1))?.[0];
    const isDecimal = digits !== undefined && decimals !== undefined && !/[;(]/.test(text);
    if (isDecimal) return new FormulaMistake(offset, 'a decimal comma is not read.', `Write ${digits}.${decimals}.`);
    return new FormulaMistake(offset, 'a comma ends the value here.', 'Write ; between the values: max(a; b).');
  }
  if (character === '%') return new FormulaMistake(offset, '"%" is not part of a formula.', 'Write 0.05 for 5 %.');
  if (character === '&') return new FormulaMistake(offset, '"&" is not part of a formula.', 'Write and.');
  if (character === '|') return new FormulaMistake(offset, '"|" is not part of a formula.', 'Write or.');
  if (character === '!')
    return new FormulaMistake(offset, '"!" is not part of a formula.', 'Write not, or != for unequal.');
  return new FormulaMistake(
    offset,
    `"${character}" is not part of a formula.`,
    'Formulas hold numbers, names, functions and + - * / ^ = != < <= > >= ; ( ).',
  );
}
