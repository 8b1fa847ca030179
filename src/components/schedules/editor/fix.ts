import type { ScheduleProblem } from '../../../core/tariff';

/** A replacement of characters [from, to) of a text. */
export interface TextFix {
  from: number;
  to: number;
  insert: string;
}

/** Offset of a line and column, both counted from 1. */
export function offsetOf(text: string, { line, column }: { line: number; column: number }): number {
  let at = 0;
  for (let passed = 1; passed < line; passed++) {
    const end = text.indexOf('\n', at);
    if (end < 0) return text.length;
    at = end + 1;
  }
  return Math.min(text.length, at + column - 1);
}

/** The word a problem points at: the one its message quotes where that stands there, else the word that begins there. */
export function wordAt(text: string, problem: ScheduleProblem): { from: number; to: number } {
  const from = offsetOf(text, problem);
  const rest = text.slice(from, from + 200);
  const quoted = /"([^"]+)"/.exec(problem.message)?.[1];
  const word = quoted && rest.startsWith(quoted) ? quoted : (/^[\w-]+/.exec(rest)?.[0] ?? '');
  return { from, to: from + word.length };
}

/** What a problem's remedy would write in place of the word at fault; null where it offers no word. */
export function fixOf(text: string, problem: ScheduleProblem): TextFix | null {
  const meant = /Did you mean "([^"]+)"\?/.exec(problem.remedy)?.[1];
  if (meant === undefined) return null;
  const { from, to } = wordAt(text, problem);
  return to > from && text.slice(from, to) !== meant ? { from, to, insert: meant } : null;
}
