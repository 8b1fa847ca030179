import { afterAll, describe, expect, it } from 'vitest';
import { estimateVerdict, estimatedBillsTable, estimatesTable } from '@/components/plans/bills-only';
import type { BillsOnlyView } from '@/schemas/plan-from-bills';
import { openEngagement, type OpenEngagement } from '@/server/services/engagements';
import { createMotor } from '@/server/services/motors';
import { plansFromBills } from '@/server/services/plan-from-bills';
import { missingForPlans } from '@/server/services/plans';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildEngagement } from '../setup/build';
import { millMotor, motorOf } from '../setup/motors';
import { buildPlansStation, chooseSchedule } from '../setup/plans';
import { keepBills, twelveMonths } from '../setup/tariff';

afterAll(closePool);

// On this schedule a kilowatt and a kvarh have a price; the bills print what it measures.
const printed = { kwh: 1_500_000, kvarh: 1_300_000, maxKw: 3000, kvarThen: 2600 };

async function buildBillsOnly(quantities: Record<string, number> = printed): Promise<OpenEngagement> {
  const actor = await buildActor();
  const engagement = await buildEngagement({ memberIds: [actor.id] });
  await keepBills(
    engagement,
    twelveMonths(2025, 11).map((month) => ({ ...month, lines: [], totalMinor: null, quantities })),
  );
  await chooseSchedule(engagement.id);
  const opened = await openEngagement(actor, engagement.code);
  await createMotor(opened, motorOf(millMotor));
  return opened;
}

type Estimated = Exclude<BillsOnlyView, { refused: string }>;

async function estimateOf(opened: OpenEngagement): Promise<Estimated> {
  const view = await plansFromBills(opened);
  if (!view || view.refused !== undefined) throw new Error(view?.refused ?? 'nothing was estimated');
  return view;
}

describe('plans of a year with bills and no readings', () => {
  it('are nothing where readings are kept, and the plans are priced from them', async () => {
    const { opened } = await buildPlansStation();
    expect(await plansFromBills(opened)).toBeNull();
  });

  it('say what the bills do not print, instead of estimating', async () => {
    const opened = await buildBillsOnly({ kwh: 1_500_000 });
    expect(await plansFromBills(opened)).toMatchObject({ refused: expect.stringMatching(/does not give/) as string });
  });

  it('show fields raised towards their limits, each saving between its ends', async () => {
    const opened = await buildBillsOnly();
    expect(await missingForPlans(opened)).toMatchObject({ station: 'intervals' });
    const year = await estimateOf(opened);
    expect(year.plans.map(({ name }) => name)).toEqual([
      'Fields raised a quarter of the way',
      'Fields raised half of the way',
      'Fields raised three quarters of the way',
      'Fields raised to their limits',
    ]);
    for (const plan of year.plans) {
      expect(plan.saving.low).toBeLessThanOrEqual(plan.saving.best);
      expect(plan.saving.best).toBeLessThanOrEqual(plan.saving.high);
      expect(plan.bills).toHaveLength(12);
      expect(plan.fields[0]).toMatchObject({ name: 'M-1' });
      expect(plan.fields[0]!.fieldA).toBeGreaterThan(plan.fields[0]!.todayA);
      const sum = plan.bills.reduce((total, bill) => total + bill.saving.best, 0);
      expect(plan.saving.best).toBeCloseTo(sum, 6);
    }
    expect(year.plans[3]!.saving.best).toBeGreaterThan(year.plans[0]!.saving.best);
  });

  it('have words that mark them as estimated, and tables that add up', async () => {
    const year = await estimateOf(await buildBillsOnly());
    const { title, lead } = estimateVerdict(year);
    expect(title).toMatch(
      /^Fields raised to their limits: likely [\d,]+\sUSD saved a year, at worst [\d,]+\sUSD lost, at most/,
    );
    expect(lead).toMatch(/^Estimated from bills alone/);
    expect(estimatesTable(year).rows).toHaveLength(4);
    const table = estimatedBillsTable(year, year.plans[3]!);
    expect(table.rows).toHaveLength(13);
    expect(table.rows.at(-1)!.cells['bill']).toBe('All bills');
  });
});
