import { addDays } from '../../core/load';
import type { BilledBill } from '../../schemas/pricing';
import type { Bill } from '../models/Bill';
import type { BillLine } from '../models/BillLine';

const months = 'Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec'.split(' ');

/** Name of a bill by the month its last day lies in: a period to 11 Aug 2025 (exclusive) is "Aug 2025". */
export function billName(periodTo: string): string {
  const last = addDays(periodTo, -1);
  return `${months[Number(last.slice(5, 7)) - 1]} ${last.slice(0, 4)}`;
}

/** A kept bill with its lines as plain JSON. */
export function presentBilledBill(bill: Bill, lines: BillLine[]): BilledBill {
  const { id, periodFrom, periodTo, quantities, currency, totalMinor, sourceRow, intakeId } = bill;
  return {
    id,
    name: billName(periodTo),
    period: { from: periodFrom, to: periodTo },
    quantities,
    currency,
    totalMinor,
    sourceRow,
    intakeId,
    lines: lines.map((line) => ({ id: line.id, label: line.label, amountMinor: line.amountMinor })),
  };
}
