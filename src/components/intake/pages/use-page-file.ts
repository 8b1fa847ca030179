import { useEffect, useState } from 'react';
import { pagesPath } from '../../../client/attachments';
import type { AttachmentView } from '../../../schemas/attachment';
import { openedPdf } from './load-pdf';
import type { OpenPdf } from './pdf';

/** A file of pages as the browser can show it. */
export type PageFile =
  | { kind: 'waiting' }
  | { kind: 'fault'; message: string }
  | { kind: 'photo'; address: string }
  | { kind: 'pdf'; pdf: OpenPdf };

const unreached = 'The pages could not be fetched. Load the page again; if you are signed out, sign in first.';

async function bytesOf(id: number): Promise<ArrayBuffer | null> {
  const response = await fetch(pagesPath(id)).catch(() => null);
  return response?.ok ? response.arrayBuffer() : null;
}

/** Fetches a file and opens it; what was opened is let go when another is shown. */
export function usePageFile({ id, mediaType }: Pick<AttachmentView, 'id' | 'mediaType'>): PageFile {
  const [file, setFile] = useState<PageFile>({ kind: 'waiting' });
  useEffect(() => {
    let left = false;
    let letGo = () => {};
    const show = async (): Promise<PageFile> => {
      const bytes = await bytesOf(id);
      if (!bytes) return { kind: 'fault', message: unreached };
      if (mediaType !== 'application/pdf') {
        const address = URL.createObjectURL(new Blob([bytes], { type: mediaType }));
        letGo = () => URL.revokeObjectURL(address);
        return { kind: 'photo', address };
      }
      const opened = await openedPdf(new Uint8Array(bytes));
      if ('fault' in opened) return { kind: 'fault', message: opened.fault };
      letGo = opened.pdf.close;
      return { kind: 'pdf', pdf: opened.pdf };
    };
    setFile({ kind: 'waiting' });
    void show().then((shown) => (left ? letGo() : setFile(shown)));
    return () => {
      left = true;
      letGo();
    };
  }, [id, mediaType]);
  return file;
}
