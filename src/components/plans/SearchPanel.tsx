import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { cancelJob, useJob } from '../../client/jobs';
import { Queries } from '../../client/queries';
import { searchFound } from '../../schemas/job';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';
import { SearchResult } from './SearchResult';
import { emptySearch } from './search-draft';
import { SearchStart, type SearchableMotor } from './SearchStart';

export interface SearchPanelProps {
  code: string;
  currency: string;
  motors: SearchableMotor[];
  /** Seasons of the schedule, by name. */
  seasons: string[];
  /** The search that runs, or the newest that ended well. */
  jobId: number | null;
  /** What the plans hang on now: a search of anything else is out of date. */
  fingerprint: string;
}

const titles: Record<string, string> = {
  'trial years': 'Trying the best setting on years like the metered one',
  'bank sizes': 'Pricing capacitors, alone and with the fields',
};

function Panel({ code, currency, motors, seasons, jobId: firstId, fingerprint }: SearchPanelProps) {
  const [jobId, setJobId] = useState(firstId);
  const [draft, setDraft] = useState(() => emptySearch(motors.map(({ motorId }) => motorId)));
  const { job, secondsLeft, error } = useJob(jobId);
  const stop = useMutation({ mutationFn: () => cancelJob(jobId ?? 0) });
  const found = searchFound(job);
  const unit = job?.unit ?? 'settings';
  return (
    <div className="search-panel">
      {job?.state === 'running' ? (
        <Progress
          title={titles[unit] ?? 'Pricing settings over the year; more are planned while better ones are found'}
          done={job.done}
          total={job.planned !== null && job.planned > job.done ? job.planned : undefined}
          units={unit}
          secondsLeft={secondsLeft}
          goesOn
          onStop={() => stop.mutate()}
        />
      ) : (
        <SearchStart {...{ code, currency, motors, seasons, draft, setDraft }} onStarted={setJobId} />
      )}
      {job?.state === 'cancelled' && <Notice title="Stopped. Nothing was changed; the plans stand as they were." />}
      {(job?.state === 'failed' || error) && <Notice kind="fault" title={job?.error ?? error ?? ''} />}
      {found && jobId !== null && (
        <SearchResult
          code={code}
          currency={currency}
          jobId={jobId}
          found={found}
          stale={found.fingerprint !== fingerprint}
        />
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
