import type { BillRecord, IntakeReport } from '../../core/intake';
import { toMinorUnits } from '../../core/units';
import { billInput, lineLabel, periodFlaws, type BillInput } from '../../schemas/bill';
import type { OverlapChoice } from '../../schemas/intake';
import { inTx } from '../db/tx';
import { conflict, invalid } from '../errors';
import { Bill } from '../models/Bill';
import type { Intake } from '../models/Intake';
import { createBill, destroyBill } from './bills';
import { billsWithin, markKept, type OpenIntake } from './intake-guard';
import { readBillFile, type HowToRead } from './intake-read';
import { daysInWords } from './intake-words';
import { periodOf, releaseInvoices } from './joined-invoices';

/** A bill of a file as it would be kept, and where in the file it stands. */
export interface ComingBill {
  input: BillInput;
  sourceRow: string | null;
}

/**
 * The bills of a file as they would be kept.
 *
 * @throws {ServiceError} 422 where the file's currency is another or two of its bills share a day
 */
export async function comingBills({ intake, opened }: OpenIntake, how: HowToRead): Promise<ComingBill[]> {
  const { bills, report } = await readBillFile(intake, how);
  const { currency } = opened.engagement;
  if (report.currency && report.currency !== currency) {
    throw invalid(
      `${intake.fileName} names amounts in ${report.currency}; the engagement ${opened.engagement.code} is in ${currency}. Bring in the bills in ${currency}.`,
    );
  }
  const rows = bills.map((bill, index) => billValues(bill, currency, rowOf(report, index)));
  const twice = periodFlaws(rows.map((row) => row.input)).find((flaw) => flaw.kind === 'overlap');
  if (twice) {
    throw invalid(
      `Two bills of ${intake.fileName} both cover ${daysInWords(twice)}. Look whether the last day belongs to the period, in the step Match.`,
    );
  }
  return rows;
}

/**
 * Keeps the bills of a file, all or nothing.
 *
 * @param overlap  What is to happen where bills share a day with kept ones; without it that is refused
 * @throws {ServiceError} 409 where bills overlap kept ones and nothing was chosen, or nothing of the file would be kept
 */
export async function keepBills(open: OpenIntake, how: HowToRead, overlap?: OverlapChoice): Promise<void> {
  const { intake, opened } = open;
  const rows = await comingBills(open, how);
  const { currency, id: engagementId } = opened.engagement;
  await inTx(async () => {
    await markKept(intake);
    let count = 0;
    for (const { input, sourceRow } of rows) {
      const older = overlap ? await billsWithin(engagementId, input.from, input.to) : [];
      if (overlap === 'keep-old' && older.length > 0) continue;
      for (const bill of older) await putAway(bill, intake);
      await createBill(input, { engagementId, currency, intakeId: intake.id, sourceRow });
      count += 1;
    }
    if (count > 0) return;
    throw conflict(
      `Every bill of ${intake.fileName} shares days with a kept one, so keeping the old ones leaves nothing of this file. Put the file aside instead.`,
    );
  });
}

/** Takes a bill out of everything without destroying it: undoing the file brings it back. */
async function putAway(bill: Bill, by: Intake): Promise<void> {
  await releaseInvoices(bill);
  await bill.update({ putAwayById: by.id });
}

/**
 * Takes back the bills a file brought, and brings back those it took the place of. Call inside inTx.
 *
 * @throws {ServiceError} 409 where one that would come back shares a day with a bill kept since
 */
export async function takeBillsBack(intake: Intake): Promise<void> {
  const every = Bill.unscoped();
  for (const bill of await every.findAll({ where: { intakeId: intake.id } })) await destroyBill(bill);
  for (const bill of await every.findAll({ where: { putAwayById: intake.id } })) {
    const [since] = await billsWithin(bill.engagementId, bill.periodFrom, bill.periodTo);
    if (since) {
      throw conflict(
        `Undoing ${intake.fileName} would bring back the bill of ${daysInWords(periodOf(bill))}, and that of ${daysInWords(periodOf(since))} has been kept for some of these days since. Undo or remove that one first.`,
      );
    }
    await bill.update({ putAwayById: null });
  }
}

const rowOf = (report: IntakeReport, index: number) => {
  const row = report.billRows?.[index];
  return row === undefined ? null : `row ${row}`;
};

function billValues(bill: BillRecord, currency: string, sourceRow: string | null): ComingBill {
  const parsed = billInput.safeParse({
    ...bill.period,
    invoice: bill.invoice,
    estimated: bill.isEstimated ?? false,
    quantities: bill.quantities,
    lines: bill.charges.map(({ label, amount, quantity, unit, rate }) => ({
      label: lineLabel(label, currency),
      amountMinor: toMinorUnits(amount, currency),
      quantity,
      unit,
      rate,
    })),
    totalMinor: bill.total === null ? null : toMinorUnits(bill.total, currency),
  });
  if (parsed.success) return { input: parsed.data, sourceRow };
  const issue = parsed.error.issues[0];
  throw invalid(`The bill of ${daysInWords(bill.period)}, ${sourceRow ?? 'row unknown'}: ${issue?.message ?? ''}`, {
    [issue?.path.join('.') ?? 'form']: [issue?.message ?? 'This bill cannot be kept.'],
  });
}
