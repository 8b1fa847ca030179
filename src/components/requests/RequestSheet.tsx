import type { StaffRequestView } from '../../schemas/request';
import { ColumnNames, SheetHeading, SheetPart } from '../intake/Sheet';
import { Notice } from '../ui/Notice';
import { ItemPart } from './ItemPart';
import { RequestResult } from './RequestResult';
import { staffHeading } from './request-words';
import { useRequest } from './use-request';

export interface RequestSheetProps {
  request: StaffRequestView;
  timeZone: string;
}

/** Island: a request as the practice works on it: what came, what is taken in, what goes back. */
export function RequestSheet({ request: start, timeZone }: RequestSheetProps) {
  const opened = useRequest(start);
  const { request, fault } = opened;
  const hasFields = Object.keys(fault?.fields ?? {}).length > 0;
  return (
    <>
      <SheetHeading {...staffHeading(request)} />
      <ColumnNames />
      <SheetPart
        id="things"
        number="1"
        title="What was asked, and what came"
        reference={
          <>
            <p>Files lie as they came; nobody has opened them. Reading begins with intake</p>
            {request.note && <p className="whitespace-pre-line">In the mail: {request.note}</p>}
            <p>
              <a className="text-link" href={`/engagements/${request.code}/requests`}>
                All requests
              </a>
            </p>
          </>
        }
        result={<RequestResult opened={opened} timeZone={timeZone} />}
      >
        {fault && !hasFields && <Notice kind="fault" title={fault.message} />}
        {request.items.map((item) => (
          <ItemPart key={item.position} opened={opened} item={item} timeZone={timeZone} />
        ))}
      </SheetPart>
    </>
  );
}
