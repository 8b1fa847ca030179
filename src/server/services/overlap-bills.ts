import { toMinorUnits } from '../../core/units';
import type { BillsOverlap } from '../../schemas/intake';
import { billsWithin, type OpenIntake } from './intake-guard';
import { readBillFile, type HowToRead } from './intake-read';

/** The kept bills that share days with those of a file. */
export async function billsOverlap({ intake, opened }: OpenIntake, how: HowToRead): Promise<BillsOverlap> {
  const { id, currency } = opened.engagement;
  const { bills } = await readBillFile(intake, how);
  const beside = await Promise.all(
    bills.map(async ({ period: { from, to }, total }) => ({
      comes: { from, to, totalMinor: total === null ? null : toMinorUnits(total, currency) },
      kept: (await billsWithin(id, from, to)).map((bill) => ({
        id: bill.id,
        from: bill.periodFrom,
        to: bill.periodTo,
        totalMinor: bill.totalMinor,
      })),
    })),
  );
  const shared = beside.filter(({ kept }) => kept.length > 0);
  return { kind: 'bills', asks: shared.length > 0, bills: shared };
}
