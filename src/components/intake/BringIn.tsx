import { useRef, useState } from 'react';
import { ApiError } from '../../client/api';
import { bringIn, intakePage } from '../../client/intake';
import { Button } from '../ui/Button';
import { DropPlace, FilePicker } from '../ui/DropPlace';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';

export interface BringInProps {
  code: string;
  kind: 'intervals' | 'bills';
  /** The meter of the readings; left out: the engagement's own. */
  meterId?: number;
  /** The one primary button of the screen. */
  primary?: boolean;
}

const accepted = {
  intervals: '.csv,.txt,.tsv,.xlsx,.xls,.ods,.xml,.zip',
  bills: '.csv,.txt,.tsv,.xlsx,.xls,.ods,.zip',
};
const kinds = {
  intervals: 'Delimited text, a workbook (xlsx, xls, ods), ESPI XML or NEM12, also zipped; up to 128 MiB.',
  bills: 'A table of bills as delimited text or a workbook (xlsx, xls, ods), also zipped; up to 128 MiB.',
};

interface Sending {
  file: File;
  sent: number;
  stop: AbortController;
}

/** Picks or takes a dropped file, sends it with an honest measure, and opens its intake. */
export function BringIn({ code, kind, meterId, primary = false }: BringInProps) {
  const picker = useRef<HTMLInputElement>(null);
  const [sending, setSending] = useState<Sending | null>(null);
  const [fault, setFault] = useState<ApiError | null>(null);

  const send = async (file: File) => {
    const stop = new AbortController();
    setFault(null);
    setSending({ file, sent: 0, stop });
    const onProgress = (share: number) => setSending({ file, sent: share * file.size, stop });
    try {
      const intake = await bringIn(code, { kind, meterId }, file, onProgress, stop.signal);
      window.location.assign(intakePage(code, intake.id));
    } catch (error) {
      setSending(null);
      setFault(
        error instanceof ApiError ? error : new ApiError(0, 'unknown', 'The file could not be sent. Try again.'),
      );
    }
  };
  const take = ([file]: File[]) => {
    if (file && !sending) void send(file);
  };
  return (
    <DropPlace onFiles={take}>
      <FilePicker picker={picker} accept={accepted[kind]} onFiles={take} />
      {sending ? (
        <SendingFile {...sending} />
      ) : (
        <div className="actions">
          <Button kind={primary ? 'primary' : 'secondary'} onClick={() => picker.current?.click()}>
            Bring in a file
          </Button>
          <span>or drop it here</span>
          <span className="hint">{kinds[kind]}</span>
        </div>
      )}
      {fault && (
        <div className="mt-3">
          {fault.code === 'stopped' ? (
            <Notice title={fault.message} />
          ) : (
            <Notice kind="fault" title="The file was not taken in.">
              {fault.message}
            </Notice>
          )}
        </div>
      )}
    </DropPlace>
  );
}

function SendingFile({ file, sent, stop }: Sending) {
  if (sent < file.size) {
    return (
      <Progress
        title={`Sending ${file.name}`}
        done={Math.round(sent / 1000)}
        total={Math.max(1, Math.round(file.size / 1000))}
        units="kB"
        onStop={() => stop.abort()}
      />
    );
  }
  return (
    <div className="progress" role="status">
      <div className="progress-line">
        <span>Reading {file.name}</span>
      </div>
      <div className="progress-line hint">
        <span>The file is here. Reading goes on when you leave; it then waits in the list of this station.</span>
      </div>
    </div>
  );
}
