import { sumLoads, type LoadSeries } from '../load';
import { DEFAULT_PULL_OUT_MARGIN, fixField, ratedCurrentA } from '../machine';
import type { Limit, OperatingPoint, SynchronousMotor } from '../machine';
import { createSimulator, distinctLoads } from './simulator';
import type { CapacitorStep, PlanAction, PlanMotor, Plant, Upstream } from './types';

/** A motor in a plan: as it stands and as the plan sets it. */
export interface MotorInPlan extends PlanMotor {
  planFieldA: number;
}

/** What a plan does to one motor over the series. Hours count intervals whether metered or missing. */
export interface MotorPlanResult {
  hoursRunning: number;
  /** Load the motor spends most hours at. [kW] */
  usualShaftKw: number;
  /** kvar delivered at the usual load, as it stands and with the plan. [kvar] */
  kvarStanding: number;
  kvarPlan: number;
  /** Energy the plan makes the motor lose beyond standing; negative when it saves. [kWh] */
  extraLossKwh: number;
  /** Hours by the limit that stands nearest with the plan: the one of which the greatest share is used. */
  nearestLimitHours: Record<Limit, number>;
  /** Hours beyond each limit with the plan. */
  beyondHours: Record<Limit, number>;
  /** Least ratio of pull-out to load, as it stands and with the plan; null when it never runs. [unitless] */
  leastPullOutRatioStanding: number | null;
  leastPullOutRatio: number | null;
  /** Greatest shares of field and armature limit used with the plan, before the reserve. [unitless] */
  greatestFieldShare: number;
  greatestArmatureShare: number;
}

/** Metered load with a plan. */
export interface PlanResult {
  load: LoadSeries;
  motors: MotorPlanResult[];
  /** Change of active energy over the metered intervals: motors, capacitors and upstream. [kWh] */
  extraKwh: number;
  /** Hours with more leading than lagging energy at the service point, missing intervals left out. [h] */
  hoursLeadingBefore: number;
  hoursLeadingAfter: number;
  notes: string[];
}

/** Levels a motor's loads are gathered to where it runs at more. */
const LEVELS = 256;

/**
 * Simulates a plan of constant field currents and capacitor steps on metered load.
 *
 * @param input.load  Metered load, standing.
 * @param input.beside  Loads of further meters that are added to it before pricing; the result is the sum.
 * @param input.motors  Motors with their shaft load per interval, standing field and planned field.
 * @param input.capacitors  Fixed steps the plan connects.
 * @param input.upstream  Transformer or feeder between meter and bus.
 * @returns The load with the plan (a missing interval stays missing) and what happens to each motor.
 * @throws {PullOutError} naming the motor whose standing or planned field does not hold its load
 * @throws {RangeError} naming the argument out of range
 */
export function simulatePlan(input: {
  load: LoadSeries;
  beside?: LoadSeries[];
  motors: MotorInPlan[];
  capacitors?: CapacitorStep[];
  upstream?: Upstream;
}): PlanResult {
  const { motors, capacitors = [], beside = [], upstream } = input;
  const simulator = createSimulator({ load: input.load, beside, motors, upstream }, capacitors);
  const load = sumLoads([input.load, ...beside]);
  const planned = simulator.apply(motors.map((m) => m.planFieldA));
  const hours = load.stepMinutes / 60;
  let extraKwh = 0;
  planned.kwh.forEach((kwh, i) => {
    if (!Number.isNaN(kwh)) extraKwh += kwh - load.kwh[i]!;
  });
  return {
    load: planned,
    motors: motors.map((motor, m) => motorResult(motor, hours, `motors[${m}]`)),
    extraKwh,
    hoursLeadingBefore: hoursLeading(load, hours),
    hoursLeadingAfter: hoursLeading(planned, hours),
    notes: simulator.notes,
  };
}

/**
 * Turns a plan's actions into the input of `simulatePlan`: motors without an action keep their standing field.
 *
 * @throws {RangeError} when an action names a motor the plant has not, or one motor twice
 */
export function applyActions(
  plant: Plant,
  actions: PlanAction[],
): Pick<Plant, 'load' | 'beside' | 'upstream'> & { motors: MotorInPlan[]; capacitors: CapacitorStep[] } {
  const motors = plant.motors.map((motor) => ({ ...motor, planFieldA: motor.standingFieldA }));
  const capacitors: CapacitorStep[] = [];
  const set = new Set<number>();
  for (const action of actions) {
    if (action.kind === 'capacitor') {
      const { kvar, lossWPerKvar, voltagePu, fromMs } = action;
      capacitors.push({ kvar, lossWPerKvar, voltagePu, fromMs });
      continue;
    }
    const motor = motors[action.motorIndex];
    if (!motor) throw new RangeError(`motorIndex must be below ${motors.length}, got ${action.motorIndex}`);
    if (set.has(action.motorIndex))
      throw new RangeError(`motorIndex must be named once, got ${action.motorIndex} again`);
    set.add(action.motorIndex);
    motor.planFieldA = action.fieldCurrentA;
  }
  const { load, beside, upstream } = plant;
  return { load, motors, capacitors, ...(beside && { beside }), ...(upstream && { upstream }) };
}

/** Hours with more leading than lagging energy; intervals without figures left out. */
export function hoursLeading(load: LoadSeries, hoursPerInterval: number): number {
  let count = 0;
  load.kvarhLeading.forEach((leading, i) => {
    if (leading > load.kvarhLagging[i]!) count++;
  });
  return count * hoursPerInterval;
}

function motorResult(planMotor: MotorInPlan, hours: number, name: string): MotorPlanResult {
  const { motor, voltagePu, standingFieldA, planFieldA } = planMotor;
  const levels = loadLevels(planMotor.shaftKw, hours, name);
  const standing = fixField(motor, { fieldCurrentA: standingFieldA, voltagePu });
  const plan = fixField(motor, { fieldCurrentA: planFieldA, voltagePu });
  const usual = levels.reduce((a, b) => (b.hours > a.hours ? b : a), { shaftKw: 0, hours: 0 });
  const result: MotorPlanResult = {
    hoursRunning: 0,
    usualShaftKw: usual.shaftKw,
    kvarStanding: usual.hours > 0 ? -standing.taken(usual.shaftKw).kvar : 0,
    kvarPlan: usual.hours > 0 ? -plan.taken(usual.shaftKw).kvar : 0,
    extraLossKwh: 0,
    nearestLimitHours: { armature: 0, field: 0, 'pull-out': 0 },
    beyondHours: { armature: 0, field: 0, 'pull-out': 0 },
    leastPullOutRatioStanding: null,
    leastPullOutRatio: null,
    greatestFieldShare: 0,
    greatestArmatureShare: 0,
  };
  for (const level of levels) {
    const before = standing.point(level.shaftKw);
    addLevel(result, motor, plan.point(level.shaftKw), before, level.hours);
  }
  return result;
}

function addLevel(
  result: MotorPlanResult,
  motor: SynchronousMotor,
  after: OperatingPoint,
  before: OperatingPoint,
  hours: number,
): void {
  const shares = limitShares(motor, after);
  const reserve = motor.limits?.reserve ?? 0;
  result.hoursRunning += hours;
  result.extraLossKwh += (after.inputKw - before.inputKw) * hours;
  const nearest = (Object.keys(shares) as Limit[]).reduce((a, b) => (shares[b] > shares[a] ? b : a));
  result.nearestLimitHours[nearest] += hours;
  for (const limit of after.beyond) result.beyondHours[limit] += hours;
  const least = (known: number | null, ratio: number) => (known === null ? ratio : Math.min(known, ratio));
  result.leastPullOutRatioStanding = least(result.leastPullOutRatioStanding, before.pullOutRatio);
  result.leastPullOutRatio = least(result.leastPullOutRatio, after.pullOutRatio);
  result.greatestFieldShare = Math.max(result.greatestFieldShare, shares.field * (1 - reserve));
  result.greatestArmatureShare = Math.max(result.greatestArmatureShare, shares.armature * (1 - reserve));
}

/** Share of each limit a point uses, after the reserve; 1 stands at the limit. */
function limitShares(motor: SynchronousMotor, point: OperatingPoint): Record<Limit, number> {
  const reserve = motor.limits?.reserve ?? 0;
  const fieldA = (motor.limits?.fieldCurrentA ?? motor.ratedFieldCurrentA) * (1 - reserve);
  const armatureA = (motor.limits?.armatureCurrentA ?? ratedCurrentA(motor)) * (1 - reserve);
  const margin = motor.limits?.pullOutMargin ?? DEFAULT_PULL_OUT_MARGIN;
  return {
    armature: point.lineCurrentA / armatureA,
    field: point.fieldCurrentA / fieldA,
    'pull-out': margin / point.pullOutRatio,
  };
}

/** Loads a motor runs at with their hours; gathered to the middles of 256 levels, the highest kept, where there are more. */
function loadLevels(shaftKw: Float64Array, hours: number, name: string): { shaftKw: number; hours: number }[] {
  const { loads, index } = distinctLoads(shaftKw, shaftKw.length, name);
  const highest = loads[loads.length - 1] ?? 0;
  const gather = loads.length > LEVELS;
  const levelOf = (kw: number) => {
    if (!gather || kw === highest) return kw;
    return ((Math.min(LEVELS - 1, Math.floor((kw / highest) * LEVELS)) + 0.5) * highest) / LEVELS;
  };
  const total = new Map<number, number>();
  for (const k of index) {
    if (k === 0) continue;
    const level = levelOf(loads[k - 1]!);
    total.set(level, (total.get(level) ?? 0) + hours);
  }
  return [...total].map(([kw, spent]) => ({ shaftKw: kw, hours: spent })).sort((a, b) => a.shaftKw - b.shaftKw);
}
