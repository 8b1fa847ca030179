import type { BillsEstimate } from '../../core/plan';
import type { BillsOnlyView, EstimatedPlanView } from '../../schemas/plan-from-bills';
import { estimateInPool } from '../workers/pool';
import type { EstimateResult, EstimateTask, Refused } from '../workers/tasks';
import type { OpenEngagement } from './engagements';
import { actOf } from './plan-acts';
import { planMotors, taskMotors } from './plan-basis';
import { listPlans } from './plan-rows';
import { spanYearOf } from './plan-year';
import { knownTo } from './price-basis';
import { pricingBasis } from './pricing';
import { supplyForTask, supplyOf } from './supplies';

/** How far fields are raised towards their limits where no plan says it. */
const shares = [
  { share: 0.25, name: 'Fields raised a quarter of the way' },
  { share: 0.5, name: 'Fields raised half of the way' },
  { share: 0.75, name: 'Fields raised three quarters of the way' },
  { share: 1, name: 'Fields raised to their limits' },
];

/**
 * The plans of a year whose bills are kept without readings, estimated from what the bills print: stored plans, and all fields raised
 * towards their limits.
 *
 * @returns null where readings are kept: then plans are priced from them
 * @throws {ServiceError} 409 naming the station to visit, where bills or tariff are missing
 */
export async function plansFromBills(opened: OpenEngagement): Promise<BillsOnlyView | null> {
  const [pricing, motors, rows] = await Promise.all([
    pricingBasis(opened),
    planMotors(opened.engagement.id),
    listPlans(opened.engagement.id),
  ]);
  if (pricing.load || motors.length === 0) return null;
  const { schedule, scheduleText, periods, contract, history, given, bills } = pricing;
  const supply = await supplyOf(opened);
  const task: EstimateTask = {
    kind: 'estimate',
    basis: {
      scheduleText,
      timeZone: schedule.timeZone,
      periods,
      contract,
      history,
      given,
      ...supplyForTask(supply),
      motors: taskMotors(opened, motors),
    },
    rows: bills.map((bill) => ({ from: bill.from, to: bill.to, quantities: knownTo(schedule, bill) })),
    acts: rows.map((row) => actOf(row, opened, spanYearOf({ pricing }))),
    shares: shares.map(({ share }) => share),
  };
  const ofMotors = motors.map(({ row, source }) => [row.id, row.version, row.updatedAt.getTime(), source.key]);
  const result = await estimated(task, JSON.stringify([pricing.dataKey, ofMotors, supply, task.acts]));
  if ('refused' in result) return result;
  const standing = result.acts[0]?.standing ?? result.raised[0]?.estimate.standing;
  if (standing === undefined) return { refused: 'Every motor stands at its limits already, and no plan is kept.' };
  const named = new Map(motors.map(({ row }) => [row.id, row]));
  return {
    currency: schedule.currency,
    scheduleTitle: schedule.title,
    from: periods[0]!.from,
    to: periods.at(-1)!.to,
    standing,
    plans: [
      ...result.acts.map((estimate, index) => presentEstimate(rows[index]!, [], estimate)),
      ...result.raised.map(({ share, fields, estimate }) =>
        presentEstimate(
          { id: null, name: shares.find((one) => one.share === share)!.name },
          fields.map(({ motorId, fieldA }) => {
            const { name, fieldTodayA } = named.get(motorId)!;
            return { name, fieldA, todayA: fieldTodayA };
          }),
          estimate,
        ),
      ),
    ],
  };
}

const cacheSize = 8;
const shared = globalThis as typeof globalThis & {
  counterlagEstimates?: Map<string, Promise<EstimateResult | Refused>>;
};
const cache = (shared.counterlagEstimates ??= new Map());

/** Estimates a task, once as long as bills, tariff, motors, plans and supply stay as they are. */
function estimated(task: EstimateTask, key: string): Promise<EstimateResult | Refused> {
  const result = cache.get(key) ?? estimateInPool(task);
  cache.delete(key);
  cache.set(key, result);
  result.catch(() => cache.delete(key));
  const [oldest] = cache.keys();
  if (cache.size > cacheSize && oldest !== undefined) cache.delete(oldest);
  return result;
}

function presentEstimate(
  { id, name }: { id: number | null; name: string },
  fields: EstimatedPlanView['fields'],
  { total, saving, widths, bills }: BillsEstimate,
): EstimatedPlanView {
  return {
    id,
    name,
    fields,
    total,
    saving,
    widths,
    bills: bills.map(({ period, standing, total: after, saving: saved }) => ({
      from: period.from,
      to: period.to,
      standing,
      total: after,
      saving: saved,
    })),
  };
}
