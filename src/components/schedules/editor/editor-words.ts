import type { CheckView, EditorView, MonthView } from '../../../schemas/schedule-editor';
import { formatCount, formatMoney } from '../../ui/format';

/** How the text stands, in the words of the heading. */
export interface EditorHead {
  title: string;
  lead: string;
  /** Why the text cannot be kept; null where it can. */
  obstacle: string | null;
}

interface Standing {
  editor: EditorView;
  view: CheckView | null;
  isChanged: boolean;
  isCurrent: boolean;
}

const nextOf = (editor: EditorView) => Math.max(1, editor.revision) + 1;

const usesWords = (uses: string[]) =>
  uses.length === 0
    ? 'No engagement stands on it yet.'
    : `${uses.join(', ')} ${uses.length === 1 ? 'stays' : 'stay'} on the text chosen there until a new one is taken.`;

function errorsHead({ editor, view }: Standing): EditorHead {
  const problems = view?.problems ?? [];
  const [first] = problems;
  const count = problems.length === 1 ? 'One error stops' : `${formatCount(problems.length, 'error')} stop`;
  return {
    title: `${count} the price: line ${first!.line}, ${first!.message.replace(/\.$/, '')}.`,
    lead: `F8 goes to the next error, F4 puts the first one right that a word would. ${usesWords(editor.uses)}`,
    obstacle: formatCount(problems.length, 'error'),
  };
}

function missedHead({ view }: Standing): EditorHead | null {
  const missed = view?.examples.filter((example) => !example.fits) ?? [];
  const [first] = missed;
  if (!first) return null;
  const figure = first.figures.find((one) => !one.fits);
  const off = figure?.found == null ? '' : `: ${figure.name} comes to ${figure.found}, not ${figure.expected}`;
  return {
    title: `The text misses ${missed.length === 1 ? 'a worked bill' : formatCount(missed.length, 'worked bill')} it carries${off}.`,
    lead: `${first.title}. A text is kept only when every worked bill comes out; mend the text, or the bill where its figures were wrong.`,
    obstacle: `${formatCount(missed.length, 'worked bill')} missed`,
  };
}

function movedWords(month: MonthView | null): string {
  if (!month || month.yoursMinor === null || month.keptMinor === null) return '';
  const moved = month.yoursMinor - month.keptMinor;
  const amount = formatMoney(Math.abs(moved), month.currency);
  const side = moved > 0 ? 'dearer' : 'cheaper';
  return moved === 0 ? ` ${month.name} costs the same under both.` : ` ${month.name} becomes ${amount} ${side}.`;
}

/** The heading, the line beneath and whether the text can be kept. */
export function editorHead(standing: Standing): EditorHead {
  const { editor, view, isChanged, isCurrent } = standing;
  if (view && view.problems.length > 0) return errorsHead(standing);
  const missed = missedHead(standing);
  if (missed) return missed;
  const title = view?.sheet?.title ?? editor.title;
  if (!isChanged) {
    const stand = editor.revision === 0 ? 'the file of the library' : `revision ${editor.revision}`;
    return { title, lead: `This is ${stand}. ${usesWords(editor.uses)}`, obstacle: 'Nothing is changed yet' };
  }
  return {
    title: `The text is whole and can be kept as revision ${nextOf(editor)}.${movedWords(view?.month ?? null)}`,
    lead: usesWords(editor.uses),
    obstacle: isCurrent ? null : 'Looking it over',
  };
}

/** The button that keeps the text. */
export const keepLabel = (editor: EditorView) => `Keep revision ${nextOf(editor)}`;
