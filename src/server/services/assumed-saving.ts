import { withAssumed, type FieldControl } from '../../core/machine';
import { toMinorUnits } from '../../core/units';
import type { AssumedSaving, AssumedSavingState, SavingSwing } from '../../schemas/assumed-saving';
import { assumedSavingFound, type JobProgress } from '../../schemas/job';
import { conflict, ServiceError } from '../errors';
import { Job } from '../models/Job';
import type { Plan } from '../models/Plan';
import type { Actor } from '../policies/actor';
import { calculateYear } from '../workers/pool';
import type { TaskAct, TaskBasis, TaskMotor } from '../workers/tasks';
import type { OpenEngagement } from './engagements';
import { runningJobs, startJob, type JobControls } from './jobs';
import { actOf, standingAct } from './plan-acts';
import { planBasis, type PlanBasis } from './plan-basis';
import { planOnOffer } from './plan-rows';
import { spanYearOf } from './plan-year';

const kind = 'assumed-saving';

/**
 * Begins to price the plan on offer with every assumed value at either end of its range. One runs for an engagement at a
 * time; it is several pricings of the year for every value.
 *
 * @throws {ServiceError} 409 where none is on offer, where one runs already, or where readings, bills or tariff are missing
 */
export async function startAssumedSaving(actor: Actor, opened: OpenEngagement): Promise<JobProgress> {
  const engagementId = opened.engagement.id;
  const plan = await planOnOffer(engagementId);
  if (!plan) throw conflict('No plan is there whose saving could move. Make one at the station Plans.');
  const basis = await planBasis(opened);
  const act = actOf(plan, opened, spanYearOf(basis));
  const alone = 'This is being worked out already. Wait for it, or stop it first.';
  return startJob(actor, { engagementId, kind, unit: 'pricings of the year', alone }, (controls) =>
    workOut(basis, { plan, act, currency: opened.engagement.currency }, controls),
  );
}

/** What a page opens with: the work that runs, and what the newest that ended well found, as long as nothing changed since. */
export async function latestAssumedSaving(opened: OpenEngagement): Promise<AssumedSavingState> {
  const engagementId = opened.engagement.id;
  const done = await Job.findOne({ where: { engagementId, kind, state: 'done' }, order: [['id', 'DESC']] });
  const found = assumedSavingFound(done);
  const [running] = await runningJobs(engagementId, kind);
  const plan = await planOnOffer(engagementId);
  const stale = found !== null && found.fingerprint !== (await fingerprintNow(opened, plan));
  return { planName: plan?.name ?? null, runningId: running?.id ?? null, found: stale ? null : found, stale };
}

const fingerprintOf = (basis: PlanBasis, plan: Plan) => `${basis.fingerprint} ${plan.id} ${plan.version}`;

async function fingerprintNow(opened: OpenEngagement, plan: Plan | null): Promise<string | null> {
  try {
    return plan && fingerprintOf(await planBasis(opened), plan);
  } catch (error) {
    if (error instanceof ServiceError && error.status === 409) return null;
    throw error;
  }
}

interface Offer {
  plan: Plan;
  act: TaskAct;
  currency: string;
}

async function workOut(basis: PlanBasis, offer: Offer, { report, signal }: JobControls): Promise<AssumedSaving> {
  const moves = basis.motors.flatMap(({ row, completed }) =>
    completed.assumed.map((one) => ({ motorId: row.id, one })),
  );
  const planned = 1 + 2 * moves.length;
  const [standing, base] = await calculateYear({
    kind: 'year',
    basis: basis.task,
    settings: [standingAct, offer.act],
  });
  const savingMinor = (plan: { bills: { total: number }[] }) =>
    toMinorUnits(totalOf(standing!) - totalOf(plan), offer.currency);
  report(1, planned);
  const swings: SavingSwing[] = [];
  for (const { motorId, one } of moves) {
    const ends: (number | null)[] = [];
    for (const value of [one.low, one.high]) {
      if (signal.aborted) break;
      ends.push(await savingWith(basis.task, offer.act, { motorId, field: one.field, value }, savingMinor));
      report(1 + 2 * swings.length + ends.length, planned);
    }
    const [atLowMinor = null, atHighMinor = null] = ends;
    swings.push({ motorId, field: one.field, atLowMinor, atHighMinor });
  }
  return {
    planName: offer.plan.name,
    currency: offer.currency,
    savingMinor: savingMinor(base!),
    swings,
    fingerprint: fingerprintOf(basis, offer.plan),
  };
}

const totalOf = ({ bills }: { bills: { total: number }[] }) => bills.reduce((sum, bill) => sum + bill.total, 0);

interface Move {
  motorId: number;
  field: string;
  value: number;
}

/** Saving with one value moved; null where the plan cannot run with it. The bills of standing are the metered ones either way. */
async function savingWith(
  basis: TaskBasis,
  act: TaskAct,
  move: Move,
  savingMinor: (plan: { bills: { total: number }[] }) => number,
): Promise<number | null> {
  try {
    const [moved] = await calculateYear({ kind: 'year', ...movedTask(basis, act, move) });
    return savingMinor(moved!);
  } catch (error) {
    if (error instanceof ServiceError && error.status === 409) return null;
    throw error;
  }
}

/** The task with one motor's value moved. Field amperes nobody read are a scale: every setting in them moves along. */
export function movedTask(basis: TaskBasis, act: TaskAct, { motorId, field, value }: Move) {
  const motor = basis.motors.find((one) => one.id === motorId)!;
  const scale = field === 'ratedFieldCurrentA' ? value / motor.machine.ratedFieldCurrentA : 1;
  const moved: TaskMotor = {
    ...motor,
    machine: withAssumed(motor.machine, field, value),
    fieldTodayA: motor.fieldTodayA * scale,
    leastFieldA: motor.leastFieldA === undefined ? undefined : motor.leastFieldA * scale,
  };
  return {
    basis: { ...basis, motors: basis.motors.map((one) => (one === motor ? moved : one)) },
    settings: [
      {
        ...act,
        controls: act.controls?.map((one) =>
          one.motorId === motorId ? { ...one, controls: one.controls.map((control) => scaled(control, scale)) } : one,
        ),
      },
    ],
  };
}

/** The same place of the field's scale: its amperes go with it, its volts, at the same power, against it. */
function scaled(control: FieldControl, scale: number): FieldControl {
  if (control.holds === 'field-current') return { ...control, fieldCurrentA: control.fieldCurrentA * scale };
  if (control.holds === 'field-voltage') return { ...control, fieldVoltageV: control.fieldVoltageV / scale };
  return control;
}
