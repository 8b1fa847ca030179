import { Prec, StateEffect, StateField, type EditorState, type Extension, type Range } from '@codemirror/state';
import { Decoration, EditorView, keymap, WidgetType, type Command, type DecorationSet } from '@codemirror/view';
import type { ScheduleProblem } from '../../../core/tariff';
import { fixOf, wordAt } from './fix';

/** Problems of the text as it stands. */
export const setProblems = StateEffect.define<ScheduleProblem[]>();

/** Marks a line for the reader; null takes the mark away. */
export const seekLine = StateEffect.define<number | null>();

/** A problem's words under its line, with a button where one word would put it right. */
class Message extends WidgetType {
  constructor(private readonly problem: ScheduleProblem) {
    super();
  }

  override eq(other: Message): boolean {
    return JSON.stringify(other.problem) === JSON.stringify(this.problem);
  }

  override toDOM(view: EditorView): HTMLElement {
    const { path, message, remedy } = this.problem;
    const box = document.createElement('div');
    box.className = 'cm-message';
    if (path) box.append(Object.assign(document.createElement('b'), { textContent: `${path}: ` }));
    box.append(`${message} ${remedy}`);
    if (fixOf(view.state.doc.toString(), this.problem)) {
      const button = Object.assign(document.createElement('button'), { type: 'button', textContent: 'Put it right' });
      button.append(Object.assign(document.createElement('kbd'), { textContent: ' F4' }));
      button.addEventListener('click', () => putRight(view, this.problem));
      box.append(button);
    }
    return box;
  }

  override ignoreEvent(): boolean {
    return true;
  }
}

function putRight(view: EditorView, problem: ScheduleProblem): boolean {
  const fix = fixOf(view.state.doc.toString(), problem);
  if (!fix) return false;
  view.dispatch({ changes: fix, selection: { anchor: fix.from + fix.insert.length }, scrollIntoView: true });
  view.focus();
  return true;
}

const faulty = Decoration.line({ class: 'cm-faulty' });
const slip = Decoration.mark({ class: 'cm-slip' });
const sought = Decoration.line({ class: 'cm-sought' });

function decorate(state: EditorState, problems: readonly ScheduleProblem[]): DecorationSet {
  const text = state.doc.toString();
  const ranges = problems.flatMap((problem): Range<Decoration>[] => {
    const line = state.doc.line(Math.min(Math.max(1, problem.line), state.doc.lines));
    const { from, to } = wordAt(text, problem);
    return [
      faulty.range(line.from),
      ...(to > from ? [slip.range(from, to)] : []),
      Decoration.widget({ widget: new Message(problem), block: true, side: 1 }).range(line.to),
    ];
  });
  return Decoration.set(ranges, true);
}

interface Marked {
  problems: readonly ScheduleProblem[];
  marks: DecorationSet;
}

const problemField = StateField.define<Marked>({
  create: () => ({ problems: [], marks: Decoration.none }),
  update(before, transaction) {
    const told = transaction.effects.find((effect) => effect.is(setProblems));
    if (told?.is(setProblems)) return { problems: told.value, marks: decorate(transaction.state, told.value) };
    return transaction.docChanged ? { ...before, marks: before.marks.map(transaction.changes) } : before;
  },
  provide: (field) => EditorView.decorations.from(field, ({ marks }) => marks),
});

const soughtField = StateField.define<DecorationSet>({
  create: () => Decoration.none,
  update(before, transaction) {
    const told = transaction.effects.find((effect) => effect.is(seekLine));
    if (!told?.is(seekLine)) return transaction.docChanged ? Decoration.none : before;
    if (told.value === null || told.value > transaction.state.doc.lines) return Decoration.none;
    return Decoration.set(sought.range(transaction.state.doc.line(told.value).from));
  },
  provide: (field) => EditorView.decorations.from(field),
});

/** Goes to the next problem after the cursor, around the end. */
const nextProblem: Command = (view) => {
  const { problems } = view.state.field(problemField);
  const here = view.state.doc.lineAt(view.state.selection.main.head).number;
  const next = problems.find(({ line }) => line > here) ?? problems[0];
  if (!next) return false;
  view.dispatch({
    selection: { anchor: wordAt(view.state.doc.toString(), next).from },
    effects: EditorView.scrollIntoView(view.state.doc.line(Math.min(next.line, view.state.doc.lines)).from, {
      y: 'center',
    }),
  });
  return true;
};

/** Puts the first problem right that one word would. */
const putFirstRight: Command = (view) => {
  const text = view.state.doc.toString();
  const first = view.state.field(problemField).problems.find((problem) => fixOf(text, problem));
  return first ? putRight(view, first) : false;
};

/** Problems in their places: line washed, word underlined, words beneath; F4 puts right, F8 goes to the next. */
export const textProblems: Extension = [
  problemField,
  soughtField,
  Prec.high(
    keymap.of([
      { key: 'F4', run: putFirstRight },
      { key: 'F8', run: nextProblem },
    ]),
  ),
];
