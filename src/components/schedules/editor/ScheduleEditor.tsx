import { useMemo, useRef, useState } from 'react';
import { dropDraft, useKeptDraft, useScheduleCheck } from '../../../client/schedules';
import type { EditorView, MonthChoice } from '../../../schemas/schedule-editor';
import { Button, ButtonLink } from '../../ui/Button';
import { Field } from '../../ui/Field';
import { formatTime } from '../../ui/format';
import { Notice } from '../../ui/Notice';
import { YearFigure } from '../YearFigure';
import { completeSchedule } from './complete';
import { editorHead, keepLabel } from './editor-words';
import { EditorResult } from './EditorResult';
import { ExamplesPanel } from './ExamplesPanel';
import { KeepFault, useKeeping, useLeaveWarning } from './keeping';
import { MonthPanel } from './MonthPanel';
import { ScheduleWords } from '../ScheduleWords';
import { TextEditor, type TextHandle } from './TextEditor';

function firstMonth({ months }: EditorView): MonthChoice | null {
  const [source] = months;
  const bill = source?.bills.at(-1);
  return source && bill ? { code: source.code, billId: bill.id } : null;
}

/** Island: a schedule's text to write in, beside what it says and what a month costs under it. */
export function ScheduleEditor({ editor }: { editor: EditorView }) {
  const initialText = editor.draft?.text ?? editor.keptText;
  const [text, setText] = useState(initialText);
  const [month, setMonth] = useState(() => firstMonth(editor));
  const handle = useRef<TextHandle>(null);
  const isChanged = text !== editor.keptText;
  const check = useScheduleCheck(editor.id, text, month);
  const baseNumber = editor.draft?.baseNumber ?? editor.revision;
  const draft = useKeptDraft(editor.id, { text, baseNumber }, isChanged, editor.draft?.at ?? null);
  const keeping = useKeeping(editor, text);
  useLeaveWarning(draft.isUnkept && !keeping.busy);
  const { view } = check;
  const isCurrent = check.checkedText === text && !check.busy;
  const head = editorHead({ editor, view, isChanged, isCurrent });
  const problems = useMemo(
    () => (check.checkedText === text ? (view?.problems ?? []) : []),
    [view, check.checkedText, text],
  );
  const goTo = (line: number) => handle.current?.goTo(line);
  const keptName = editor.revision === 0 ? "Library's file" : `Revision ${editor.revision}`;
  const giveUp = async () => {
    await dropDraft(editor.id);
    location.assign(`/schedules/${editor.id}`);
  };
  return (
    <>
      <header className="sheet-head">
        <p className="context">
          Schedule {editor.id}, {editor.revision === 0 ? 'a file of the library' : `revision ${editor.revision}`}
        </p>
        <h1>{head.title}</h1>
        <p className="lead" role="status">
          {head.lead}
        </p>
        <div className="actions">
          <ButtonLink kind="secondary" href={`/schedules/${editor.id}`}>
            Back to the sheet
          </ButtonLink>
          <Button busy={keeping.busy} waiting={head.obstacle} onClick={() => void keeping.keep()}>
            {keepLabel(editor)}
          </Button>
        </div>
      </header>
      <div className="columns column-names" aria-hidden="true">
        <div className="reference">Reference</div>
        <div className="working">Working</div>
        <div className="result">Result</div>
      </div>
      <section className="columns">
        <div className="reference">
          <p>Ctrl and blank complete a word, F8 goes to the next error, F4 puts it right, Ctrl F seeks.</p>
          <p>
            <a className="text-link" href="/schedules/guide" target="_blank">
              How to write a schedule
            </a>
          </p>
          <p>{draftWords(draft.at, draft.error !== null, isChanged)}</p>
        </div>
        <div className="working">
          {keeping.fault && <KeepFault fault={keeping.fault} onOver={(revision) => void keeping.keep(revision)} />}
          {check.error && (
            <Notice kind="fault" title="The text could not be looked over.">{` ${check.error.message}`}</Notice>
          )}
          {editor.draft && editor.draft.baseNumber < editor.revision && (
            <Notice title={`Your draft was begun on revision ${editor.draft.baseNumber}.`}>
              {` Revision ${editor.revision} was kept since; the history shows what changed.`}
            </Notice>
          )}
          <div className="editor-columns">
            <div className="editor-text">
              <h2 className="section-title">{editor.id}.yaml</h2>
              <TextEditor
                label={`Text of ${editor.id}`}
                initialText={initialText}
                onChange={setText}
                problems={problems}
                complete={completeSchedule}
                onSave={() => head.obstacle === null && void keeping.keep()}
                handle={handle}
              />
              <div className="editor-foot">
                <Field
                  label="What changed, for the history"
                  value={keeping.note}
                  maxLength={300}
                  onChange={(event) => keeping.setNote(event.target.value)}
                />
                {isChanged && (
                  <Button kind="quiet" onClick={() => confirmGiveUp(editor) && void giveUp()}>
                    Throw this draft away
                  </Button>
                )}
              </div>
            </div>
            <div className="editor-said" aria-busy={check.busy}>
              <h2 className="section-title">A month, priced as you type</h2>
              <MonthPanel
                sources={editor.months}
                choice={month}
                onChoose={setMonth}
                month={view?.month ?? null}
                keptName={keptName}
              />
              <h2 className="section-title">Worked bills it must reproduce</h2>
              <ExamplesPanel examples={view?.examples ?? []} onGo={goTo} />
              {view?.sheet && <ScheduleWords sheet={view.sheet} onGo={goTo} />}
              {view?.sheet?.year && (
                <>
                  <h3 className="section-title">The year by day and hour</h3>
                  <YearFigure picture={view.sheet.year} fileName={`${editor.id}-${view.sheet.year.year}`} />
                </>
              )}
            </div>
          </div>
        </div>
        <EditorResult editor={editor} view={view} problems={problems} keptName={keptName} />
      </section>
    </>
  );
}

const confirmGiveUp = ({ id }: EditorView) =>
  window.confirm(`Throw away your draft of ${id}? What is kept stays; what you wrote since is gone.`);

function draftWords(at: string | null, isLost: boolean, isChanged: boolean): string {
  if (isLost) return 'The draft cannot be kept at this moment. It is still here; do not close the page.';
  if (!isChanged) return 'No draft: the text is the one that is kept.';
  return at
    ? `Draft kept ${formatTime(at)}. It waits for you on any machine.`
    : 'The draft is kept when the typing rests.';
}
