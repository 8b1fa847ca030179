import { Lexer } from 'yaml';

/** Greatest depth of brackets, and greatest indent of an entry. The format's library calls itself for every level of either. */
const mostBrackets = 50;
const mostColumns = 200;

/** Tokens by which the lexer tells the parser what follows; they stand for no text. */
const documentMark = '\u0002';
const lexerMarks: ReadonlySet<string> = new Set([documentMark, '\u0018', '\u001f']);

/**
 * The place where a text is nested too deep to be read with care, and what is wrong there; nothing if it is not.
 *
 * @returns offset of the bracket or the entry that is one level too many
 */
export function nestedTooDeep(text: string): { offset: number; message: string; remedy: string } | undefined {
  let offset = 0;
  let brackets = 0;
  let column = 0;
  let isAtStart = true;
  for (const token of new Lexer().lex(text)) {
    const isIndent = token.startsWith(' ');
    if (token === '[' || token === '{') brackets++;
    else if (token === ']' || token === '}') brackets = Math.max(0, brackets - 1);
    if (brackets > mostBrackets)
      return { offset, message: `opens more than ${mostBrackets} brackets inside each other.`, remedy: 'Close some.' };
    if (isAtStart && column > mostColumns && !isIndent && !/^[\r\n#]/.test(token)) {
      const message = `stands more than ${mostColumns} columns from the left.`;
      return { offset, message, remedy: 'Indent by two blanks a level.' };
    }
    if (token.endsWith('\n')) {
      column = 0;
      isAtStart = brackets === 0;
    } else if (isAtStart && (isIndent || /^[-?:]$/.test(token))) column += token.length;
    else isAtStart &&= token === documentMark;
    if (!lexerMarks.has(token)) offset += token.length;
  }
  return undefined;
}
