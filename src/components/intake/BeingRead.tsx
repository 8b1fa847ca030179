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
      <Measure job={job ?? first} fileName={fileName} secondsLeft={secondsLeft} onStop={stop} />
      {(fault ?? error) && <Notice kind="fault" title={fault ?? error ?? ''} />}
    </div>
  );
}

interface MeasureProps {
  job: JobProgress;
  fileName: string;
  secondsLeft: number | null;
  onStop: () => void;
}

/** Bytes as kB, a format that cannot be counted by its stages; before the first word of the reader only that it waits. */
function Measure({ job: { done, planned, unit }, fileName, secondsLeft, onStop }: MeasureProps) {
  if (planned === null) {
    return (
      <div className="progress" role="status">
        <div className="progress-line">
          <span>Opening {fileName}</span>
        </div>
        <div className="progress-line hint">
          <span>Two files are read at a time; others wait for their turn.</span>
          <Button kind="quiet" onClick={onStop}>
            Stop
          </Button>
        </div>
      </div>
    );
  }
  const size = unit === 'bytes' ? kilobyte : 1;
  return (
    <Progress
      title={`Reading ${fileName}`}
      done={Math.round(done / size)}
      total={Math.max(1, Math.round(planned / size))}
      units={unit === 'bytes' ? 'kB' : (unit ?? 'steps')}
      secondsLeft={secondsLeft}
      onStop={onStop}
    />
  );
}
