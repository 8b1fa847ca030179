import { useMutation } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { ApiError } from '../../client/api';
import { makeEdition } from '../../client/editions';
import { cancelJob, useJob } from '../../client/jobs';
import { Queries } from '../../client/queries';
import { Button } from '../ui/Button';
import { SelectField } from '../ui/Field';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';

export interface MakeEditionProps {
  code: string;
  nextNumber: number;
  plans: { id: number; name: string; chosen: boolean }[];
  /** A making that began before the page was opened. */
  runningJobId: number | null;
  /** Whether it is what this page is for now: then its button is the primary one. */
  isNext: boolean;
}

/** Chooses a plan and makes the next edition of it; the making goes on when the page is left. */
export function MakeEdition(props: MakeEditionProps) {
  return (
    <Queries>
      <Maker {...props} />
    </Queries>
  );
}

function Maker({ code, nextNumber, plans, runningJobId, isNext }: MakeEditionProps) {
  const [planId, setPlanId] = useState(plans[0]?.id ?? 0);
  const [jobId, setJobId] = useState(runningJobId);
  const { job, error } = useJob(jobId);
  const making = useMutation({
    mutationFn: () => makeEdition(code, planId),
    onSuccess: (started) => setJobId(started.id),
  });
  useEffect(() => {
    if (job?.state !== 'done' || !job.result || !('number' in job.result)) return;
    location.assign(`/engagements/${code}/report/${job.result.number}`);
  }, [job, code]);
  const trouble = making.error instanceof ApiError ? making.error.message : (job?.error ?? error);
  if (jobId !== null && job?.state === 'running') {
    return (
      <Progress
        title={`Making edition ${nextNumber}: prices, pictures, pages`}
        done={job.done}
        total={job.planned ?? undefined}
        units="steps"
        goesOn
        onStop={() => void cancelJob(jobId)}
      />
    );
  }
  return (
    <form
      className="stacked max-w-[420px]"
      onSubmit={(event) => {
        event.preventDefault();
        making.mutate();
      }}
    >
      <SelectField
        label="Plan it proposes"
        value={String(planId)}
        onChange={(event) => setPlanId(Number(event.target.value))}
        options={plans.map((plan) => ({
          value: String(plan.id),
          label: plan.chosen ? `${plan.name} (chosen)` : plan.name,
        }))}
      />
      <Button type="submit" kind={isNext ? 'primary' : 'secondary'} busy={making.isPending}>
        Make edition {nextNumber}
      </Button>
      {trouble && <Notice kind="fault" title={trouble} />}
      {job?.state === 'cancelled' && <Notice title="Stopped. No edition was made." />}
    </form>
  );
}
