import { sumLoads, type LoadSeries } from '../load';
import { busVoltageOver } from './bus-voltage';
import type { BusVoltage } from './bus-voltage';
import { placeBank } from './banks';
import { motorResult } from './motor-result';
import type { MotorPlanResult } from './motor-result';
import { createSimulator } from './simulator';
import type { CapacitorBank, PlanSetup, Plant } from './types';

/** What a bank does over the metered intervals. */
export interface BankPlanResult {
  /** Sum over the steps of the hours each is connected. [h] */
  stepHours: number;
  /** Operations of single steps, in and out. */
  switchings: number;
  /** [kvarh], [kWh] */
  deliveredKvarh: number;
  lossKwh: number;
}

/** Metered load with a plan. */
export interface PlanResult {
  load: LoadSeries;
  /** Motors of the plant, in its order, and of the replacements. */
  motors: MotorPlanResult[];
  replacements: MotorPlanResult[];
  banks: BankPlanResult[];
  /** Change of active energy over the metered intervals: motors, capacitors and upstream. [kWh] */
  extraKwh: number;
  /** Hours with more leading than lagging energy at the service point, missing intervals left out. [h] */
  hoursLeadingBefore: number;
  hoursLeadingAfter: number;
  /** As it stands and with the plan; null where the supply is not known. */
  bus: { standing: BusVoltage; plan: BusVoltage } | null;
  notes: string[];
}

/**
 * Simulates a plan on metered load, with the figures of every motor and bank.
 *
 * @param plant  Load, motors as they stand, and what lies between meter and bus.
 * @param setup  What the plan does.
 * @returns The load with the plan (a missing interval stays missing) and what happens to each motor and bank.
 * @throws {PullOutError} naming the motor whose standing or planned field does not hold its load
 * @throws {RangeError} naming the argument out of range
 */
export function simulatePlan(plant: Plant, setup: PlanSetup): PlanResult {
  const { spans, banks = [], replacements = [], controls } = setup;
  const simulator = createSimulator(plant, setup);
  const { load, first, trace } = simulator.trace(controls);
  const standing = sumLoads([plant.load, ...(plant.beside ?? [])]);
  const hours = load.stepMinutes / 60;
  const sources = [...plant.motors, ...replacements];
  const figures = simulator.placed.map((placed, m) =>
    motorResult({
      placed,
      source: sources[m]!,
      controls: controls[m] ?? replacements[m - plant.motors.length]!.controls,
      spans,
      deliveredKvar: trace.deliveredKvar[m]!,
      limited: trace.limited[m]!,
      hours,
    }),
  );
  const before = busVoltageOver(plant, plant.load);
  const after = busVoltageOver(plant, first);
  return {
    load,
    motors: figures.slice(0, plant.motors.length),
    replacements: figures.slice(plant.motors.length),
    banks: banks.map((bank, b) => bankResult(bank, plant.load, trace.bankSteps[b]!, `banks[${b}]`)),
    extraKwh: extraKwh(standing, load),
    hoursLeadingBefore: hoursLeading(standing, hours),
    hoursLeadingAfter: hoursLeading(load, hours),
    bus: before && after ? { standing: before, plan: after } : null,
    notes: simulator.notes,
  };
}

function extraKwh(before: LoadSeries, after: LoadSeries): number {
  let extra = 0;
  after.kwh.forEach((kwh, i) => {
    if (!Number.isNaN(kwh)) extra += kwh - before.kwh[i]!;
  });
  return extra;
}

/** Hours with more leading than lagging energy; intervals without figures left out. */
export function hoursLeading(load: LoadSeries, hoursPerInterval: number): number {
  let count = 0;
  load.kvarhLeading.forEach((leading, i) => {
    if (leading > load.kvarhLagging[i]!) count++;
  });
  return count * hoursPerInterval;
}

/** A bank's steps over the metered intervals; what it does in a missing one is not known. */
function bankResult(bank: CapacitorBank, load: LoadSeries, steps: Uint16Array, name: string): BankPlanResult {
  const { stepKvar, stepKw } = placeBank(bank, load, name);
  const hours = load.stepMinutes / 60;
  const result: BankPlanResult = { stepHours: 0, switchings: 0, deliveredKvarh: 0, lossKwh: 0 };
  let last: number | null = null;
  steps.forEach((connected, i) => {
    if (Number.isNaN(load.kwh[i]!)) return;
    result.stepHours += connected * hours;
    if (last !== null) result.switchings += Math.abs(connected - last);
    last = connected;
  });
  result.deliveredKvarh = result.stepHours * stepKvar;
  result.lossKwh = result.stepHours * stepKw;
  return result;
}
