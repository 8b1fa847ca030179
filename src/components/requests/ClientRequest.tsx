import { useState } from 'react';
import { isWanted, type ClientRequestView } from '../../schemas/request';
import { SheetHeading } from '../intake/Sheet';
import { formatLongDate } from '../ui/format';
import { ResultSums } from '../ui/ResultSums';
import { ClientItem } from './ClientItem';
import { clientHeading, dueWords } from './request-words';
import { useAnswers } from './use-answers';
import { useSending } from './use-sending';

export interface ClientRequestProps {
  request: ClientRequestView;
}

function Aside({ request }: ClientRequestProps) {
  const { items, by, sentOn, dueOn, daysLeft, state } = request;
  const answered = items.filter((item) => !isWanted(item)).length;
  const isLate = state === 'open' && daysLeft < 0 && answered < items.length;
  return (
    <aside className="result">
      <h2 className="section-title">Where it stands</h2>
      <ResultSums
        rows={[
          { label: 'Asked on', value: formatLongDate(sentOn) },
          { label: 'Needed by', value: formatLongDate(dueOn) },
          ...(state === 'open'
            ? [{ label: '', value: dueWords(daysLeft), tone: isLate ? ('fault' as const) : undefined }]
            : []),
          { label: 'Answered', value: `${answered} of ${items.length}`, kind: 'total' as const },
        ]}
      />
      <h2 className="section-title mt-6">Who asks</h2>
      <p>
        <b>{by.name}</b>, {by.practice}
        {by.phone && <>, telephone {by.phone.replaceAll(' ', '\u00a0')}</>}
      </p>
      {by.email && (
        <p>
          <a className="text-link" href={`mailto:${by.email}`}>
            {by.email}
          </a>
        </p>
      )}
      <p className="mt-3">
        Tables (CSV, text, Excel, OpenDocument, XML, also zipped), PDFs and photos; up to 128 MiB a file. Only{' '}
        {by.practice} and your own people see that they are here.
      </p>
    </aside>
  );
}

/** Island: what a client is asked for, with every way to answer it. Made for a telephone first. */
export function ClientRequest({ request: start }: ClientRequestProps) {
  const [request, setRequest] = useState(start);
  const sending = useSending(request, setRequest);
  const acts = useAnswers(request, setRequest);
  const next = request.items.find(isWanted)?.position;
  return (
    <>
      <SheetHeading {...clientHeading(request)} />
      <div className="client-columns">
        <section className="working">
          {request.note && <p className="mb-4 whitespace-pre-line">{request.note}</p>}
          {request.items.map((item) => (
            <ClientItem
              key={item.position}
              request={request}
              item={item}
              isNext={item.position === next}
              sending={sending}
              acts={acts}
            />
          ))}
        </section>
        <Aside request={request} />
      </div>
    </>
  );
}
