import type { ScheduleProblem } from '../../core/tariff';

/** A piece of a line of the text: a key in bold, a comment quiet, the word at fault underlined. */
export interface LinePiece {
  text: string;
  kind: 'plain' | 'key' | 'comment' | 'slip';
}

export interface ScheduleLine {
  number: number;
  pieces: LinePiece[];
  problems: ScheduleProblem[];
}

const shape = /^(\s*(?:- )?)([A-Za-z][\w-]*:|\d{4}-\d{2}-\d{2}:)?(.*?)(\s+#.*|^#.*)?$/;

function piecesOf(line: string): LinePiece[] {
  const [, indent = '', key = '', rest = '', comment = ''] = shape.exec(line) ?? [];
  const pieces: LinePiece[] = [
    { text: indent, kind: 'plain' },
    { text: key, kind: 'key' },
    { text: rest, kind: rest.startsWith('#') ? 'comment' : 'plain' },
    { text: comment, kind: 'comment' },
  ];
  return pieces.filter((piece) => piece.text !== '');
}

/** Marks the word that begins at a column. */
function withSlip(line: string, pieces: LinePiece[], column: number): LinePiece[] {
  const word = /^[\w.:-]+/.exec(line.slice(column - 1))?.[0];
  if (!word) return pieces;
  let at = 0;
  return pieces.flatMap((piece) => {
    const from = column - 1 - at;
    at += piece.text.length;
    if (from < 0 || from >= piece.text.length) return [piece];
    const parts: LinePiece[] = [
      { ...piece, text: piece.text.slice(0, from) },
      { text: piece.text.slice(from, from + word.length), kind: 'slip' },
      { ...piece, text: piece.text.slice(from + word.length) },
    ];
    return parts.filter((part) => part.text !== '');
  });
}

/** The text by lines, each with its problems. */
export function scheduleLines(lines: string[], problems: ScheduleProblem[]): ScheduleLine[] {
  return lines.map((line, index) => {
    const own = problems.filter((problem) => problem.line === index + 1);
    const pieces = own.reduce((all, problem) => withSlip(line, all, problem.column), piecesOf(line));
    return { number: index + 1, pieces, problems: own };
  });
}
