import { localDateStartMs, type BillingPeriod } from '../../load';
import { wordNumber } from '../../units';
import { neededQuantities, textsWithin } from '../compare/needs';
import { wholeFamilies } from '../compare/whole-families';
import type { QuantityEntry, Schedule } from '../model';
import { askFor } from './ask';
import { steadyMeasures } from './steady-measures';
import { ToldError, type AskedQuantity, type AssumedMonth, type ToldMonth, type Whole } from './told';

/**
 * Fills in what a bill told in short leaves open.
 *
 * A load that stands still at the period's mean power gives every sum and lowest, so energy is shared by the hours of the windows; one that
 * stands still at the peak gives every highest, so each window has the same peak. Reactive power goes with active power in the ratio of the
 * period's kvarh to its kWh. What is told for some windows is taken from the whole, the rest shared by hours.
 *
 * @throws {ToldError} where figures contradict one another
 * @throws {PriceError} for a period outside the schedule's time, or contract inputs outside their range
 */
export function assumeMonth(schedule: Schedule, told: ToldMonth): AssumedMonth {
  const { period, contract } = told;
  const needed = neededWithin(schedule, period);
  const whole = settleWhole(schedule, told, needed);
  const { energyKwh, peakKw, kvarhPerKwh } = whole;
  const hours = hoursOf(schedule, period);
  const steady = (kw: number | null) =>
    kw === null ? null : steadyMeasures(schedule, period, { kw, kvar: kw * (kvarhPerKwh ?? 0) }, contract);
  const sources = { mean: steady(energyKwh === null ? null : energyKwh / hours), peak: steady(peakKw) };
  const asked = needed.map((quantity) => askFor(quantity, told, whole, sources));
  return { asked: shareRest(asked, schedule, told, whole), ...whole };
}

/** Needed by any text of the period, each once, as the last that needs it says. */
function neededWithin(schedule: Schedule, period: BillingPeriod): QuantityEntry[] {
  const all = textsWithin(schedule, period).flatMap((text) => neededQuantities(text).measured);
  return [...new Map(all.map((quantity) => [quantity.name, quantity])).values()];
}

/** Length of a period by the schedule's clock, its changes counted. [h] */
function hoursOf({ timeZone }: Schedule, { from, to }: BillingPeriod): number {
  return (localDateStartMs(to, timeZone) - localDateStartMs(from, timeZone)) / 3_600_000;
}

function settleWhole(schedule: Schedule, told: ToldMonth, needed: QuantityEntry[]): Whole {
  const { quick, period } = told;
  const energyKwh = quick.energyKwh ?? familyTotal(schedule, told, 'kwh') ?? null;
  const kvarh = quick.energyKvarh ?? familyTotal(schedule, told, 'kvarhLagging');
  const kvarhPerKwh = kvarhPerKwhOf(kvarh, energyKwh, quick.powerFactor);
  const peakKw = quick.peakKw ?? typedPeakKw(told, needed, kvarhPerKwh);
  const hours = hoursOf(schedule, period);
  if (energyKwh !== null && peakKw !== null && peakKw * hours < energyKwh * (1 - 1e-9)) {
    const meanKw = wordNumber(Math.ceil(energyKwh / hours));
    const message = `The peak cannot be below the mean power: this energy over ${wordNumber(hours)} hours is ${meanKw} kW. Check both.`;
    throw new ToldError('peakKw', message);
  }
  return { energyKwh, peakKw, kvarhPerKwh };
}

/** The peak where it is told by name alone: the highest kW of any window, else the highest kVA at the month's power factor. */
function typedPeakKw({ typed }: ToldMonth, needed: QuantityEntry[], kvarhPerKwh: number | null): number | null {
  const highest = (channel: 'kw' | 'kva') => {
    const told = needed.flatMap(({ name, definition }) => {
      const isPeak = definition.kind === 'measure' && definition.operation === 'highest';
      return isPeak && definition.channel === channel ? (typed[name] ?? []) : [];
    });
    return told.length > 0 ? Math.max(...told) : null;
  };
  const kva = highest('kva');
  const fromKva = kva === null || kvarhPerKwh === null ? null : kva * Math.cos(Math.atan(kvarhPerKwh));
  return highest('kw') ?? fromKva;
}

/** Total of a family whose windows share out all time, where every one of them is told. */
function familyTotal(
  schedule: Schedule,
  { period, typed }: ToldMonth,
  channel: 'kwh' | 'kvarhLagging',
): number | undefined {
  const families = textsWithin(schedule, period).flatMap((text) => wholeFamilies(text, channel));
  const told = families.find((members) => members.every(({ name }) => typed[name] !== undefined));
  return told?.reduce((sum, { name }) => sum + typed[name]!, 0);
}

/** How far kvarh and kWh may miss the power factor told beside them: it is printed to two places. [unitless] */
const factorTolerance = 0.0051;

function kvarhPerKwhOf(
  kvarh: number | undefined,
  energyKwh: number | null,
  powerFactor: number | undefined,
): number | null {
  const told = powerFactor === undefined ? null : Math.tan(Math.acos(powerFactor));
  if (kvarh === undefined || energyKwh === null) return told;
  if (energyKwh === 0) {
    if (kvarh === 0) return 0;
    throw new ToldError('energyKwh', 'There are kvarh, but no kWh. Check both.');
  }
  const ratio = kvarh / energyKwh;
  const own = Math.cos(Math.atan(ratio));
  if (powerFactor !== undefined && Math.abs(own - powerFactor) > factorTolerance) {
    throw new ToldError('powerFactor', `kvarh and kWh give ${own.toFixed(3)}. Leave one of the two empty.`);
  }
  return ratio;
}

/** Where some windows of a whole are told, the others share what is left of it. */
function shareRest(asked: AskedQuantity[], schedule: Schedule, told: ToldMonth, whole: Whole): AskedQuantity[] {
  const { energyKwh, kvarhPerKwh } = whole;
  const kvarh = energyKwh === null || kvarhPerKwh === null ? null : energyKwh * kvarhPerKwh;
  const families = textsWithin(schedule, told.period).flatMap((text) => [
    ...wholeFamilies(text, 'kwh').map((members) => ({ members, total: energyKwh, field: 'energyKwh' })),
    ...wholeFamilies(text, 'kvarhLagging').map((members) => ({ members, total: kvarh, field: 'energyKvarh' })),
  ]);
  return families.reduce((all, { members, total, field }) => {
    const names = new Set(members.map(({ name }) => name));
    const own = all.filter(({ quantity }) => names.has(quantity.name));
    const typed = own.filter(({ basis }) => basis === 'typed');
    const open = own.filter(({ basis }) => basis === 'assumed');
    if (typed.length === 0 || total === null) return all;
    const left = total - sumOf(typed);
    refuseMisfit({ left, total, count: typed.length, isAll: open.length === 0, field });
    const factor = left / sumOf(open);
    return all.map((one) =>
      open.includes(one) ? { ...one, value: one.value! * factor, words: 'shares what the other windows leave' } : one,
    );
  }, asked);
}

const sumOf = (asked: AskedQuantity[]) => asked.reduce((sum, { value }) => sum + (value ?? 0), 0);

function refuseMisfit(about: { left: number; total: number; count: number; isAll: boolean; field: string }): void {
  const { left, total, count, isAll, field } = about;
  // Windows are printed whole: each may be off by half a unit.
  const slack = 0.5 * (count + 1);
  if (left >= -slack && (!isAll || left <= slack)) return;
  const words = `The windows typed come to ${wordNumber(Math.round(total - left))}, not ${wordNumber(Math.round(total))}. Correct one, or leave this empty.`;
  throw new ToldError(field, words);
}
