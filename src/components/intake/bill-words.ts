import { billsDemand, daysBetween, periodFlaws, type BillView } from '../../schemas/bill';
import { capital, formatBillName, formatCount, formatMoney, formatPeriod, formatSpelled } from '../ui/format';
import { billedMinor, lessTotal, oddSumsInWords, type LedgerBill } from './bill-ledger';

/** Gaps between bills and overlaps, as words for a heading. */
function daysInWords(bills: LedgerBill[]): string {
  const flaws = periodFlaws(bills);
  const days = bills.reduce((sum, bill) => sum + daysBetween(bill.from, bill.to), 0);
  const missing = flaws.filter((flaw) => flaw.kind === 'gap').reduce((sum, flaw) => sum + flaw.days, 0);
  const twice = flaws.filter((flaw) => flaw.kind === 'overlap').reduce((sum, flaw) => sum + flaw.days, 0);
  const faults = [
    missing > 0 && `${formatCount(missing, 'day')} in between without a bill`,
    twice > 0 && `${formatCount(twice, 'day')} billed twice`,
  ].filter(Boolean);
  return `${formatCount(days, 'day')} ${faults.length === 0 ? 'without a gap' : `with ${faults.join(' and ')}`}`;
}

/** How joined invoices stand to one another, and what follows. */
export function joinedWords(bill: BillView): string {
  const demanded = (bill.parts ?? []).flatMap((part, index) => (billsDemand(part) ? [index] : []));
  const last = (bill.parts?.length ?? 0) - 1;
  const where = demanded[0] === 0 ? 'the first' : demanded[0] === last ? 'the last' : 'one of them';
  const demand = demanded.length === 1 ? ` demand is billed once, on ${where}.` : '';
  return `Days meet without gap or overlap${demand ? `;${demand}` : '.'} A ratchet counts this as one bill.`;
}

/** `January came as two invoices and is priced as one bill.` for every joined bill. */
export function joinedLead(bills: BillView[]): string {
  return bills
    .flatMap((bill) =>
      bill.parts
        ? `${formatBillName(bill)} came as ${formatSpelled(bill.parts.length)} invoices and is priced as one bill.`
        : [],
    )
    .join(' ');
}

/** The finding of the station Bills in one sentence. */
export function billsHeading(
  bills: LedgerBill[],
  currency: string,
  year: { from: string; to: string },
): { title: string; lead: string } {
  const period = formatPeriod(year.from, year.to, { year: true });
  if (bills.length === 0) {
    return {
      title: 'No bill of this year is kept yet.',
      lead: `The audit needs every bill of ${period}. Bring in the client’s table of bills, or type them from paper.`,
    };
  }
  const billed = bills.reduce((sum, bill) => sum + billedMinor(bill), 0);
  const amount = `${formatMoney(billed, currency)} for ${daysInWords(bills)}`;
  const odd = oddSumsInWords(bills, currency);
  const summed = bills.some((bill) => lessTotal(bill) !== null);
  const lead = coverage(bills, year);
  const kept = bills.length === 1 ? 'One bill is kept' : `${capital(formatSpelled(bills.length))} bills are kept`;
  if (odd) return { title: `${kept}, ${amount}; ${odd}.`, lead };
  if (!summed) return { title: `${kept}, ${amount}.`, lead };
  const all =
    bills.length === 1 ? 'The one bill kept adds' : `All ${formatSpelled(bills.length)} bills are kept and add`;
  return { title: `${all} up to the cent: ${amount}.`, lead };
}

/** How the bills stand to the year's own ends. */
export function coverage(bills: LedgerBill[], year: { from: string; to: string }): string {
  const period = formatPeriod(year.from, year.to, { year: true });
  const inside = periodFlaws(bills).length;
  const ends = periodFlaws(bills, year).filter((flaw) => flaw.kind === 'gap');
  const first = ends.find((flaw) => flaw.from === year.from);
  const last = ends.find((flaw) => flaw.to === year.to && flaw.from !== year.from);
  const open = [
    first && `the first ${formatCount(first.days, 'day')}`,
    last && `the last ${formatCount(last.days, 'day')}`,
  ].filter(Boolean);
  if (open.length > 0)
    return `The year is ${period}; ${open.join(' and ')} of it ${open.length === 1 && (first ?? last)?.days === 1 ? 'has' : 'have'} no bill yet.`;
  return inside === 0 ? `They cover the year, ${period}, day by day.` : `The year is ${period}.`;
}

/** The finding of a table of bills on its way in. */
export function readBillsHeading(bills: LedgerBill[], currency: string): string {
  const billed = bills.reduce((sum, bill) => sum + billedMinor(bill), 0);
  const count = capital(bills.length === 1 ? 'one bill' : `${formatSpelled(bills.length)} bills`);
  const odd = oddSumsInWords(bills, currency);
  return `${count}, ${formatMoney(billed, currency)} for ${daysInWords(bills)}${odd ? `; ${odd}` : ''}.`;
}
