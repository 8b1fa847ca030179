import { useState } from 'react';
import { isWanted, type StaffItemView } from '../../schemas/request';
import { Button } from '../ui/Button';
import { TextAreaField } from '../ui/Field';
import { Mark } from '../ui/Mark';
import { Notice } from '../ui/Notice';
import { ItemFiles } from './ItemFiles';
import { aboutItem } from './letter-words';
import { staffMark } from './request-words';
import type { OpenedRequest } from './use-request';

interface ItemPartProps {
  opened: OpenedRequest;
  item: StaffItemView;
  timeZone: string;
}

/** Accepts an item, or sends it back with a reason that its people get by mail. */
function Decide({ opened, item }: Pick<ItemPartProps, 'opened' | 'item'>) {
  const [asked, setAsked] = useState(false);
  const [reason, setReason] = useState('');
  const { busy, decide, fault } = opened;
  const { position, version, state } = item;
  const sendBack = async () => {
    if (await decide(position, { to: 'sent-back', reason, version })) setAsked(false);
  };
  if (asked) {
    return (
      <div className="stacked">
        <TextAreaField
          label="What is missing or wrong"
          hint="The people of the request get it by mail and on their page. Files not taken are set aside."
          rows={2}
          value={reason}
          error={fault?.fields.reason?.[0]}
          onChange={(event) => setReason(event.target.value)}
        />
        <span className="actions actions-inline">
          <Button
            kind="secondary"
            size="small"
            busy={busy}
            waiting={reason.trim().length < 3 && 'write the reason first'}
            onClick={() => void sendBack()}
          >
            Send it back
          </Button>
          <Button kind="quiet" onClick={() => setAsked(false)}>
            Leave it
          </Button>
        </span>
      </div>
    );
  }
  return (
    <div className="actions actions-inline mt-3">
      {state !== 'accepted' && (
        <Button
          kind="secondary"
          size="small"
          busy={busy}
          onClick={() => void decide(position, { to: 'accepted', version })}
        >
          Accept<span className="unseen"> thing {position}</span>
        </Button>
      )}
      <Button kind="quiet" onClick={() => setAsked(true)}>
        Send back with a reason<span className="unseen">: thing {position}</span>
      </Button>
    </div>
  );
}

/** One thing asked for, what came for it, and what is decided. */
export function ItemPart({ opened, item, timeZone }: ItemPartProps) {
  const { request, busy, actOn } = opened;
  const { position, words, answer, answeredBy, reason } = item;
  return (
    <article className="wanted" id={`thing-${position}`}>
      <header>
        <div>
          <h3>
            {position}. {words}
          </h3>
          <p className="about">{aboutItem(item)}</p>
        </div>
        <Mark {...staffMark(item)} />
      </header>
      {answer && (
        <Notice title={`${answeredBy ?? 'The client'} does not have it:`}>
          <span>{answer}</span>
        </Notice>
      )}
      {reason && (
        <Notice title="Sent back:">
          <span>{reason}</span>
        </Notice>
      )}
      <ItemFiles
        request={request}
        item={item}
        timeZone={timeZone}
        busy={busy}
        onAct={(key, input) => void actOn(key, input)}
      />
      {request.state === 'open' && !isWanted(item) && <Decide opened={opened} item={item} />}
    </article>
  );
}
