import { useState } from 'react';
import { requestFilePath } from '../../client/requests';
import {
  isPicture,
  type FileActInput,
  type StaffFileView,
  type StaffItemView,
  type StaffRequestView,
} from '../../schemas/request';
import { Button } from '../ui/Button';
import { formatBytes, formatDateTime } from '../ui/format';
import { Mark, type MarkProps } from '../ui/Mark';
import type { ActOnFile } from './use-request';

const marks: Record<StaffFileView['state'], MarkProps> = {
  new: { kind: 'half', word: 'to look at' },
  taking: { kind: 'half', word: 'being taken in' },
  taken: { kind: 'filled', word: 'in intake' },
  plate: { kind: 'filled', word: 'beside the nameplate' },
  'set-aside': { kind: 'hollow', word: 'set aside', tone: 'quiet' },
};

interface FileProps {
  request: StaffRequestView;
  item: StaffItemView;
  file: StaffFileView;
  timeZone: string;
  busy: boolean;
  onAct: ActOnFile;
}

type Choice = { input: FileActInput; label: string };

/** What may be done with a file, the likeliest first. */
function choicesOf({ item, file, request }: FileProps): Choice[] {
  const { version, mediaType, state } = file;
  if (state === 'taken' || state === 'taking') return [];
  if (state === 'plate') return [{ label: 'Take it away from the motor', input: { act: 'back', version } }];
  const intake = (kind: 'bills' | 'intervals'): Choice => ({
    label: `Take into intake as ${kind}`,
    input: { act: 'intake', kind, version },
  });
  const isTable = !mediaType.startsWith('image/') && mediaType !== 'application/pdf';
  const tables = !isTable
    ? []
    : item.kind === 'bills'
      ? [intake('bills'), intake('intervals')]
      : [intake('intervals'), intake('bills')];
  const plates = isTable || item.kind === 'bills' ? [] : platesOf(item, version, request.motors);
  const aside: Choice =
    state === 'set-aside'
      ? { label: 'Put it back', input: { act: 'back', version } }
      : { label: 'Set aside', input: { act: 'set-aside', version } };
  return item.kind === 'nameplate' ? [...plates, ...tables, aside] : [...tables, ...plates, aside];
}

function platesOf(item: StaffItemView, version: number, motors: StaffRequestView['motors']): Choice[] {
  const beside = (motor: { id: number; name: string } | null): Choice => ({
    label: motor ? `Lay beside the plate of ${motor.name}` : 'Lay beside the next motor entered',
    input: { act: 'plate', motorId: motor?.id ?? null, version },
  });
  const own = motors.find(({ id }) => id === item.motorId);
  return own ? [beside(own)] : [...motors.map((motor) => beside(motor)), beside(null)];
}

/** Where a file went. */
function Went({ request, file }: Pick<FileProps, 'request' | 'file'>) {
  if (file.intakeId !== null) {
    return (
      <a className="text-link" href={`/engagements/${request.code}/intake/${file.intakeId}`}>
        Open in intake
      </a>
    );
  }
  if (file.state !== 'plate') return null;
  const motor = request.motors.find(({ name }) => name === file.motor);
  return (
    <a className="text-link" href={`/engagements/${request.code}/motors?motor=${motor?.id ?? 'new'}`}>
      {motor ? `Type ${motor.name} beside it` : 'Enter the motor beside it'}
    </a>
  );
}

function FileLine(props: FileProps) {
  const { request, file, timeZone, busy, onAct } = props;
  const [more, setMore] = useState(false);
  const path = requestFilePath(request, file.key);
  const choices = choicesOf(props);
  const shown = more ? choices : choices.slice(0, 1);
  const act = ({ label, input }: Choice, index: number) => (
    <Button
      key={label}
      kind={index === 0 ? 'secondary' : 'quiet'}
      size="small"
      busy={busy}
      onClick={() => onAct(file.key, input)}
    >
      {label}
    </Button>
  );
  return (
    <li>
      <span className="name">
        <a className="text-link" href={path}>
          {file.fileName}
        </a>
        <small>
          {formatBytes(file.bytes)}, {file.by}, {formatDateTime(file.at, timeZone)}
        </small>
      </span>
      <Mark {...marks[file.state]} />
      <span className="actions-tight">
        <Went request={request} file={file} />
        {shown.map(act)}
        {!more && choices.length > 1 && (
          <Button kind="quiet" aria-expanded={false} onClick={() => setMore(true)}>
            Other<span className="unseen"> ways for {file.fileName}</span>
          </Button>
        )}
      </span>
      {isPicture(file.mediaType) && file.state !== 'set-aside' && (
        <span className="whole">
          <img src={path} alt={`${file.fileName}, as it came`} loading="lazy" />
        </span>
      )}
    </li>
  );
}

/** The files of an item with what may be done about each. */
export function ItemFiles(props: Omit<FileProps, 'file'>) {
  const { files } = props.item;
  if (files.length === 0) return null;
  return (
    <ul className="sent-files">
      {files.map((file) => (
        <FileLine key={file.key} {...props} file={file} />
      ))}
    </ul>
  );
}
