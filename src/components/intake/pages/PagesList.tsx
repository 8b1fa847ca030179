import { useState } from 'react';
import { movePages, pagesPath, removePages } from '../../../client/attachments';
import type { AttachmentView } from '../../../schemas/attachment';
import type { BillView } from '../../../schemas/bill';
import { Button } from '../../ui/Button';
import { formatBillName, formatBytes, formatCount, formatDateTime } from '../../ui/format';
import { Notice } from '../../ui/Notice';
import type { Attachments } from './use-attachments';

export interface PagesListProps {
  attachments: Attachments;
  /** Files of this bill. */
  own: AttachmentView[];
  /** Files that wait for a bill. */
  waiting: AttachmentView[];
  /** Other bills the pages can be moved to. */
  others: BillView[];
  timeZone: string;
  /** A waiting file is taken for this bill. */
  onUse(attachment: AttachmentView): void;
  /** A file of this bill is let wait. */
  onLetWait(attachment: AttachmentView): void;
}

/** Files of the bill and files that wait for one: shown, moved, removed, downloaded. */
export function PagesList(props: PagesListProps) {
  const { attachments, own, waiting, onUse } = props;
  const [removed, setRemoved] = useState<AttachmentView | null>(null);
  const [asked, setAsked] = useState<AttachmentView | null>(null);
  const remove = async (one: AttachmentView) => {
    setAsked(null);
    if (await attachments.change(removePages(one, true))) setRemoved({ ...one, version: one.version + 1 });
  };
  const undo = async (one: AttachmentView) => {
    if (await attachments.change(removePages(one, false))) setRemoved(null);
  };
  return (
    <div className="page-list">
      {own.map((one) => (
        <OwnFile key={one.id} {...props} attachment={one} onAsk={() => setAsked(one)} />
      ))}
      {waiting.length > 0 && (
        <h4>{formatCount(waiting.length, 'file waits for its bill', 'files wait for their bill')}</h4>
      )}
      {waiting.map((one) => (
        <div key={one.id} className="page-file">
          <b>{one.fileName}</b>
          <span className="quiet">{pagesInWords(one)}</span>
          <span className="actions-tight">
            <Button kind="quiet" onClick={() => onUse(one)} aria-label={`Use for this bill: ${one.fileName}`}>
              Use for this bill
            </Button>
            <Button kind="quiet" onClick={() => setAsked(one)} aria-label={`Remove ${one.fileName}`}>
              Remove
            </Button>
          </span>
        </div>
      ))}
      {asked && (
        <Notice title={`Remove ${asked.fileName}?`}>
          <span>Its {pagesInWords(asked)} leave this engagement. Values taken from them stay; this can be undone.</span>
          <span className="actions">
            <Button kind="secondary" size="small" onClick={() => void remove(asked)}>
              Remove it
            </Button>
            <Button kind="quiet" onClick={() => setAsked(null)}>
              Leave it
            </Button>
          </span>
        </Notice>
      )}
      {removed && (
        <Notice title={`${removed.fileName} is removed.`}>
          <span className="actions">
            <Button kind="quiet" onClick={() => void undo(removed)}>
              Undo
            </Button>
          </span>
        </Notice>
      )}
    </div>
  );
}

const pagesInWords = ({ pageCount, mediaType }: AttachmentView) =>
  mediaType !== 'application/pdf'
    ? 'photo'
    : pageCount === null
      ? 'PDF that cannot be opened'
      : formatCount(pageCount, 'page');

function OwnFile(props: PagesListProps & { attachment: AttachmentView; onAsk(): void }) {
  const { attachments, attachment, others, timeZone, onLetWait, onAsk } = props;
  const { id, fileName, attachedBy, attachedAt, bytes } = attachment;
  const move = (billId: number) => void attachments.change(movePages(attachment, billId));
  return (
    <div className="page-file">
      <b>{fileName}</b>
      <span className="quiet">
        {`${pagesInWords(attachment)}, ${formatBytes(bytes)}, ${formatDateTime(attachedAt, timeZone)}${attachedBy ? `, ${attachedBy}` : ''}`}
      </span>
      <span className="actions-tight">
        <a className="text-link" href={pagesPath(id)} download={fileName} aria-label={`Original of ${fileName}`}>
          Original
        </a>
        <Button kind="quiet" onClick={() => onLetWait(attachment)} aria-label={`Take off ${fileName}`}>
          Take off
        </Button>
        {others.length > 0 && attachment.billId !== null && (
          <select
            className="input input-small page-move"
            aria-label={`Move ${fileName} to another bill`}
            value=""
            onChange={(event) => move(Number(event.target.value))}
          >
            <option value="">Move to</option>
            {others.map((bill) => (
              <option key={bill.id} value={bill.id}>
                {formatBillName(bill)}
              </option>
            ))}
          </select>
        )}
        <Button kind="quiet" onClick={onAsk} aria-label={`Remove ${fileName}`}>
          Remove
        </Button>
      </span>
    </div>
  );
}
