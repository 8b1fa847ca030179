import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { cancelJob, useJob } from '../../client/jobs';
import { startAssumedSaving } from '../../client/plans';
import { Queries } from '../../client/queries';
import type { AssumedSavingState } from '../../schemas/assumed-saving';
import { assumedSavingFound } from '../../schemas/job';
import type { AssumedValue } from '../../schemas/motor';
import { Button } from '../ui/Button';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';
import { measureFirst, swingsOf, swingsTable } from './swings';

export interface AssumedSwingsProps {
  code: string;
  assumed: AssumedValue[];
  saving: AssumedSavingState;
}

function Swings({ code, assumed, saving }: AssumedSwingsProps) {
  const { planName } = saving;
  const [jobId, setJobId] = useState(saving.runningId);
  const { job, secondsLeft, error } = useJob(jobId);
  const start = useMutation({ mutationFn: () => startAssumedSaving(code), onSuccess: ({ id }) => setJobId(id) });
  const stop = useMutation({ mutationFn: () => cancelJob(jobId ?? 0) });
  const found = assumedSavingFound(job) ?? saving.found;
  const swings = swingsOf(assumed, found);
  const table = swingsTable(swings, found);
  const running = job?.state === 'running';
  const failure = start.error?.message ?? (job?.state === 'failed' ? job.error : null) ?? error;
  return (
    <div className="assumed-swings">
      <p className="assumed-sentence">
        <b>{measureFirst(swings, found)}</b>
      </p>
      {table.rows.length > 0 && <LedgerTable {...table} label="What assumed values move" />}
      {running && (
        <Progress
          title={`Pricing ${planName ?? 'the plan'} with every assumed value at both ends of its range`}
          done={job.done}
          total={job.planned ?? undefined}
          units="pricings of the year"
          secondsLeft={secondsLeft}
          goesOn
          onStop={() => stop.mutate()}
        />
      )}
      {failure && <Notice kind="fault" title={failure} />}
      {job?.state === 'cancelled' && <Notice title="Stopped. Nothing was changed." />}
      {!running && !found && planName !== null && assumed.length > 0 && (
        <div className="actions actions-inline">
          <Button kind="secondary" size="small" busy={start.isPending} onClick={() => start.mutate()}>
            {saving.stale ? 'Work the saving out again' : `Work out what they do to the saving of ${planName}`}
          </Button>
          {saving.stale && <span>Motors, bills, tariff or the plan were changed since it was worked out.</span>}
        </div>
      )}
    </div>
  );
}

/** How far kvar and saving move over what is assumed, and what to measure first. */
export function AssumedSwings(props: AssumedSwingsProps) {
  return (
    <Queries>
      <Swings {...props} />
    </Queries>
  );
}
