import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { ApiError } from '../../client/api';
import { cancelJob, useJob } from '../../client/jobs';
import { startSearch } from '../../client/plans';
import { Queries } from '../../client/queries';
import { searchFound } from '../../schemas/job';
import { searchInput, type SearchView } from '../../schemas/search';
import { Button, ButtonLink } from '../ui/Button';
import { NumberField } from '../ui/Field';
import { formatCount } from '../ui/format';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';
import { typedNumber } from '../ui/typed-number';
import { amperes, settingsWords } from '../ui/setting-words';
import { searchSentence } from './words';

export interface SearchPanelProps {
  code: string;
  currency: string;
  /** The search that runs, or the newest that ended well. */
  jobId: number | null;
  /** What the plans hang on now: a search of anything else is out of date. */
  fingerprint: string;
}

function Found({
  code,
  currency,
  jobId,
  found,
  stale,
}: {
  code: string;
  currency: string;
  jobId: number;
  found: SearchView;
  stale: boolean;
}) {
  return (
    <Notice
      kind={found.leaveAlone || stale ? 'plain' : 'done'}
      title={searchSentence(found.saving, found.leaveAlone, currency)}
    >
      <span>
        {settingsWords(found.fields, { by: 'year' })}. {formatCount(found.priced, 'setting')} priced in steps of{' '}
        {amperes(found.stepA)}
        {found.exhaustive ? ', every one there is.' : '.'}
      </span>
      {found.notes.map((note) => (
        <span key={note}>{note}</span>
      ))}
      {stale && (
        <span>Motors, bills, readings or tariff were changed since: search again before a plan is made of it.</span>
      )}
      {!stale && !found.leaveAlone && (
        <ButtonLink kind="secondary" size="small" href={`/engagements/${code}/plans?plan=new&search=${jobId}#form`}>
          Make it a plan
        </ButtonLink>
      )}
    </Notice>
  );
}

function StartSearch({ code, onStarted }: { code: string; onStarted: (jobId: number) => void }) {
  const [step, setStep] = useState('2');
  const [fault, setFault] = useState<string | null>(null);
  const start = useMutation({
    mutationFn: (stepA: number) => startSearch(code, { stepA }),
    onSuccess: (job) => onStarted(job.id),
    onError: (error) =>
      setFault(error instanceof ApiError ? (error.fields.stepA?.[0] ?? error.message) : error.message),
  });
  const submit = () => {
    const parsed = searchInput.safeParse({ stepA: typedNumber(step) });
    if (!parsed.success) return setFault(parsed.error.issues[0]?.message ?? null);
    setFault(null);
    start.mutate(parsed.data.stepA);
  };
  return (
    <form
      className="search-start"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <NumberField
        label="Step of the field current"
        unit="A"
        size="small"
        hint="What an operator can set at the rheostat"
        value={step}
        onChange={(event) => setStep(event.target.value)}
        error={fault}
      />
      <Button type="submit" kind="secondary" busy={start.isPending}>
        Find the best field currents
      </Button>
    </form>
  );
}

function Panel({ code, currency, jobId: firstId, fingerprint }: SearchPanelProps) {
  const [jobId, setJobId] = useState(firstId);
  const { job, secondsLeft, error } = useJob(jobId);
  const stop = useMutation({ mutationFn: () => cancelJob(jobId ?? 0) });
  const found = searchFound(job);
  return (
    <div className="search-panel">
      {job?.state === 'running' ? (
        <Progress
          title="Pricing settings over the year; more are planned while better ones are found"
          done={job.done}
          total={job.planned !== null && job.planned > job.done ? job.planned : undefined}
          units="settings"
          secondsLeft={secondsLeft}
          goesOn
          onStop={() => stop.mutate()}
        />
      ) : (
        <StartSearch code={code} onStarted={setJobId} />
      )}
      {job?.state === 'cancelled' && <Notice title="Stopped. Nothing was changed; the plans stand as they were." />}
      {(job?.state === 'failed' || error) && <Notice kind="fault" title={job?.error ?? error ?? ''} />}
      {found && jobId !== null && (
        <Found code={code} currency={currency} jobId={jobId} found={found} stale={found.fingerprint !== fingerprint} />
      )}
    </div>
  );
}

/** Starts the search, follows it with an honest measure, and offers what it found as a plan. */
export function SearchPanel(props: SearchPanelProps) {
  return (
    <Queries>
      <Panel {...props} />
    </Queries>
  );
}
