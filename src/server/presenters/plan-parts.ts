import { operatingPoint, panelCurrentA, type SynchronousMotor } from '../../core/machine';
import {
  resonanceCheck,
  USUAL_HARMONICS,
  type BankPlanResult,
  type BusVoltage,
  type MotorPlanResult,
} from '../../core/plan';
import { wordNumber, wordOrdinal } from '../../core/units';
import type { BankView, PlanField, PlanMotorView, ReplacementView, VoltageView } from '../../schemas/plan';
import type { BankInput, ReplacementInput } from '../../schemas/plan-input';
import { controlsOf, type MotorSetting } from '../../schemas/plan-settings';
import { limitsOf } from './motor';

/** What of a motor its views under plans are made of. */
export interface MotorFacts {
  id: number;
  name: string;
  machine: SynchronousMotor;
  fieldTodayA: number;
  usualShaftKw: number;
}

/** Greatest pull-out ratio that is told: beyond it there is nothing to compare. */
const greatestRatio = 99;

/** A motor under a plan beside today, at its usual load; shares of limits are the greatest of the year. */
export function presentPlanMotor(motor: MotorFacts, year: MotorPlanResult): PlanMotorView {
  const { machine, usualShaftKw: shaftKw, fieldTodayA } = motor;
  const fieldPlanA = year.fieldPlanA ?? fieldTodayA;
  const today = operatingPoint(machine, { shaftKw, fieldCurrentA: fieldTodayA });
  const plan = operatingPoint(machine, { shaftKw, fieldCurrentA: fieldPlanA });
  const limits = limitsOf(machine);
  const kept = 1 - limits.reservePercent / 100;
  return {
    motorId: motor.id,
    name: motor.name,
    usualShaftKw: shaftKw,
    usualLoadPercent: (100 * shaftKw) / machine.ratedOutputKw,
    kvarToday: -today.kvar,
    kvarPlan: -plan.kvar,
    fieldPlanA,
    armatureTodayA: today.lineCurrentA,
    armaturePlanA: plan.lineCurrentA,
    extraLossKw: year.hoursRunning > 0 ? year.extraLossKwh / year.hoursRunning : 0,
    extraLossKwh: year.extraLossKwh,
    fieldLimitA: limits.fieldA,
    fieldSharePercent:
      year.hoursRunning > 0 ? (100 * year.greatestFieldShare) / kept : (100 * fieldPlanA) / limits.fieldA,
    leastPullOut: Math.min(greatestRatio, year.leastPullOutRatio ?? greatestRatio),
    pullOutMargin: limits.pullOutMargin,
    hoursRunning: year.hoursRunning,
    greatestArmatureShare: year.greatestArmatureShare / kept,
    hoursNearest: {
      field: year.nearestLimitHours.field,
      armature: year.nearestLimitHours.armature,
      pullOut: year.nearestLimitHours['pull-out'],
    },
    hoursLimited: year.limitedHours,
    hoursBeyond: Math.max(...Object.values(year.beyondHours)),
  };
}

/** A bank over the year, with its worst resonance against the usual harmonics. */
export function presentBank(
  { cost: _cost, ...bank }: BankInput,
  shortCircuitKva: number | null,
  year: BankPlanResult,
): BankView {
  return {
    ...bank,
    kvar: bank.steps * bank.stepKvar,
    resonance: shortCircuitKva === null ? null : worstResonance(bank, shortCircuitKva),
    switchings: year.switchings,
    lossKwh: year.lossKwh,
  };
}

/** A switched bank passes through every number of steps; a fixed one stands at all of them. */
function worstResonance(bank: Omit<BankInput, 'cost'>, shortCircuitKva: number): NonNullable<BankView['resonance']> {
  const { steps, stepKvar, detuningPercent, holdsPowerFactor } = bank;
  const sizes = holdsPowerFactor === undefined ? [steps] : Array.from({ length: steps }, (_, k) => k + 1);
  const checks = sizes.map((count) => {
    const kvar = count * stepKvar;
    return { kvar, ...resonanceCheck({ kvar, shortCircuitKva, detuningPercent }) };
  });
  return checks.findLast(({ near }) => near.length > 0) ?? checks.at(-1)!;
}

/** A new motor over the year against the induction motor it replaces. */
export function presentReplacement(
  one: ReplacementInput & { inductionKw: number; ratedKw: number },
  year: MotorPlanResult,
): ReplacementView {
  return {
    name: one.name,
    inductionKw: one.inductionKw,
    ratedKw: one.ratedKw,
    controls: one.controls,
    hoursRunning: year.hoursRunning,
    hoursLimited: year.limitedHours,
    kvarGained: year.kvarPlan - year.kvarStanding,
    kwSaved: year.hoursRunning > 0 ? -year.extraLossKwh / year.hoursRunning : 0,
  };
}

/** Estimated bus voltage; hours outside are told only where a band is written. */
export function presentVoltage(bus: BusVoltage | null, hasBand: boolean): VoltageView | null {
  if (!bus) return null;
  const { leastPu, greatestPu, hoursBelow, hoursAbove } = bus;
  return { lowPu: leastPu, highPu: greatestPu, hoursOutside: hasBand ? hoursBelow + hoursAbove : null };
}

/** A motor's setting under a plan, with what a brushless machine's panel shows. */
export function presentPlanField(
  motor: Pick<MotorFacts, 'id' | 'name' | 'machine' | 'fieldTodayA'>,
  setting: MotorSetting | undefined,
): PlanField {
  const { id, name, machine, fieldTodayA } = motor;
  const { fieldA, controls } = setting ?? { fieldA: fieldTodayA };
  const panelA = machine.exciterField
    ? controlsOf({ fieldA, controls }).map((control) =>
        control.holds === 'field-current' ? panelCurrentA(machine, control.fieldCurrentA) : null,
      )
    : undefined;
  return { motorId: id, name, ...(controls ? { controls } : { fieldA }), todayA: fieldTodayA, panelA };
}

/** Distance of a resonance from a usual harmonic at which it is called near. [orders] */
const nearOrders = 0.5;

/** Which limit lies nearest over the year, in words: "field, M-1 at 80 %", "pull-out, M-1 1.68", "5th harmonic, order 5.2". */
export function nearestLimitWords(motors: PlanMotorView[], banks: BankView[]): string {
  const ofMotors = motors
    .filter((motor) => motor.hoursRunning > 0)
    .flatMap(({ name, fieldSharePercent, leastPullOut, pullOutMargin, greatestArmatureShare }) => [
      { share: fieldSharePercent / 100, words: `field, ${name} at ${wordNumber(fieldSharePercent, 1)} %` },
      { share: pullOutMargin / leastPullOut, words: `pull-out, ${name} ${wordNumber(leastPullOut, 0.01)}` },
      { share: greatestArmatureShare, words: `stator, ${name} at ${wordNumber(100 * greatestArmatureShare, 1)} %` },
    ]);
  const ofBanks = banks.flatMap(({ resonance }) => {
    if (!resonance) return [];
    const { order } = resonance;
    const nearest = ([...USUAL_HARMONICS] as number[]).reduce((a, b) =>
      Math.abs(b - order) < Math.abs(a - order) ? b : a,
    );
    const words = `${wordOrdinal(nearest)} harmonic, order ${wordNumber(order, 0.1)}`;
    return [{ share: nearOrders / Math.max(1e-9, Math.abs(nearest - order)), words }];
  });
  return [...ofMotors, ...ofBanks].sort((a, b) => b.share - a.share)[0]?.words ?? 'none';
}
