import { useState } from 'react';
import { pagesPath } from '../../../client/attachments';
import type { AttachmentView } from '../../../schemas/attachment';
import type { BillView } from '../../../schemas/bill';
import { pageChannel } from './channel';
import { keptPlaces } from './kept-places';
import type { Offer } from './offer';
import { PageViewer } from './PageViewer';

export interface PageWindowProps {
  code: string;
  attachment: AttachmentView;
  bill: BillView | null;
}

/** Pages in a window of their own: where the kept values stand, and numbers for the form in the other window. */
export function PageWindow({ code, attachment, bill }: PageWindowProps) {
  const [said, setSaid] = useState('');
  const send = (offer: Offer) => {
    const channel = pageChannel(code);
    channel.postMessage(offer);
    channel.close();
    setSaid(`${offer.place.text} was handed to the form.`);
  };
  return (
    <div className="pages pages-alone">
      <PageViewer
        code={code}
        attachment={attachment}
        used={bill ? keptPlaces(bill) : []}
        into={null}
        onOffer={send}
        onLeave={() => {}}
        alone
      />
      <p className="page-said" role="status">
        {said}
      </p>
      <p className="text-sm">
        <a className="text-link" href={pagesPath(attachment.id)} download={attachment.fileName}>
          Original, byte for byte as it came
        </a>
      </p>
    </div>
  );
}
