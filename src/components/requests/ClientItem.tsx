import { useState } from 'react';
import { requestFilePath } from '../../client/requests';
import { isWanted, type ClientFileView, type ClientItemView, type ClientRequestView } from '../../schemas/request';
import { Button } from '../ui/Button';
import { TextAreaField } from '../ui/Field';
import { formatBytes, formatDateTime } from '../ui/format';
import { Mark } from '../ui/Mark';
import { Notice } from '../ui/Notice';
import { aboutItem } from './letter-words';
import { clientMark } from './request-words';
import { SendFiles } from './SendFiles';
import type { AnswerActs } from './use-answers';
import type { SendingFiles } from './use-sending';

interface ItemProps {
  request: ClientRequestView;
  item: ClientItemView;
  isNext: boolean;
  sending: SendingFiles;
  acts: AnswerActs;
}

function SentFile({ request, file, acts }: Pick<ItemProps, 'request' | 'acts'> & { file: ClientFileView }) {
  const [asked, setAsked] = useState(false);
  const { fileName, bytes, at, by, isMine, mayRemove, key } = file;
  return (
    <li>
      <span className="name">
        {fileName}
        <small>
          {formatBytes(bytes)}, {isMine ? 'you' : by},{' '}
          {formatDateTime(at, Intl.DateTimeFormat().resolvedOptions().timeZone)}
        </small>
      </span>
      {isMine && (
        <a className="text-link" href={requestFilePath(request, key)} download={fileName}>
          Open<span className="unseen"> {fileName}</span>
        </a>
      )}
      {mayRemove && !asked && (
        <Button kind="quiet" onClick={() => setAsked(true)}>
          Remove<span className="unseen"> {fileName}</span>
        </Button>
      )}
      {asked && (
        <span className="whole">
          <Notice title={`Remove ${fileName}?`}>
            <span className="actions actions-inline">
              <Button kind="secondary" size="small" busy={acts.busy} onClick={() => acts.remove(file)}>
                Remove it
              </Button>
              <Button kind="quiet" onClick={() => setAsked(false)}>
                Leave it
              </Button>
            </span>
          </Notice>
        </span>
      )}
    </li>
  );
}

function NotThere({ item, acts }: Pick<ItemProps, 'item' | 'acts'>) {
  const [open, setOpen] = useState(false);
  const [words, setWords] = useState('');
  if (!open) {
    return (
      <p className="mt-3">
        <Button kind="quiet" onClick={() => setOpen(true)}>
          I do not have this<span className="unseen">: thing {item.position}</span>
        </Button>
      </p>
    );
  }
  return (
    <div className="stacked">
      <TextAreaField
        label="Why not, or where it may be found"
        rows={2}
        value={words}
        error={acts.fieldFault(item, 'words')}
        onChange={(event) => setWords(event.target.value)}
      />
      <span className="actions">
        <Button
          kind="secondary"
          busy={acts.busy}
          waiting={words.trim().length < 3 && 'write a few words first'}
          onClick={() => acts.answer(item, words)}
        >
          Tell them
        </Button>
        <Button kind="quiet" onClick={() => setOpen(false)}>
          I may have it after all
        </Button>
      </span>
    </div>
  );
}

/** One thing asked for: what it is, what was sent for it, how to send more. */
export function ClientItem({ request, item, isNext, sending, acts }: ItemProps) {
  const { position, words, reason, answer, files, state } = item;
  const { mayAnswer } = request;
  return (
    <article className="wanted" id={`thing-${position}`}>
      <header>
        <div>
          <h2>
            {position}. {words}
          </h2>
          <p className="about">{aboutItem(item)}</p>
        </div>
        <Mark {...clientMark(item)} />
      </header>
      {reason && state !== 'accepted' && (
        <Notice kind={state === 'sent-back' ? 'fault' : 'plain'} title="It needs another look:">
          <span>{reason}</span>
        </Notice>
      )}
      {files.length > 0 && (
        <ul className="sent-files">
          {files.map((file) => (
            <SentFile key={file.key} request={request} file={file} acts={acts} />
          ))}
        </ul>
      )}
      {answer && (
        <Notice title="You said that you do not have it:">
          <span>{answer}</span>
          {mayAnswer && state !== 'accepted' && (
            <Button kind="quiet" busy={acts.busy} onClick={() => acts.answer(item, null)}>
              Take that back
            </Button>
          )}
        </Notice>
      )}
      {mayAnswer && (
        <SendFiles position={position} isNext={isNext} photoFirst={item.kind === 'nameplate'} sending={sending} />
      )}
      {mayAnswer && isWanted(item) && <NotThere item={item} acts={acts} />}
      {acts.faultAt(item) && <Notice kind="fault" title={acts.faultAt(item) ?? ''} />}
    </article>
  );
}
