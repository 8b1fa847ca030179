import { daysBetween, mostJoinedDays, periodFlaws } from '../../schemas/bill';
import { freshen } from '../db/fresh';
import { conflict } from '../errors';
import { Bill } from '../models/Bill';
import { daysInWords } from './intake-words';

/** A bill's period, half-open. */
export const periodOf = (bill: Bill) => ({ from: bill.periodFrom, to: bill.periodTo });

/** All invoices of the joined bill that a row belongs to, in order; none where it is a bill of its own. */
async function invoicesWith({ joinedToId }: Bill): Promise<Bill[]> {
  return typeof joinedToId !== 'number' ? [] : Bill.findAll({ where: { joinedToId }, order: ['periodFrom', 'id'] });
}

/** Sets the invoices of a joined bill free, each a bill of its own again. Call inside inTx. */
export async function releaseInvoices(bill: Bill): Promise<Bill[]> {
  const invoices = await invoicesWith(bill);
  for (const invoice of invoices) await invoice.update({ joinedToId: null, joinNote: null });
  if (invoices.length > 0) await freshen(bill);
  return invoices;
}

/**
 * An invoice that is joined with others keeps meeting them.
 *
 * @throws {ServiceError} 409 where its new period would leave a gap
 */
export async function assertStillMeets(bill: Bill, period: { from: string; to: string }): Promise<void> {
  const others = (await invoicesWith(bill)).filter((invoice) => invoice.id !== bill.id);
  if (others.length === 0) return;
  const periods = [...others.map(periodOf), { from: period.from, to: period.to }];
  const days = periods.reduce((sum, one) => sum + daysBetween(one.from, one.to), 0);
  if (periodFlaws(periods).length === 0 && days <= mostJoinedDays) return;
  throw conflict(
    `This invoice is joined with that of ${others.map((other) => daysInWords(periodOf(other))).join(' and ')} to one bill, and with other days it would no longer join on. Take the bill apart first, then change the period.`,
  );
}
