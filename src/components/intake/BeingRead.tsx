import { useEffect, useState } from 'react';
import { ApiError } from '../../client/api';
import { originalPath } from '../../client/intake';
import { cancelJob, useJob } from '../../client/jobs';
import type { IntakeView } from '../../schemas/intake';
import type { JobProgress } from '../../schemas/job';
import { Button } from '../ui/Button';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';
import type { IntakeActions } from './IntakeSheet';
import { SheetPart } from './Sheet';

const kilobyte = 1000;

/** A file while it is read: how far, and Stop. It turns into the four steps when reading has ended. */
export function BeingRead({ intake, actions }: { intake: IntakeView; actions: IntakeActions }) {
  return (
    <SheetPart
      id="read"
      number="1"
      title="Read"
      lead="The file lies in the drawer. Reading goes on when you leave this page."
      reference={
        <>
          <p>
            <a className="text-link" href={originalPath(intake.id)} download={intake.fileName}>
              Download the original
            </a>
          </p>
          <p title={intake.sha256}>SHA-256 begins {intake.sha256.slice(0, 12)}</p>
        </>
      }
    >
      {intake.reading ? (
        <Followed job={intake.reading} fileName={intake.fileName} onEnd={actions.takeUp} />
      ) : (
        <Notice title="Reading was interrupted.">
          <span className="actions">
            <Button kind="secondary" size="small" busy={actions.busy} onClick={actions.readAgain}>
              Read it again
            </Button>
          </span>
        </Notice>
      )}
    </SheetPart>
  );
}

function Followed({ job: first, fileName, onEnd }: { job: JobProgress; fileName: string; onEnd: () => void }) {
  const { job, secondsLeft, error } = useJob(first.id);
  const [fault, setFault] = useState<string | null>(null);
  const { state } = job ?? first;
  useEffect(() => {
    if (state !== 'running') onEnd();
    // The end is told once, though what it calls is new with every rendering.
  }, [state]);
  const stop = () => {
    cancelJob(first.id).catch((failure: unknown) =>
      setFault(failure instanceof ApiError ? failure.message : 'The reading could not be stopped. Try again.'),
    );
  };
  return (
    <div className="stacked">
      <Progress {...measureOf(job ?? first, fileName)} secondsLeft={secondsLeft} goesOn onStop={stop} />
      {(fault ?? error) && <Notice kind="fault" title={fault ?? error ?? ''} />}
    </div>
  );
}

/** Bytes as kB; a format that cannot be counted by its stages; nothing while it waits for its turn. */
function measureOf({ done, planned, unit }: JobProgress, fileName: string) {
  if (planned === null) return { title: `Opening ${fileName}`, done: 0, units: 'read so far' };
  const title = `Reading ${fileName}`;
  if (unit === 'bytes')
    return {
      title,
      done: Math.round(done / kilobyte),
      total: Math.max(1, Math.round(planned / kilobyte)),
      units: 'kB',
    };
  return { title, done, total: planned, units: unit ?? 'steps' };
}
