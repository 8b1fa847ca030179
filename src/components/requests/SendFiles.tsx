import { useRef } from 'react';
import { Button } from '../ui/Button';
import { DropPlace, FilePicker } from '../ui/DropPlace';
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
  const { sending, send, stopSending } = files;
  const failed = files.notSent.filter((one) => one.position === position);
  const isHere = sending?.position === position;
  const take = (chosen: File[]) => send(position, chosen);
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
    <DropPlace onFiles={take}>
      <FilePicker picker={picker} accept={accepted} multiple onFiles={take} />
      <FilePicker picker={camera} accept="image/*" capture="environment" onFiles={take} />
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
    </DropPlace>
  );
}
