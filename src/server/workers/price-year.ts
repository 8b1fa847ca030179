import { localDateStartMs, type LoadSeries } from '../../core/load';
import { simulatePlan, spanSeries } from '../../core/plan';
import type { FixedSetup, Grid, PlanMotor, PlanSetup, Plant, Spans } from '../../core/plan';
import {
  compilePricing,
  readSchedule,
  type CompiledPricing,
  type PriceOptions,
  type Schedule,
} from '../../core/tariff';
import { rulesLoad, shaftLoadOf } from '../services/shaft-load';
import type { TaskAct, TaskBasis, TaskSetting, YearTask } from './tasks';

/** A task made ready: the plant on the readings' own intervals, the schedule laid out over them. */
export interface ReadyYear {
  basis: TaskBasis;
  grid: Grid;
  plant: Plant;
  schedule: Schedule;
  pricing: CompiledPricing;
}

/** Reads the schedule and lays shaft loads and schedule over the readings. */
export function readyYear(basis: TaskBasis): ReadyYear {
  const { load, meters, upstream, supply } = basis;
  const grid = { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length };
  const motors = basis.motors.map((motor): PlanMotor => {
    const { machine, fieldTodayA, behind, voltagePu, leastFieldA, voltageBandPu } = motor;
    const { shaftKw } = shaftLoadOf(motor, grid, basis.timeZone);
    return { motor: machine, shaftKw, standingFieldA: fieldTodayA, behind, voltagePu, leastFieldA, voltageBandPu };
  });
  const schedule = readSchedule(basis.scheduleText);
  return {
    basis,
    grid,
    plant: { load: meters[0] ?? load, beside: meters.slice(1), motors, upstream, supply },
    schedule,
    pricing: compilePricing(schedule, grid, priceOptionsOf(basis)),
  };
}

/** What the year's bills are priced with, beside the schedule. */
export const priceOptionsOf = ({ periods, contract, given, history }: TaskBasis): PriceOptions => ({
  periods,
  contract,
  given,
  ...(history ? { history } : {}),
});

/** The spans of an act over the readings. */
export function spansOf({ basis, grid }: ReadyYear, rules: TaskAct['spans']): Spans | undefined {
  return rules && spanSeries(rules, grid, basis.timeZone, basis.holidays);
}

/** What an act builds and when its spans are. */
export function fixedSetupOf(ready: ReadyYear, act: TaskAct): FixedSetup {
  const { basis, grid } = ready;
  return {
    spans: spansOf(ready, act.spans),
    banks: act.banks ?? [],
    replacements: (act.replacements ?? []).map(({ induction, machine, calendar, controls, behind }) => ({
      induction,
      motor: machine,
      shaftKw: rulesLoad(calendar, induction.ratedOutputKw, grid, basis.timeZone),
      controls,
      behind,
    })),
  };
}

/** An act over the readings: motors it does not name stand. */
export function setupOf(ready: ReadyYear, act: TaskAct): PlanSetup {
  const controls = ready.basis.motors.map(({ id, fieldTodayA }) => {
    const own = act.controls?.find((one) => one.motorId === id)?.controls;
    return own ?? [{ holds: 'field-current' as const, fieldCurrentA: fieldTodayA }];
  });
  return { ...fixedSetupOf(ready, act), controls };
}

/** Prices every setting of a task over the year. */
export function priceYear({ basis, settings }: YearTask): TaskSetting[] {
  const ready = readyYear(basis);
  return settings.map((act) => priceSetting(ready, act));
}

function priceSetting(ready: ReadyYear, act: TaskAct): TaskSetting {
  const { basis, plant, pricing } = ready;
  const result = simulatePlan(plant, setupOf(ready, act));
  const bills = pricing.bills(result.load);
  return {
    bills: bills.map((bill) => ({ ...bill, notes: [...bill.notes, ...result.notes] })),
    motors: result.motors.map((figures, index) => ({ ...figures, motorId: basis.motors[index]!.id })),
    replacements: result.replacements,
    banks: result.banks,
    extraKwh: result.extraKwh,
    hoursLeading: result.hoursLeadingAfter,
    bus: result.bus,
    worstPf: worstPowerFactor(basis, result.load),
    readings: readingsOf(result.load),
  };
}

/** Power factor in the interval of greatest demand of each bill; the least of them. */
function worstPowerFactor(basis: TaskBasis, load: LoadSeries): TaskSetting['worstPf'] {
  const stepMs = load.stepMinutes * 60_000;
  const place = (date: string) => Math.round((localDateStartMs(date, basis.timeZone) - load.startMs) / stepMs);
  let worst: TaskSetting['worstPf'] = null;
  basis.periods.forEach((period, bill) => {
    const peak = greatestAt(load.kwh, place(period.from), place(period.to));
    if (peak === null) return;
    const kwh = load.kwh[peak]!;
    const leading = load.kvarhLeading[peak]!;
    const net = load.kvarhLagging[peak]! - (Number.isNaN(leading) ? 0 : leading);
    const value = kwh / Math.hypot(kwh, net);
    if (value > 0 && (!worst || value < worst.value)) worst = { value, leading: net < 0, bill };
  });
  return worst;
}

function greatestAt(values: Float64Array, from: number, to: number): number | null {
  let best: number | null = null;
  for (let i = Math.max(0, from); i < Math.min(values.length, to); i += 1) {
    if (values[i]! > (best === null ? -Infinity : values[best]!)) best = i;
  }
  return best;
}

function readingsOf(load: LoadSeries): TaskSetting['readings'] {
  let missing = 0;
  let estimated = 0;
  for (const mark of load.quality) {
    if (mark === 2) missing += 1;
    else if (mark === 1) estimated += 1;
  }
  return { intervals: load.quality.length, missing, estimated, stepMinutes: load.stepMinutes };
}
