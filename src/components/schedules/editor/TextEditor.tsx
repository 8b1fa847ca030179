import { autocompletion, completionKeymap, type CompletionSource } from '@codemirror/autocomplete';
import { defaultKeymap, history, historyKeymap } from '@codemirror/commands';
import { yaml } from '@codemirror/lang-yaml';
import { bracketMatching, indentOnInput } from '@codemirror/language';
import { highlightSelectionMatches, search, searchKeymap } from '@codemirror/search';
import { EditorState, type Extension } from '@codemirror/state';
import {
  drawSelection,
  EditorView,
  highlightActiveLine,
  highlightActiveLineGutter,
  keymap,
  lineNumbers,
} from '@codemirror/view';
import { useEffect, useImperativeHandle, useRef, type Ref } from 'react';
import type { ScheduleProblem } from '../../../core/tariff';
import { seekLine, setProblems, textProblems } from './text-problems';
import { textTheme } from './text-theme';

/** What others may do to the text: go to a line, put text at the end. */
export interface TextHandle {
  goTo(line: number): void;
  append(text: string): void;
}

export interface TextEditorProps {
  /** What the text is, for readers. */
  label: string;
  initialText: string;
  onChange: (text: string) => void;
  problems: ScheduleProblem[];
  /** What may be written at the cursor. */
  complete?: CompletionSource;
  onSave?: () => void;
  handle?: Ref<TextHandle>;
}

function extensionsOf(props: {
  label: string;
  change: (text: string) => void;
  save: () => void;
  complete: CompletionSource | undefined;
}): Extension {
  return [
    lineNumbers(),
    history(),
    drawSelection(),
    indentOnInput(),
    bracketMatching(),
    highlightActiveLine(),
    highlightActiveLineGutter(),
    highlightSelectionMatches(),
    search({ top: true }),
    yaml(),
    EditorView.lineWrapping,
    EditorState.tabSize.of(2),
    props.complete ? autocompletion({ override: [props.complete], icons: false }) : [],
    textProblems,
    textTheme,
    keymap.of([
      {
        key: 'Mod-s',
        preventDefault: true,
        run: () => {
          props.save();
          return true;
        },
      },
      ...defaultKeymap,
      ...historyKeymap,
      ...searchKeymap,
      ...completionKeymap,
    ]),
    EditorView.contentAttributes.of({ 'aria-label': props.label, spellcheck: 'false', tabindex: '0' }),
    EditorView.updateListener.of((update) => {
      if (update.docChanged) props.change(update.state.doc.toString());
    }),
  ];
}

/**
 * The text of a schedule to write in. It lives in a shadow root: there the editor's own styles are sheets of the root, which
 * the content policy allows, and not elements of the page, which it refuses.
 */
export function TextEditor(props: TextEditorProps) {
  const { label, initialText, problems, complete, handle } = props;
  const host = useRef<HTMLDivElement>(null);
  const view = useRef<EditorView | null>(null);
  const latest = useRef(props);
  latest.current = props;
  useEffect(() => {
    const { current: element } = host;
    if (!element) return undefined;
    const root = element.shadowRoot ?? element.attachShadow({ mode: 'open' });
    const extensions = extensionsOf({
      label,
      complete,
      change: (text) => latest.current.onChange(text),
      save: () => latest.current.onSave?.(),
    });
    const made = new EditorView({ state: EditorState.create({ doc: initialText, extensions }), parent: root, root });
    view.current = made;
    made.dispatch({ effects: setProblems.of(latest.current.problems) });
    return () => {
      view.current = null;
      made.destroy();
    };
  }, [label, initialText, complete]);
  useEffect(() => view.current?.dispatch({ effects: setProblems.of(problems) }), [problems]);
  useImperativeHandle(handle, () => ({
    goTo(line) {
      const { current } = view;
      if (!current || line > current.state.doc.lines) return;
      const { from } = current.state.doc.line(line);
      current.dispatch({
        selection: { anchor: from },
        effects: [seekLine.of(line), EditorView.scrollIntoView(from, { y: 'center' })],
      });
      current.focus();
    },
    append(text) {
      const { current } = view;
      if (!current) return;
      const { length } = current.state.doc;
      const gap = current.state.doc.toString().endsWith('\n') ? '' : '\n';
      current.dispatch({
        changes: { from: length, insert: `${gap}${text}` },
        selection: { anchor: length + gap.length },
        scrollIntoView: true,
      });
      current.focus();
    },
  }));
  return <div className="text-editor" ref={host} />;
}
