import { useCallback, useEffect, useState } from 'react';
import { ApiError } from './api';

/** The two verbs of react-hook-form that keeping a draft needs. */
interface DraftedForm<Values> {
  getValues(): Values;
  reset(values: Values, options?: { keepDefaultValues?: boolean }): void;
}

export interface Draft {
  /** Whether what stands in the form was typed before the session ended. */
  restored: boolean;
  /** Keeps the form and leads to sign in where an error says that nobody is signed in; tells whether it did. */
  rescue(error: unknown): boolean;
}

const place = (key: string) => `counterlag-draft:${key}`;

/**
 * Keeps what was typed when the session has ended: on a 401 the form is laid into this tab's storage, the person signs
 * in, comes back to the same page and finds the form as it was. Never use it for passwords.
 *
 * @param key  Names the form on its page: "hours:KG-02"
 */
export function useDraft<Values>(key: string, form: DraftedForm<Values>): Draft {
  const [restored, setRestored] = useState(false);
  const { reset, getValues } = form;
  useEffect(() => {
    const kept = sessionStorage.getItem(place(key));
    if (kept === null) return;
    sessionStorage.removeItem(place(key));
    reset(JSON.parse(kept) as Values, { keepDefaultValues: true });
    setRestored(true);
  }, [key, reset]);
  const rescue = useCallback(
    (error: unknown) => {
      if (!(error instanceof ApiError) || error.status !== 401) return false;
      sessionStorage.setItem(place(key), JSON.stringify(getValues()));
      const here = location.pathname + location.search;
      location.assign(`/sign-in?next=${encodeURIComponent(here)}`);
      return true;
    },
    [key, getValues],
  );
  return { restored, rescue };
}
