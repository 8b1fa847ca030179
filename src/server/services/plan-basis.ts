import { createHash } from 'node:crypto';
import type { CompletedMotor, SynchronousMotor } from '../../core/machine';
import type { SupplyView } from '../../schemas/supply';
import { conflict } from '../errors';
import type { Motor } from '../models/Motor';
import { calculateYear } from '../workers/pool';
import { actKey } from './plan-acts';
import type { TaskAct, TaskBasis, TaskMotor, TaskSetting } from '../workers/tasks';
import type { OpenEngagement } from './engagements';
import { loadSourcesOf, type StoredSource } from './load-sources';
import { completedOf, listMotors } from './motors';
import { pricingInputs, type PricingInputs } from './pricing';
import { remembered, type Memory } from './remembered';
import { supplyForTask, supplyOf } from './supplies';

/** A motor's row with the machine its plate makes. */
export interface PlanMotor {
  row: Motor;
  machine: SynchronousMotor;
  completed: CompletedMotor;
  /** What tells its shaft load. */
  source: StoredSource;
}

/** Everything a plan of an engagement is priced from. */
export interface PlanBasis {
  pricing: PricingInputs;
  motors: PlanMotor[];
  task: TaskBasis;
  supply: SupplyView;
  /** Changes whenever readings, bills, tariff, supply or a motor change. */
  fingerprint: string;
}

/** Motors of an engagement with their machines, and what tells their loads. */
export async function planMotors(engagementId: number): Promise<PlanMotor[]> {
  const rows = await listMotors(engagementId);
  const sources = await loadSourcesOf(rows);
  return rows.map((row, index) => {
    const completed = completedOf(row);
    return { row, machine: completed.motor, completed, source: sources[index]! };
  });
}

/** The motors as the calculations see them. */
export const taskMotors = ({ meters }: OpenEngagement, motors: PlanMotor[]): TaskMotor[] =>
  motors.map(({ row, machine, completed, source }) => ({
    id: row.id,
    name: row.name,
    machine,
    calendar: source.calendar,
    metered: source.metered,
    fieldTodayA: row.fieldTodayA,
    leastFieldA: completed.leastFieldA,
    voltageBandPu: completed.voltageBandPu,
    behind: Math.max(
      0,
      meters.findIndex(({ id }) => id === row.meterId),
    ),
  }));

/**
 * What the plans of an engagement are priced from.
 *
 * @throws {ServiceError} 409 naming the station to visit, where readings, bills, tariff or motors are missing
 */
export async function planBasis(opened: OpenEngagement): Promise<PlanBasis> {
  const motors = await planMotors(opened.engagement.id);
  if (motors.length === 0) {
    throw conflict('No motor is entered yet. Enter one at the station Motors.', { station: 'motors' });
  }
  const [pricing, supply] = await Promise.all([pricingInputs(opened), supplyOf(opened)]);
  const { scheduleText, periods, contract, history, given, load, meters, schedule } = pricing;
  const task: TaskBasis = {
    scheduleText,
    timeZone: schedule.timeZone,
    periods,
    contract,
    history,
    given,
    load,
    meters,
    ...supplyForTask(supply),
    motors: taskMotors(opened, motors),
  };
  const ofMotors = motors.map(({ row, source }) => [row.id, row.version, row.updatedAt.getTime(), source.key]);
  const fingerprint = createHash('sha256')
    .update(JSON.stringify([pricing.dataKey, ofMotors, supply]))
    .digest('hex');
  return { pricing, motors, supply, task, fingerprint };
}

const shared = globalThis as typeof globalThis & { counterlagSettings?: Memory<TaskSetting> };

/** Prices settings over the year; each is worked out once as long as nothing it hangs on changes. */
export function priceSettings(basis: PlanBasis, settings: TaskAct[]): Promise<TaskSetting[]> {
  const kept = { memory: (shared.counterlagSettings ??= new Map()), size: 60 };
  const keyOf = (act: TaskAct) => `${basis.fingerprint} ${actKey(act)}`;
  return remembered(kept, settings, keyOf, (fresh) =>
    calculateYear({ kind: 'year', basis: basis.task, settings: fresh }),
  );
}
