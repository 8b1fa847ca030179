import { cancelJob, useJob } from '../../client/jobs';
import type { RunningView } from '../../schemas/today';
import { Progress } from '../ui/Progress';

const kindWords: Record<string, string> = {
  search: 'Search of settings',
  edition: 'Making an edition',
  'read-file': 'Reading a file',
};

function Running({ code, job: first }: RunningView) {
  const { job, secondsLeft } = useJob(first.id);
  const { id, kind, state, done, planned, unit, error } = job ?? first;
  const title = `${kindWords[kind] ?? kind}, ${code}`;
  if (state !== 'running') {
    const ending = { done: 'is done', failed: error ?? 'failed', cancelled: 'was stopped' }[state];
    return (
      <p>
        <b>{title}</b> {ending}
      </p>
    );
  }
  return (
    <Progress
      title={title}
      done={done}
      total={planned ?? undefined}
      units={unit ?? 'steps'}
      secondsLeft={secondsLeft}
      goesOn
      onStop={() => void cancelJob(id)}
    />
  );
}

/** Long work of all engagements, each with its measure and Stop. */
export function RunningJobs({ running }: { running: RunningView[] }) {
  return (
    <>
      {running.map((one) => (
        <Running key={one.job.id} {...one} />
      ))}
    </>
  );
}
