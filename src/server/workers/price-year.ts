import { localDateStartMs, type LoadSeries } from '../../core/load';
import { shaftLoadSeries, simulatePlan, type PlanMotor } from '../../core/plan';
import { compilePricing, readSchedule, type CompiledPricing } from '../../core/tariff';
import { toShiftCalendar } from '../services/shaft-load';
import type { TaskAct, TaskBasis, TaskSetting, YearTask } from './tasks';

/** A task made ready: the motors' shaft loads on the readings' own intervals, the schedule laid out over them. */
export interface ReadyYear {
  basis: TaskBasis;
  motors: PlanMotor[];
  pricing: CompiledPricing;
}

/** Reads the schedule and lays calendars and schedule over the readings. */
export function readyYear(basis: TaskBasis): ReadyYear {
  const { load, timeZone, periods, contract, history, given } = basis;
  const grid = { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length };
  const motors = basis.motors.map(({ calendar, machine, fieldTodayA, behind }) => ({
    motor: machine,
    shaftKw: shaftLoadSeries(toShiftCalendar(calendar, machine.ratedOutputKw), grid, timeZone),
    standingFieldA: fieldTodayA,
    behind,
  }));
  const options = { periods, contract, given, ...(history ? { history } : {}) };
  return { basis, motors, pricing: compilePricing(readSchedule(basis.scheduleText), grid, options) };
}

/** The first meter's load and those beside it. */
export const metersOf = ({ load, meters }: TaskBasis): { load: LoadSeries; beside: LoadSeries[] } => ({
  load: meters[0] ?? load,
  beside: meters.slice(1),
});

/** Prices every setting of a task over the year. */
export function priceYear({ basis, settings }: YearTask): TaskSetting[] {
  const ready = readyYear(basis);
  return settings.map((act) => priceSetting(ready, act));
}

function priceSetting({ basis, motors, pricing }: ReadyYear, { controls = [], banks = [] }: TaskAct): TaskSetting {
  const fieldOf = (index: number) => {
    const control = controls.find((one) => one.motorId === basis.motors[index]?.id)?.controls[0];
    return control?.holds === 'field-current' ? control.fieldCurrentA : undefined;
  };
  const result = simulatePlan({
    ...metersOf(basis),
    motors: motors.map((motor, index) => ({ ...motor, planFieldA: fieldOf(index) ?? motor.standingFieldA })),
    capacitors: banks.map(({ steps, stepKvar, lossWPerKvar }) => ({ kvar: steps * stepKvar, lossWPerKvar })),
  });
  const bills = pricing.bills(result.load);
  return {
    bills: bills.map((bill) => ({ ...bill, notes: [...bill.notes, ...result.notes] })),
    motors: result.motors.map((figures, index) => ({ ...figures, motorId: basis.motors[index]!.id })),
    hoursLeading: result.hoursLeadingAfter,
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
