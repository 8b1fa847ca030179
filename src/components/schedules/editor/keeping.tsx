import { useEffect, useState } from 'react';
import { ApiError } from '../../../client/api';
import { keepRevision } from '../../../client/schedules';
import type { EditorView } from '../../../schemas/schedule-editor';
import { Notice } from '../../ui/Notice';

/** Keeps the text as a revision; tells what stood in the way. */
export function useKeeping(editor: EditorView, text: string) {
  const [note, setNote] = useState('');
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<ApiError | null>(null);
  const keep = async (baseNumber = editor.draft?.baseNumber ?? editor.revision) => {
    if (busy) return;
    setBusy(true);
    setFault(null);
    try {
      await keepRevision(editor.id, { text, note, baseNumber });
      location.assign(`/schedules/${editor.id}`);
    } catch (error) {
      if (!(error instanceof ApiError)) throw error;
      setFault(error);
      setBusy(false);
    }
  };
  return { note, setNote, busy, fault, keep };
}

/** Warns before a page with words in it that are nowhere kept is left. */
export function useLeaveWarning(isUnkept: boolean) {
  useEffect(() => {
    if (!isUnkept) return undefined;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [isUnkept]);
}

/** What stood in the way of keeping, with what to do. */
export function KeepFault({ fault, onOver }: { fault: ApiError; onOver: (revision: number) => void }) {
  if (fault.status === 401) {
    return (
      <Notice kind="fault" title="You are signed out.">
        {' '}
        Your text is still here.{' '}
        <a href="/sign-in" target="_blank" rel="noreferrer">
          Sign in in another window
        </a>
        , then press again.
      </Notice>
    );
  }
  const theirs = fault.details.theirs as { revision?: number } | undefined;
  if (fault.code === 'stale' && theirs?.revision !== undefined) {
    const { revision } = theirs;
    return (
      <Notice kind="fault" title={`Somebody kept revision ${revision} while you were writing.`}>
        {
          ' Your text is still here and rests on an earlier one. Look what changed in the history, put it into yours, then '
        }
        <button type="button" className="text-button" onClick={() => onOver(revision)}>
          keep yours after it
        </button>
        .
      </Notice>
    );
  }
  return (
    <Notice
      kind="fault"
      title={fault.message}
      problems={Object.values(fault.fields)
        .flat()
        .map((message) => ({ message }))}
    />
  );
}
