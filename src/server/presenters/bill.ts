import type { Attachment } from '../models/Attachment';
import type { Bill } from '../models/Bill';
import type { BillLine } from '../models/BillLine';
import type { Intake } from '../models/Intake';
import { daysBetween, type BillView } from '../../schemas/bill';
import { presentBillPages } from './attachment';

/** A bill with its lines in printed order, their sum and how far it is from the printed total. */
export function presentBill(bill: Bill, lines: BillLine[], intake: Intake | undefined, pages: Attachment[]): BillView {
  const { id, version, periodFrom: from, periodTo: to, quantities, currency, totalMinor, sourceRow } = bill;
  const linesMinor = lines.reduce((sum, line) => sum + line.amountMinor, 0);
  return {
    id,
    version,
    from,
    to,
    days: daysBetween(from, to),
    invoice: bill.invoice ?? null,
    readOn: bill.readOn ?? null,
    estimated: bill.estimated,
    quantities,
    currency,
    lines: lines.map((line) => ({
      id: line.id,
      label: line.label,
      amountMinor: line.amountMinor,
      quantity: line.quantity ?? null,
      unit: line.unit ?? null,
      rate: line.rate ?? null,
    })),
    linesMinor,
    totalMinor,
    differenceMinor: totalMinor === null || lines.length === 0 ? null : linesMinor - totalMinor,
    source: intake ? { intakeId: intake.id, fileName: intake.fileName, row: sourceRow } : null,
    pages: pages.map(presentBillPages),
    places: bill.places ?? {},
  };
}
