import { useMemo, useState } from 'react';
import { useScheduleCheck } from '../../../client/schedules';
import { Button } from '../../ui/Button';
import { Notice } from '../../ui/Notice';
import { completeSchedule } from '../editor/complete';
import { TextEditor } from '../editor/TextEditor';
import { ExampleBill } from '../ExampleBill';

/** Island: a schedule to change at will, with its worked bills priced as it is typed. Nothing of it is kept. */
export function LiveExample({ label, initialText }: { label: string; initialText: string }) {
  const [text, setText] = useState(initialText);
  const [turn, setTurn] = useState(0);
  const { view, checkedText, error } = useScheduleCheck(null, text, null);
  const problems = useMemo(() => (checkedText === text ? (view?.problems ?? []) : []), [view, checkedText, text]);
  return (
    <div className="editor-columns live-example">
      <div>
        <TextEditor
          key={turn}
          label={`Example: ${label}`}
          initialText={initialText}
          onChange={setText}
          problems={problems}
          complete={completeSchedule}
        />
        {text !== initialText && (
          <Button
            kind="quiet"
            onClick={() => {
              setText(initialText);
              setTurn(turn + 1);
            }}
          >
            As it was
          </Button>
        )}
      </div>
      <div aria-live="polite">
        {error && <Notice kind="fault" title="The example could not be priced.">{` ${error.message}`}</Notice>}
        {problems.length > 0 && (
          <p className="section-lead">
            {problems.length === 1 ? 'One error stops' : `${problems.length} errors stop`} the price; each stands under
            its line with what to do.
          </p>
        )}
        {problems.length === 0 &&
          view?.examples.map((example) => <ExampleBill key={example.title} example={example} />)}
        {problems.length === 0 &&
          view?.sheet?.notes.map(({ where, message }) => (
            <p key={`${where} ${message}`} className="hint">
              Note of the reader: {where && <b>{where}: </b>}
              {message}
            </p>
          ))}
      </div>
    </div>
  );
}
