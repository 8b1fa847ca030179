import { daysBetween, mostJoinedDays, periodFlaws, type BillJoin, type BillView } from '../../schemas/bill';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, notFound, staleVersion } from '../errors';
import { Bill } from '../models/Bill';
import type { Actor } from '../policies/actor';
import { listBills, presentBills } from './bills';
import { openForChange } from './intake-guard';
import { daysInWords } from './intake-words';
import { periodOf, releaseInvoices } from './joined-invoices';

/** @throws {ServiceError} 404 where one of them is none of this engagement */
async function openInvoices(engagementId: number, ids: number[]): Promise<Bill[]> {
  const invoices = await Bill.findAll({ where: { engagementId, id: ids }, order: ['periodFrom', 'id'] });
  if (invoices.length !== ids.length) throw notFound();
  return invoices;
}

async function joinedView(bill: Bill): Promise<BillView> {
  const view = (await listBills(bill.engagementId)).find(({ parts }) => parts?.some(({ id }) => id === bill.id));
  if (!view) throw notFound();
  return view;
}

/**
 * Joins invoices of which the utility made one bill; everything that reads bills sees one.
 *
 * @throws {ServiceError} 404 for those who do not work on the engagement, 409 where they changed, are joined already or do not meet
 */
export async function joinBills(actor: Actor, code: string, { bills, note }: BillJoin): Promise<BillView> {
  const { engagement } = await openForChange(actor, code);
  const ids = bills.map(({ id }) => id);
  const head = await inTx(async () => {
    const invoices = await openInvoices(engagement.id, ids);
    for (const invoice of invoices) {
      const seen = bills.find(({ id }) => id === invoice.id)!;
      if (invoice.version !== seen.version) {
        throw staleVersion(
          `The bill of ${daysInWords(periodOf(invoice))}`,
          seen,
          (await presentBills([invoice]))[0] ?? null,
        );
      }
      refuseJoined(invoice);
    }
    refuseUnlike(invoices);
    const [first, ...others] = invoices as [Bill, ...Bill[]];
    await first.update({ joinedToId: first.id, joinNote: note === '' ? null : note });
    for (const other of others) await other.update({ joinedToId: first.id });
    return first;
  });
  return joinedView(head);
}

function refuseJoined(invoice: Bill): void {
  if (invoice.joinedToId === null) return;
  throw conflict(
    `The invoice of ${daysInWords(periodOf(invoice))} belongs to a joined bill already. Take that one apart first.`,
  );
}

/** @throws {ServiceError} 409 where invoices cannot be one bill */
function refuseUnlike(invoices: Bill[]): void {
  const [flaw] = periodFlaws(invoices.map(periodOf));
  if (flaw) {
    const what = flaw.kind === 'gap' ? 'no invoice covers' : 'two invoices cover';
    throw conflict(
      `Invoices of one bill join on day by day; here ${what} ${daysInWords(flaw)}. Correct a period first.`,
    );
  }
  const days = invoices.reduce((sum, bill) => sum + daysBetween(bill.periodFrom, bill.periodTo), 0);
  if (days > mostJoinedDays) {
    throw conflict(
      `Together they cover ${days} days. Invoices of one bill cover a month, at most ${mostJoinedDays} days: leave them as bills of their own.`,
    );
  }
  const foreign = invoices.find((bill) => bill.currency !== invoices[0]?.currency);
  if (foreign) throw conflict(`The invoice of ${daysInWords(periodOf(foreign))} is in another currency.`);
}

/**
 * Takes a joined bill apart again.
 *
 * @returns The invoices, each a bill of its own
 * @throws {ServiceError} 404 for those who do not work on the engagement, 409 where the bill is not joined or changed
 */
export async function takeBillApart(
  actor: Actor,
  code: string,
  id: number,
  seen: { version: number },
): Promise<BillView[]> {
  const { engagement } = await openForChange(actor, code);
  const [bill] = await openInvoices(engagement.id, Number.isSafeInteger(id) ? [id] : [0]);
  const invoices = await inTx(async () => {
    await freshen(bill!);
    if (bill!.version !== seen.version) throw staleVersion('This bill', seen, await joinedView(bill!));
    return releaseInvoices(bill!);
  });
  if (invoices.length === 0) throw conflict('This bill is one invoice; there is nothing to take apart.');
  return presentBills(invoices);
}
