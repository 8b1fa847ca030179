import type { Place } from '../../../schemas/attachment';
import type { Printed } from './printed';

/** A run of text of a page, upright, in the page's own measure with the origin at the top left. */
export interface TextRun {
  text: string;
  left: number;
  right: number;
  baseline: number;
  height: number;
}

/** A number or date with its place and the words it stands among. */
export interface PageFigure extends Printed {
  box: Place['box'];
  /** The line it stands in, shortened. */
  line: string;
}

interface Word extends TextRun {
  top: number;
  bottom: number;
}

type Measure = (text: string) => number;

/** Runs closer than this share of their height are one word; further than the other are two columns. */
const sameWordGap = 0.12;
const columnGap = 0.9;

/** Words of a run, each as wide as its share of the run when drawn. */
function wordsOf(run: TextRun, measure: Measure): Word[] {
  const perUnit = (run.right - run.left) / Math.max(measure(run.text), Number.EPSILON);
  return [...run.text.matchAll(/\S+/g)].map((found) => {
    const left = run.left + measure(run.text.slice(0, found.index)) * perUnit;
    const right = run.left + measure(run.text.slice(0, found.index + found[0].length)) * perUnit;
    const { baseline, height } = run;
    return {
      text: found[0],
      left,
      right,
      baseline,
      height,
      top: baseline - 0.85 * height,
      bottom: baseline + 0.25 * height,
    };
  });
}

/** Words gathered into lines from the top down, each line from left to right. */
function linesOf(words: Word[]): Word[][] {
  const lines: Word[][] = [];
  for (const word of [...words].sort((a, b) => a.baseline - b.baseline)) {
    const line = lines.at(-1);
    const first = line?.[0];
    if (line && first && word.baseline - first.baseline <= 0.4 * Math.min(word.height, first.height)) line.push(word);
    else lines.push([word]);
  }
  return lines.map((line) => joined(line.sort((a, b) => a.left - b.left)));
}

/** Pieces of one word drawn apart, as kerning does, put together. */
function joined(line: Word[]): Word[] {
  const words: Word[] = [];
  for (const word of line) {
    const last = words.at(-1);
    if (last && word.left - last.right < sameWordGap * word.height && word.left >= last.left) {
      words[words.length - 1] = { ...last, text: last.text + word.text, right: Math.max(last.right, word.right) };
    } else words.push(word);
  }
  return words;
}

const monthName = '(?:jan|feb|mar|apr|may|jun|jul|aug|sep|oct|nov|dec)[a-z]*';
const datePatterns = [
  '\\d{4}-\\d{2}-\\d{2}',
  '\\d{1,2}(?<between>[/.-])\\d{1,2}\\k<between>(?:\\d{4}|\\d{2})',
  `\\d{1,2}\\.?[ -]${monthName}\\.?,?[ -]\\d{4}`,
  `${monthName}\\.? \\d{1,2},? \\d{4}`,
];
const sign = '[(\\-\\u2212]?[$\\u20ac\\u00a3\\u00a5\\u20b9]? ?[-\\u2212]?';
const core =
  "(?:\\d{1,3}(?:[,.'\\u2019 \\u00a0\\u202f]\\d{2,3})*[,.'\\u2019 \\u00a0\\u202f]\\d{3}(?:[.,]\\d+)?|\\d+(?:[.,]\\d+)?|[.,]\\d+)";
const behind = '(?:\\)|[-\\u2212](?![\\w(])| ?CR\\b)?';
/** Not within a name, a time, a fraction or a longer number; a unit may follow at once. */
const alone = ['(?<![\\w.,/:#\\-\\u2013])', '(?![\\d/:]|[.,]\\d|-\\w|(?![kM]?(?:W|VA|var)|%)[A-Za-z])'];
const figures = new RegExp(
  `(?<date>${alone[0]}(?:${datePatterns.join('|')})(?![\\d/]))|(?<number>${alone[0]}${sign}${core}${behind}${alone[1]})`,
  'gi',
);

const longestLine = 90;

/** Numbers and dates of a line with where they stand. */
function figuresOf(line: Word[], measure: Measure, size: { width: number; height: number }): PageFigure[] {
  let text = '';
  const starts: number[] = [];
  line.forEach((word, index) => {
    const before = line[index - 1];
    if (before) text += word.left - before.right > columnGap * word.height ? '  ' : ' ';
    starts.push(text.length);
    text += word.text;
  });
  const xOf = (at: number, end: boolean) => {
    const index = starts.findLastIndex((start) => start < at || (!end && start === at));
    const word = line[Math.max(index, 0)] as Word;
    const share = measure(word.text.slice(0, at - (starts[Math.max(index, 0)] ?? 0))) / measure(word.text);
    return word.left + Math.min(1, share) * (word.right - word.left);
  };
  const share = (value: number, whole: number) => Math.min(1, Math.max(0, Math.round((value / whole) * 1e5) / 1e5));
  return [...text.matchAll(figures)].flatMap((found): PageFigure[] => {
    const printed = found[0].trim();
    const from = found.index + found[0].indexOf(printed);
    const to = from + printed.length;
    const touched = line.filter(
      (word, index) => (starts[index] ?? 0) < to && (starts[index] ?? 0) + word.text.length > from,
    );
    const top = share(Math.min(...touched.map((word) => word.top)), size.height);
    const bottom = share(Math.max(...touched.map((word) => word.bottom)), size.height);
    const left = share(xOf(from, false), size.width);
    const right = share(xOf(to, true), size.width);
    if (left >= right || top >= bottom || printed.length > 80) return [];
    const kind = found.groups?.date ? 'date' : 'number';
    return [{ kind, text: printed, box: [left, top, right, bottom], line: around(text, from, to) }];
  });
}

/** The line about a figure, cut on both sides where it is long. */
function around(line: string, from: number, to: number): string {
  const start = Math.max(0, Math.min(from - longestLine / 2, line.length - longestLine));
  const cut = line.slice(start, Math.max(to, start + longestLine));
  return `${start > 0 ? '... ' : ''}${cut.replace(/\s+/g, ' ').trim()}${start + cut.length < line.length ? ' ...' : ''}`;
}

/**
 * Numbers and dates of a page in reading order, each with its place as shares of the page and the line it stands in.
 *
 * @param measure  Width of a text in any unit; where letters are not of one width it places the parts of a run
 */
export function figuresOfPage(
  runs: readonly TextRun[],
  size: { width: number; height: number },
  measure: Measure = (text) => text.length,
): PageFigure[] {
  const words = runs.flatMap((run) => wordsOf(run, measure));
  return linesOf(words).flatMap((line) => figuresOf(line, measure, size));
}
