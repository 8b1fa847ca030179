import { localDateStartMs, type LoadSeries } from '../../core/load';
import {
  averagePowerFactor,
  breakEvens,
  compilePricing,
  energiesOf,
  PriceError,
  priceQuantities,
  readSchedule,
  scaledLoad,
  shareToReach,
  withoutLagging,
  type ChargeGroup,
  type CompiledPricing,
  type PricedBill,
} from '../../core/tariff';
import type { ComparedBill, ComparedSchedule, CompareResult, CompareSweep } from '../../schemas/compare';
import type { CompareSchedule, CompareTask, Refused } from './tasks';

/** Amounts of a year that count as equal: half a minor unit is the least two printed totals can differ by. */
const equalWithin = 0.005;
/** Lowest average power factor looked at, and the greatest share of kvarh added to reach it. */
const lowestPowerFactor = 0.8;
const mostAdded = 2;
const shareSteps = 60;
/** Half the load to one and a half times it, in steps of 2 %. */
const factors = { low: 0.5, high: 1.5, steps: 50 };

interface Priced {
  about: CompareSchedule;
  compared: ComparedSchedule;
  pricing: CompiledPricing | null;
  /** Energy its lines charge by the kWh; null where there are none. */
  billedKwh: number | null;
}

/** Prices a year under several schedules and looks for the loads at which they cost the same. */
export function compareYear(task: CompareTask): CompareResult {
  const priced = task.schedules.map((about) => priceOne(task, about));
  const schedules = priced.map(({ compared }) => compared);
  const { load } = task;
  if (!load) return { schedules, byShare: null, byFactor: null, kwh: priced[0]!.billedKwh, powerFactor: null };
  const energies = energiesWithin(task, load);
  const { kwh, kvarhLagging } = energies;
  const low = Math.max(-mostAdded, Math.min(0, shareToReach(energies, lowestPowerFactor) ?? 0));
  const shares = { low, high: 1, steps: shareSteps };
  return {
    schedules,
    byShare:
      kvarhLagging > 0
        ? sweep(priced, load, shares, {
            vary: withoutLagging,
            powerFactorAt: (share) => averagePowerFactor({ kwh, kvarhLagging: kvarhLagging * (1 - share) }),
          })
        : null,
    byFactor: sweep(priced, load, factors, { vary: scaledLoad, powerFactorAt: () => averagePowerFactor(energies) }),
    kwh,
    powerFactor: averagePowerFactor(energies),
  };
}

function priceOne(task: CompareTask, about: CompareSchedule): Priced {
  const { id } = about;
  try {
    const { bills, pricing } = pricedBills(task, about);
    const notes = [...new Set(bills.flatMap((bill) => bill.notes))];
    const compared = { id, bills: bills.map(comparedBill), notes, isHistoryTold: about.history !== undefined };
    return { about, compared, pricing, billedKwh: billedKwh(bills) };
  } catch (error) {
    if (!(error instanceof PriceError)) throw error;
    return { about, compared: { id, refused: error.message }, pricing: null, billedKwh: null };
  }
}

function pricedBills(
  { load, periods }: CompareTask,
  { scheduleText, contract, history, given, rows }: CompareSchedule,
): { bills: PricedBill[]; pricing: CompiledPricing | null } {
  const schedule = readSchedule(scheduleText);
  const told = { contract, given, ...(history ? { history } : {}) };
  if (!load) return { bills: priceQuantities(schedule, rows ?? [], told), pricing: null };
  const { startMs, stepMinutes, kwh } = load;
  const pricing = compilePricing(schedule, { startMs, stepMinutes, count: kwh.length }, { periods, ...told });
  return { bills: pricing.bills(load), pricing };
}

function comparedBill({ total, reactiveCost, lines }: PricedBill): ComparedBill {
  const groups: Record<ChargeGroup, number> = { energy: 0, demand: 0, reactive: 0, fixed: 0, adjustment: 0, tax: 0 };
  for (const line of lines) groups[line.group] += line.amount;
  return { total, reactiveCost, groups };
}

function billedKwh(bills: PricedBill[]): number | null {
  const lines = bills.flatMap((bill) => bill.lines.filter(({ group, unit }) => group === 'energy' && unit === 'kWh'));
  return lines.length === 0 ? null : lines.reduce((sum, line) => sum + (line.quantity ?? 0), 0);
}

/** Energies inside the billing periods, by the clock of the standing schedule. */
function energiesWithin({ periods, timeZone }: CompareTask, load: LoadSeries) {
  const place = (date: string) =>
    Math.round((localDateStartMs(date, timeZone) - load.startMs) / (load.stepMinutes * 60_000));
  const each = periods.map(({ from, to }) => energiesOf(load, place(from), place(to)));
  return {
    kwh: each.reduce((sum, { kwh }) => sum + kwh, 0),
    kvarhLagging: each.reduce((sum, { kvarhLagging }) => sum + kvarhLagging, 0),
  };
}

interface Variation {
  vary: (load: LoadSeries, place: number) => LoadSeries;
  powerFactorAt: (place: number) => number;
}

/** Costs on a grid, and where the standing schedule and another cost the same; null where no other is priced. */
function sweep(
  priced: Priced[],
  load: LoadSeries,
  range: { low: number; high: number; steps: number },
  { vary, powerFactorAt }: Variation,
): CompareSweep | Refused | null {
  const able = priced.filter(({ pricing }) => pricing !== null);
  if (able.length < 2 || able[0] !== priced[0]) return null;
  const costs = able.map(({ pricing }) => costBy(pricing!, load, vary));
  const [standing, ...others] = costs as [(place: number) => number, ...((place: number) => number)[]];
  const { low, high, steps } = range;
  const places = Array.from({ length: steps + 1 }, (_, i) => (i === steps ? high : low + ((high - low) * i) / steps));
  try {
    return {
      ids: able.map(({ about }) => about.id),
      points: places.map((place) => ({
        place,
        powerFactor: powerFactorAt(place),
        costs: costs.map((cost) => cost(place)),
      })),
      pairs: others.map((other, index) => ({
        id: able[index + 1]!.about.id,
        found: breakEvens({ difference: (place) => standing(place) - other(place), ...range, equalWithin }),
      })),
    };
  } catch (error) {
    if (!(error instanceof PriceError)) throw error;
    return { refused: error.message };
  }
}

/** Cost of the year at a place, each worked out once. */
function costBy(pricing: CompiledPricing, load: LoadSeries, vary: Variation['vary']): (place: number) => number {
  const known = new Map<number, number>();
  return (place) => {
    let cost = known.get(place);
    if (cost === undefined) {
      cost = pricing.totals(vary(load, place)).reduce((sum, total) => sum + total, 0);
      known.set(place, cost);
    }
    return cost;
  };
}
