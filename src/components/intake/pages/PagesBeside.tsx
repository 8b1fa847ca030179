import { useEffect, useState } from 'react';
import { useFormContext, useWatch } from 'react-hook-form';
import { movePages } from '../../../client/attachments';
import type { AttachedFile, AttachmentView } from '../../../schemas/attachment';
import type { BillView } from '../../../schemas/bill';
import { formatBillName, formatList } from '../../ui/format';
import { Notice } from '../../ui/Notice';
import { useBillFieldTarget } from '../bill-field-target';
import { labelOf } from '../use-bill-field-target';
import type { TypedBill } from '../typed';
import { AttachPages } from './AttachPages';
import { pageChannel } from './channel';
import type { Offer } from './offer';
import { PagesDrawer, PageTabs } from './PageTabs';
import { PagesList } from './PagesList';
import { PageViewer } from './PageViewer';
import { PlaceWire } from './PlaceWire';
import { isTrue, placeAt, placedFields } from './typed-places';
import { useAttachments } from './use-attachments';

export interface PagesBesideProps {
  code: string;
  timeZone: string;
  /** The bill in the form; null for a new one, which takes its pages when it is kept. */
  bill: BillView | null;
  bills: BillView[];
}

/** Pages of the bill beside its form: shown, their numbers taken into fields, the field and its place marked alike. */
export function PagesBeside({ code, timeZone, bill, bills }: PagesBesideProps) {
  const attachments = useAttachments(code);
  const form = useFormContext<TypedBill>();
  const target = useBillFieldTarget();
  const typed = useWatch({ control: form.control }) as TypedBill;
  const [chosenId, setChosenId] = useState<number | null>(null);
  const [word, setWord] = useState('');

  const going = typed.attachmentIds ?? [];
  const own = attachments.all.filter((one) => (bill && one.billId === bill.id) || going.includes(one.id));
  const waiting = attachments.all.filter((one) => one.billId === null && !going.includes(one.id));
  const field = target?.focused ?? null;
  const found = field && placeAt(typed, field.path);
  const marked = field && found && isTrue(typed, { path: field.path, place: found }) ? found : null;
  const markedId = marked?.attachmentId;
  useEffect(() => {
    if (markedId !== undefined) setChosenId(markedId);
  }, [markedId, field?.path]);
  const shown = attachments.all.find(({ id }) => id === chosenId) ?? own[0] ?? null;

  const goWith = (ids: number[]) => form.setValue('attachmentIds', ids, { shouldDirty: true });
  const use = async (one: AttachmentView) => {
    setChosenId(one.id);
    if (bill) await attachments.change(movePages(one, bill.id));
    else goWith([...going, one.id]);
  };
  const letWait = async (one: AttachmentView) => {
    if (one.billId === null) goWith(going.filter((id) => id !== one.id));
    else await attachments.change(movePages(one, null));
  };
  const handleAttached = ({ attachment, known, alsoOf }: AttachedFile) => {
    attachments.put(attachment);
    setChosenId(attachment.id);
    if (!bill && !going.includes(attachment.id)) goWith([...going, attachment.id]);
    const names = bills.filter(({ id }) => alsoOf.includes(id)).map(formatBillName);
    const also = names.length > 0 ? `The same file is attached to ${formatList(names)} too.` : '';
    setWord(known ? `${attachment.fileName} was here already: it is not attached twice. ${also}` : also);
  };
  useOffersOfWindow(code, target?.fill);
  useKeysToNumbers(shown?.id);

  const used = placedFields(typed)
    .filter((one) => isTrue(typed, one))
    .map(({ path, place }) => ({ path, place, label: nameOf(path) }))
    .filter(({ place }) => place.attachmentId === shown?.id);
  return (
    <div className="pages">
      <PageTabs files={[...own, ...waiting]} shownId={shown?.id ?? null} onShow={setChosenId} />
      {shown && target && (
        <PageViewer
          key={shown.id}
          code={code}
          attachment={shown}
          used={used}
          marked={marked}
          into={field?.label ?? null}
          onOffer={(offer) => {
            // Whoever takes a number from waiting pages takes the pages for this bill.
            if (waiting.includes(shown)) void use(shown);
            target.fill(offer);
          }}
          onLeave={target.back}
          onLook={markRows}
        />
      )}
      {target && (
        <p className="page-said" role="status">
          {target.said}
        </p>
      )}
      {attachments.loaded && (
        <PagesDrawer own={own.length} waiting={waiting.length}>
          <AttachPages code={code} billId={bill?.id ?? null} first={own.length === 0} onAttached={handleAttached} />
          <PagesList
            attachments={attachments}
            own={own}
            waiting={waiting}
            others={bills.filter(({ id }) => id !== bill?.id)}
            timeZone={timeZone}
            onUse={(one) => void use(one)}
            onLetWait={(one) => void letWait(one)}
          />
        </PagesDrawer>
      )}
      {word !== '' && <Notice title={word} />}
      {attachments.fault && <Notice kind="fault" title={attachments.fault} />}
      <PlaceWire path={marked ? (field?.path ?? null) : null} shown={shown?.id} />
    </div>
  );
}

/** What the form calls a field, by its path. */
function nameOf(path: string): string {
  const field = document.getElementsByName(path)[0];
  return field instanceof HTMLInputElement ? labelOf(field) : path;
}

/** Marks the rows of the form a figure of the page went into. */
function markRows(paths: string[]): void {
  document.querySelectorAll('.form-row[data-marked]').forEach((row) => row.removeAttribute('data-marked'));
  for (const path of paths) document.getElementsByName(path)[0]?.closest('.form-row')?.setAttribute('data-marked', '');
}

/** Takes numbers that are clicked in the window the pages were opened in. */
function useOffersOfWindow(code: string, fill: ((offer: Offer) => void) | undefined): void {
  useEffect(() => {
    if (!fill) return;
    const channel = pageChannel(code);
    channel.onmessage = (event: MessageEvent<Offer>) => fill(event.data);
    return () => channel.close();
  }, [code, fill]);
}

/** F2 in the form leads to the numbers of the page. */
function useKeysToNumbers(shownId: number | undefined): void {
  useEffect(() => {
    if (shownId === undefined) return;
    const lead = (event: KeyboardEvent) => {
      if (event.key !== 'F2' || !(event.target as Element | null)?.closest?.('.bill-form')) return;
      event.preventDefault();
      document.querySelector<HTMLElement>('.page-figures')?.focus();
    };
    document.addEventListener('keydown', lead);
    return () => document.removeEventListener('keydown', lead);
  }, [shownId]);
}
