import { useRef, useState, type DragEvent } from 'react';
import { Button } from '../ui/Button';
import { formatCount } from '../ui/format';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';
import type { SendingFiles } from './use-sending';

export interface SendFilesProps {
  position: number;
  /** Whether it is what the page is for now: then its first button is the primary one. */
  isNext: boolean;
  /** A photo is the likeliest: its button stands first. */
  photoFirst: boolean;
  sending: SendingFiles;
}

const accepted = '.csv,.txt,.tsv,.xlsx,.xls,.ods,.xml,.zip,.pdf,.heic,image/*';

/** Chooses files, takes photos or dropped files for one thing, with an honest measure of what has gone. */
export function SendFiles({ position, isNext, photoFirst, sending: files }: SendFilesProps) {
  const picker = useRef<HTMLInputElement>(null);
  const camera = useRef<HTMLInputElement>(null);
  const [over, setOver] = useState(false);
  const { sending, send, stopSending } = files;
  const failed = files.notSent.filter((one) => one.position === position);
  const isHere = sending?.position === position;
  const input = (ref: typeof picker, given: { accept: string; capture?: 'environment'; multiple?: boolean }) => (
    <input
      ref={ref}
      type="file"
      className="unseen"
      tabIndex={-1}
      aria-hidden="true"
      {...given}
      onChange={(event) => {
        send(position, event.target.files ?? []);
        event.target.value = '';
      }}
    />
  );
  const handleDrop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    send(position, event.dataTransfer.files);
  };
  const kindOf = (isFirst: boolean) => (isNext && isFirst ? 'primary' : 'secondary');
  const choose = (
    <Button key="choose" kind={kindOf(!photoFirst)} onClick={() => picker.current?.click()}>
      Choose files<span className="unseen"> for thing {position}</span>
    </Button>
  );
  const photo = (
    <Button key="photo" kind={kindOf(photoFirst)} onClick={() => camera.current?.click()}>
      Take a photo<span className="unseen"> for thing {position}</span>
    </Button>
  );
  return (
    <div
      className={`drop-place ${over ? 'drop-place-over' : ''}`}
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={handleDrop}
    >
      {input(picker, { accept: accepted, multiple: true })}
      {input(camera, { accept: 'image/*', capture: 'environment' })}
      <div className="actions">
        {photoFirst ? [photo, choose] : [choose, photo]}
        <span className="hint drop-word">or drop them here</span>
      </div>
      {isHere && sending && (
        <div className="mt-3">
          <Progress
            title={`Sending ${sending.name}`}
            done={Math.round(sending.sent / 1000)}
            total={Math.max(1, Math.round(sending.bytes / 1000))}
            units={sending.behind > 0 ? `kB, then ${formatCount(sending.behind, 'more file')}` : 'kB'}
            onStop={stopSending}
          />
        </div>
      )}
      {failed.map(({ name, message, file }, index) => (
        <div className="mt-3" key={index}>
          <Notice kind="fault" title={`${name} was not sent.`}>
            <span>{message}</span>
            <Button kind="quiet" onClick={() => send(position, [file])}>
              Send it again
            </Button>
          </Notice>
        </div>
      ))}
    </div>
  );
}
