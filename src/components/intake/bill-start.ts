import { periodFlaws, type BillView } from '../../schemas/bill';
import { formatAmount, formatNumber } from '../ui/format';
import { withPlaces } from './pages/typed-places';
import { dayBefore, emptyLine, type TypedBill } from './typed';

const usualQuantities = ['kwh', 'maxKw', 'kvarh', 'powerFactor'];
const usualLines = ['Service', 'Energy', 'Demand', 'Reactive', 'Tax'];

const noMinusSign = (text: string) => text.replace('\u2212', '-');

const plain = (value: number | null | undefined) =>
  typeof value === 'number' ? noMinusSign(formatNumber(value, { upTo: 8 })) : '';

/** A kept bill as it would be typed. */
export function keptAsTyped(bill: BillView, currency: string): TypedBill {
  const amount = (minor: number) => noMinusSign(formatAmount(minor, currency));
  const typed: TypedBill = {
    invoice: bill.invoice ?? '',
    from: bill.from,
    lastDay: dayBefore(bill.to),
    readOn: bill.readOn ?? '',
    estimated: bill.estimated ?? false,
    quantities: Object.entries(bill.quantities).map(([name, value]) => ({
      name,
      figure: formatNumber(value, { upTo: 6 }),
    })),
    lines: bill.lines.map((line) => ({
      label: line.label,
      amount: amount(line.amountMinor),
      quantity: plain(line.quantity),
      unit: line.unit ?? '',
      rate: plain(line.rate),
    })),
    total: bill.totalMinor === null ? '' : amount(bill.totalMinor),
  };
  return withPlaces(typed, bill.places ?? {});
}

/** The last day of a period of about a month that begins on a day. */
function monthLater(from: string): string {
  const next = new Date(`${from}T00:00:00Z`);
  const day = next.getUTCDate();
  next.setUTCMonth(next.getUTCMonth() + 1, 1);
  const lastOfMonth = new Date(Date.UTC(next.getUTCFullYear(), next.getUTCMonth() + 1, 0)).getUTCDate();
  next.setUTCDate(Math.min(day, lastOfMonth));
  return dayBefore(next.toISOString().slice(0, 10));
}

/** A new bill: the first gap between bills or the period after the last one, with the last one's quantities and lines. */
export function startOfTyped(bills: BillView[], yearFrom: string): TypedBill {
  const last = bills.at(-1);
  const gap = periodFlaws(bills).find((flaw) => flaw.kind === 'gap');
  const from = gap?.from ?? last?.to ?? yearFrom;
  const month = monthLater(from);
  const quantities = last && Object.keys(last.quantities).length > 0 ? Object.keys(last.quantities) : usualQuantities;
  const lines =
    last && last.lines.length > 0
      ? last.lines.map((line) => emptyLine(line.label, line.unit ?? ''))
      : usualLines.map((label) => emptyLine(label));
  return {
    invoice: '',
    from,
    lastDay: gap && gap.to <= month ? dayBefore(gap.to) : month,
    readOn: '',
    estimated: false,
    quantities: quantities.map((name) => ({ name, figure: '' })),
    lines,
    total: '',
  };
}
