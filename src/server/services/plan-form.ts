import { addDays, dayNumber, localDateStartMs, weekdayOf } from '../../core/load';
import type { SeasonTable } from '../../core/tariff';
import type { FormLoads, FormMeter, FormMotor } from '../../schemas/plan-form';
import { limitsOf } from '../presenters/motor';
import type { OpenEngagement } from './engagements';
import { planBasis, type PlanMotor } from './plan-basis';
import { shaftLoadOf } from './shaft-load';

/** What the form of a plan knows of the plant. */
export interface PlanFormPlant {
  motors: FormMotor[];
  meters: FormMeter[];
  seasons: string[];
}

/**
 * Motors with their limits and loads, meters and seasons, for the form of a plan.
 *
 * @throws {ServiceError} 409 naming the station to visit, where something is missing
 */
export async function planFormPlant(opened: OpenEngagement): Promise<PlanFormPlant> {
  const { pricing, motors, task } = await planBasis(opened);
  const seasons = pricing.schedule.texts.at(-1)?.seasons;
  return {
    motors: motors.map((motor) => formMotor(motor, opened, task.timeZone, seasons)),
    meters: opened.meters.map(({ id, label }) => ({ id, label })),
    seasons: seasons?.names ?? [],
  };
}

function formMotor(motor: PlanMotor, opened: OpenEngagement, timeZone: string, seasons?: SeasonTable): FormMotor {
  const { row, machine, completed } = motor;
  return {
    motorId: row.id,
    name: row.name,
    machine,
    todayA: row.fieldTodayA,
    limits: limitsOf(machine, completed),
    loads: loadsOf(motor, opened, timeZone, seasons),
  };
}

const stepMs = 15 * 60_000;
const quartersPerDay = 96;
/** Loads sent to the browser: a metered load is gathered to so many, its highest kept. */
const mostLoads = 24;

/** Distinct loads of the year with the months, hours of the week and seasons they come in. */
function loadsOf(motor: PlanMotor, { engagement }: OpenEngagement, timeZone: string, seasons?: SeasonTable): FormLoads {
  const { row, machine, source } = motor;
  const startMs = localDateStartMs(engagement.yearFrom, timeZone);
  const count = Math.round((localDateStartMs(engagement.yearTo, timeZone) - startMs) / stepMs);
  const running = { ...source, machine, fieldTodayA: row.fieldTodayA };
  const { shaftKw: series } = shaftLoadOf(running, { startMs, stepMinutes: 15, count }, timeZone);
  const kw = gathered(series);
  const placeOf = (shaftKw: number) => kw.findIndex((one) => one >= shaftKw * (1 - 1e-9));
  const sets = (length: number) => Array.from({ length }, () => new Set<number>());
  const [ofMonth, ofQuarter, ofSeason] = [sets(12), sets(7 * quartersPerDay), sets(seasons?.names.length ?? 0)];
  let at = 0;
  for (let date = engagement.yearFrom; date < engagement.yearTo; date = addDays(date, 1)) {
    const end = Math.min(count, Math.round((localDateStartMs(addDays(date, 1), timeZone) - startMs) / stepMs));
    const month = Number(date.slice(5, 7));
    const weekday = (weekdayOf(dayNumber(date)) + 6) % 7;
    const season = seasons?.ofDay[month * 32 + Number(date.slice(8))];
    for (let quarter = 0; at < end; at += 1, quarter += 1) {
      if (series[at]! <= 0) continue;
      const place = placeOf(series[at]!);
      ofMonth[month - 1]!.add(place);
      ofQuarter[weekday * quartersPerDay + Math.min(quarter, quartersPerDay - 1)]!.add(place);
      if (season !== undefined) ofSeason[season]!.add(place);
    }
  }
  const listed = (places: Set<number>[]) => places.map((set) => [...set].sort((a, b) => a - b));
  return { kw, ofMonth: listed(ofMonth), ofQuarter: listed(ofQuarter), ofSeason: listed(ofSeason) };
}

/** Distinct loads above 0, rising; gathered upwards to evenly ranked ones where there are many. */
function gathered(series: Float64Array): number[] {
  const all = [...new Set(series.filter((shaftKw) => shaftKw > 0))].sort((a, b) => a - b);
  if (all.length <= mostLoads) return all;
  return Array.from({ length: mostLoads }, (_, k) => all[Math.round(((k + 1) * all.length) / mostLoads) - 1]!);
}
