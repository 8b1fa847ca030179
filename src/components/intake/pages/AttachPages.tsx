import { useRef, useState } from 'react';
import { ApiError } from '../../../client/api';
import { attachFile } from '../../../client/attachments';
import { pagesCapBytes, type AttachedFile } from '../../../schemas/attachment';
import { Button } from '../../ui/Button';
import { DropPlace, FilePicker } from '../../ui/DropPlace';
import { Notice } from '../../ui/Notice';
import { Progress } from '../../ui/Progress';
import { countPages } from './load-pdf';
import { isOffer } from './offer';

export interface AttachPagesProps {
  code: string;
  /** The bill the pages belong to; null while it is not kept. */
  billId: number | null;
  /** No page is there yet: the place says what to do first. */
  first: boolean;
  onAttached(file: AttachedFile): void;
}

interface Refusal {
  fileName: string;
  message: string;
}

const accepted = '.pdf,.jpg,.jpeg,.png,.webp,application/pdf,image/jpeg,image/png,image/webp';
const tooLarge = 'The file is larger than 32 MiB. Split it by bill, or save it smaller.';

/** Takes PDF and photos, several at once, and sends them one after another. */
export function AttachPages({ code, billId, first, onAttached }: AttachPagesProps) {
  const picker = useRef<HTMLInputElement>(null);
  const [sending, setSending] = useState<{ fileName: string; share: number } | null>(null);
  const [refusals, setRefusals] = useState<Refusal[]>([]);

  const sendOne = async (file: File) => {
    setSending({ fileName: file.name, share: 0 });
    if (file.size > pagesCapBytes)
      return setRefusals((before) => [...before, { fileName: file.name, message: tooLarge }]);
    try {
      const pageCount = await countPages(file);
      const onProgress = (share: number) => setSending({ fileName: file.name, share });
      onAttached(await attachFile(code, file, { billId, pageCount }, onProgress));
    } catch (error) {
      const message = error instanceof ApiError ? error.message : 'The file could not be sent. Try again.';
      setRefusals((before) => [...before, { fileName: file.name, message }]);
    }
  };
  const send = async (files: File[]) => {
    if (sending || files.length === 0) return;
    setRefusals([]);
    for (const file of files) await sendOne(file);
    setSending(null);
  };
  return (
    <DropPlace
      onFiles={(files) => void send(files)}
      takes={(dragged) => !isOffer(dragged)}
      className={first ? 'page-attach-first' : ''}
    >
      <FilePicker picker={picker} multiple accept={accepted} onFiles={(files) => void send(files)} />
      {sending ? (
        <Progress title={`Sending ${sending.fileName}`} done={Math.round(sending.share * 100)} total={100} units="%" />
      ) : (
        <div className="actions">
          <Button kind="secondary" size="small" onClick={() => picker.current?.click()}>
            {first ? 'Attach the bill' : 'Attach more pages'}
          </Button>
          <span>or drop it here</span>
          <span className="hint">
            {first
              ? 'The bill as PDF or photo (JPEG, PNG, WebP), several files at once; up to 32 MiB each. Numbers of a PDF can be dragged onto the fields.'
              : 'PDF, JPEG, PNG, WebP'}
          </span>
        </div>
      )}
      {refusals.length > 0 && (
        <div className="mt-2">
          <Notice
            kind="fault"
            title={refusals.length === 1 ? 'One file was not attached.' : `${refusals.length} files were not attached.`}
            problems={refusals.map(({ fileName, message }) => ({
              message: message.startsWith(fileName) ? message : `${fileName}: ${message}`,
            }))}
          />
        </div>
      )}
    </DropPlace>
  );
}
