import type { BillRecord, IntakeReport } from '../../core/intake';
import { toMinorUnits } from '../../core/units';
import { billInput, lineLabel, periodFlaws } from '../../schemas/bill';
import { inTx } from '../db/tx';
import { invalid } from '../errors';
import { createBill } from './bills';
import { markKept, type OpenIntake } from './intake-guard';
import { readBillFile, type HowToRead } from './intake-read';
import { daysInWords } from './intake-words';

/** Keeps the bills of a file, all or nothing. */
export async function keepBills({ intake, opened }: OpenIntake, how: HowToRead): Promise<void> {
  const { bills, report } = await readBillFile(intake, how);
  const { currency, id: engagementId } = opened.engagement;
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
  await inTx(async () => {
    await markKept(intake);
    for (const { input, sourceRow } of rows) {
      await createBill(input, { engagementId, currency, intakeId: intake.id, sourceRow });
    }
  });
}

const rowOf = (report: IntakeReport, index: number) => {
  const row = report.billRows?.[index];
  return row === undefined ? null : `row ${row}`;
};

function billValues(bill: BillRecord, currency: string, sourceRow: string | null) {
  const parsed = billInput.safeParse({
    ...bill.period,
    quantities: bill.quantities,
    lines: bill.charges.map(({ label, amount }) => ({
      label: lineLabel(label, currency),
      amountMinor: toMinorUnits(amount, currency),
    })),
    totalMinor: bill.total === null ? null : toMinorUnits(bill.total, currency),
  });
  if (parsed.success) return { input: parsed.data, sourceRow };
  const issue = parsed.error.issues[0];
  throw invalid(`The bill of ${daysInWords(bill.period)}, ${sourceRow ?? 'row unknown'}: ${issue?.message ?? ''}`, {
    [issue?.path.join('.') ?? 'form']: [issue?.message ?? 'This bill cannot be kept.'],
  });
}
