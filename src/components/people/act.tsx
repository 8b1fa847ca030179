import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { ApiError } from '../../client/api';
import { Notice } from '../ui/Notice';
import { StaleCompare, type StaleDifference } from '../ui/StaleCompare';

type Values = Record<string, unknown>;

const words = (value: unknown): string => {
  if (value === null || value === undefined || value === '') return 'none';
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (typeof value !== 'object') return String(value);
  const entries = Object.entries(value as Values);
  return entries.map(([name, one]) => `${name} ${words(one)}`).join(', ');
};

function differences(mine: Values, theirs: Values): StaleDifference[] {
  return Object.keys(mine)
    .filter((name) => name in theirs && words(mine[name]) !== words(theirs[name]))
    .map((label) => ({ label, mine: words(mine[label]), theirs: words(theirs[label]) }));
}

/** One write against the version seen; afterwards the page is loaded anew. */
export function useAct<Input>(version: number, run: (version: number, input: Input) => Promise<unknown>) {
  const [last, setLast] = useState<Input | null>(null);
  const act = useMutation({
    mutationFn: ({ over, input }: { over: number; input: Input }) => run(over, input),
    onSuccess: () => location.reload(),
    onError: (error) => {
      if (error instanceof ApiError && error.status === 401) {
        location.assign(`/sign-in?next=${encodeURIComponent(location.pathname)}`);
      }
    },
  });
  const send = (input: Input, over = version) => {
    setLast(input);
    act.mutate({ over, input });
  };
  const error = act.error instanceof ApiError ? act.error : null;
  return { send, last, error, busy: act.isPending || act.isSuccess, fields: error?.fields ?? {} };
}

export type Act<Input> = ReturnType<typeof useAct<Input>>;

/** What went wrong with a write: both values where somebody saved meanwhile, else its words. */
export function ActFault<Input>({ act, what }: { act: Act<Input>; what: string }) {
  const { error, last } = act;
  if (!error) return null;
  const { mine, theirs } = error.details as { mine?: Values; theirs?: Values & { version?: number } };
  if (error.code === 'stale' && theirs && last !== null) {
    return (
      <StaleCompare
        what={what}
        differences={differences(mine ?? {}, theirs)}
        busy={act.busy}
        onLoadTheirs={() => location.reload()}
        onSaveMine={() => act.send(last, theirs.version)}
      />
    );
  }
  return Object.keys(error.fields).length > 0 ? null : <Notice kind="fault" title={error.message} />;
}
