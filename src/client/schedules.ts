import { useEffect, useRef, useState } from 'react';
import type {
  CheckInput,
  CheckView,
  DraftInput,
  KeepRevisionInput,
  MonthChoice,
  NewScheduleInput,
  PutAwayInput,
} from '../schemas/schedule-editor';
import { ApiError, call } from './api';

/** Begins a schedule of one's own. */
export const createSchedule = (input: NewScheduleInput) => call<{ id: string }>('POST', '/api/schedules', input);

/** Keeps a text as the next revision. */
export const keepRevision = (id: string, input: KeepRevisionInput) =>
  call<{ number: number }>('POST', `/api/schedules/${id}/revisions`, input);

/** Keeps what is being written. */
export const keepDraft = (id: string, input: DraftInput) =>
  call<{ at: string }>('PUT', `/api/schedules/${id}/draft`, input);

/** Throws away what was being written. */
export const dropDraft = (id: string) => call<void>('DELETE', `/api/schedules/${id}/draft`);

/** Puts a schedule away or brings it back. */
export const putAway = (id: string, input: PutAwayInput) => call<void>('PATCH', `/api/schedules/${id}`, input);

const checkSchedule = (input: CheckInput) => call<CheckView>('POST', '/api/schedules/check', input);

export interface LiveCheck {
  /** What was said of the text last looked over; null before the first. */
  view: CheckView | null;
  /** The text it was said of. */
  checkedText: string | null;
  busy: boolean;
  error: ApiError | null;
}

const restMs = 250;

/** Looks a text over each time the typing rests; of answers that overtake each other only the latest counts. */
export function useScheduleCheck(slug: string | null, text: string, month: MonthChoice | null): LiveCheck {
  const [state, setState] = useState<LiveCheck>({ view: null, checkedText: null, busy: true, error: null });
  const turn = useRef(0);
  const code = month?.code ?? null;
  const billId = month?.billId ?? null;
  useEffect(() => {
    const own = ++turn.current;
    setState((before) => ({ ...before, busy: true }));
    const timer = setTimeout(() => {
      const chosen = code !== null && billId !== null ? { code, billId } : null;
      checkSchedule({ slug, text, month: chosen }).then(
        (view) => {
          if (own === turn.current) setState({ view, checkedText: text, busy: false, error: null });
        },
        (error: unknown) => {
          if (own !== turn.current) return;
          const known = error instanceof ApiError ? error : new ApiError(0, 'unknown', String(error));
          setState((before) => ({ ...before, busy: false, error: known }));
        },
      );
    }, restMs);
    return () => clearTimeout(timer);
  }, [slug, text, code, billId]);
  return state;
}

export interface KeptDraft {
  /** ISO instant of the last keeping; null where nothing is kept. */
  at: string | null;
  /** Words of it are nowhere but in the browser. */
  isUnkept: boolean;
  error: ApiError | null;
}

const draftRestMs = 1500;

/** Keeps a draft on the server while it is typed. `isChanged`: the text differs from the kept one. */
export function useKeptDraft(id: string, draft: DraftInput, isChanged: boolean, keptAt: string | null): KeptDraft {
  const [state, setState] = useState<KeptDraft>({ at: keptAt, isUnkept: false, error: null });
  const { text, baseNumber } = draft;
  const lastKept = useRef(text);
  useEffect(() => {
    const isUnkept = text !== lastKept.current;
    setState((before) => (before.isUnkept === isUnkept ? before : { ...before, isUnkept }));
    if (!isUnkept) return undefined;
    const timer = setTimeout(() => {
      const work = isChanged
        ? keepDraft(id, { text, baseNumber }).then(({ at }) => at)
        : dropDraft(id).then(() => null);
      work.then(
        (at) => {
          lastKept.current = text;
          setState({ at, isUnkept: false, error: null });
        },
        (error: unknown) => setState((before) => ({ ...before, error: error instanceof ApiError ? error : null })),
      );
    }, draftRestMs);
    return () => clearTimeout(timer);
  }, [id, text, baseNumber, isChanged]);
  return state;
}
