import { diffArrays, diffLines } from 'diff';
import type { DifferenceLine, DifferenceView } from '../../schemas/schedule-editor';

type Piece = DifferenceLine['pieces'][number];

const context = 3;
const whole = (text: string): Piece[] => [{ text, changed: false }];
const linesIn = (text: string) => text.replace(/\n$/, '').split('\n');

/** Differences of two texts line by line, in a changed line word by word; long runs of equal lines become a gap. */
export function presentDifference(before: string, after: string): Omit<DifferenceView, 'before' | 'after'> {
  const lines = withGaps(allLines(before, after));
  const count = (kind: DifferenceLine['kind']) => lines.filter((line) => line.kind === kind).length;
  return { lines, added: count('added'), removed: count('removed') };
}

function allLines(before: string, after: string): DifferenceLine[] {
  const parts = diffLines(before, after);
  const lines: DifferenceLine[] = [];
  let old = 0;
  let young = 0;
  parts.forEach((part, index) => {
    const texts = linesIn(part.value);
    const twin = part.removed ? parts[index + 1] : part.added ? parts[index - 1] : undefined;
    const others = twin && Boolean(twin.added) !== Boolean(part.added) ? linesIn(twin.value) : [];
    const kind = part.added ? 'added' : part.removed ? 'removed' : 'same';
    texts.forEach((text, at) => {
      const other = twinOf(text, others) ?? (others.length === texts.length ? others[at] : undefined);
      lines.push({
        kind,
        before: kind === 'added' ? null : ++old,
        after: kind === 'removed' ? null : ++young,
        pieces: other !== undefined && kind !== 'same' ? piecesOf(text, other, kind) : whole(text),
      });
    });
  });
  return lines;
}

const keyOf = (text: string) => /^\s*(?:- )?[\w-]+:/.exec(text)?.[0];

/** The line that says the same key on the other side. */
function twinOf(text: string, others: string[]): string | undefined {
  const key = keyOf(text);
  return key === undefined ? undefined : others.find((other) => keyOf(other) === key);
}

/** Numbers, names and dates whole, every other sign for itself. */
const wordsOf = (text: string) => text.match(/[\w.:-]+|\s+|./gu) ?? [];

/** The words of a line that its twin lacks. */
function piecesOf(text: string, other: string, kind: 'added' | 'removed'): Piece[] {
  const [before, after] = kind === 'added' ? [other, text] : [text, other];
  return diffArrays(wordsOf(before), wordsOf(after))
    .filter((part) => (kind === 'added' ? !part.removed : !part.added))
    .map((part) => ({ text: part.value.join(''), changed: part.added || part.removed }));
}

/** Keeps a few lines around every change. */
function withGaps(lines: DifferenceLine[]): DifferenceLine[] {
  const near = lines.map((_, index) =>
    lines.slice(Math.max(0, index - context), index + context + 1).some((line) => line.kind !== 'same'),
  );
  return lines.flatMap((line, index): DifferenceLine[] => {
    if (near[index]) return [line];
    const opens = index === 0 || near[index - 1] === true;
    return opens ? [{ kind: 'gap', before: null, after: null, pieces: [] }] : [];
  });
}
