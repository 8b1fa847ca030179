import { energiesDiffer } from '../../core/load';
import { toMinorUnits } from '../../core/units';
import { billQuantity, daysBetween, type BillView, type MeteredPeriod } from '../../schemas/bill';
import { formatAmount, formatBillName, formatCount, formatDay, formatNumber, formatQuantity } from '../ui/format';
import { typedNumber } from '../ui/typed-number';
import { offInPercent } from './meter-words';
import { dayAfter, dayBefore, isPercent, typedAmount, typedQuantity, type TypedBill, type TypedLine } from './typed';

/** What is said beside a field while one types. */
export interface Check {
  words: string;
  tone?: 'warn' | 'fault';
}

/** An average price this much off its neighbours' wants a look: a season changes it by less. A choice of ours. */
const oddPriceShare = 0.25;
/** A power factor this far from that of the energies is hardly of the same month. A choice of ours. */
const oddFactor = 0.05;

/** How the first day stands to the end of the bill before it. */
export function beginCheck(from: string, others: BillView[]): Check | null {
  const before = others.filter((bill) => bill.from < from).at(-1);
  if (!before || !from) return null;
  const gap = daysBetween(before.to, from);
  const last = formatDay(dayBefore(before.to));
  if (gap === 0) return { words: `joins ${last}` };
  return gap > 0
    ? { words: `${formatCount(gap, 'day')} after ${last}`, tone: 'warn' }
    : { words: `overlaps up to ${last}`, tone: 'fault' };
}

/** The days of the period, and how its end stands to the bill after it. */
export function endCheck(from: string, lastDay: string, others: BillView[]): Check | null {
  const to = dayAfter(lastDay);
  const days = from && lastDay ? daysBetween(from, to) : NaN;
  if (!(days > 0)) return null;
  const words = formatCount(days, 'day');
  const after = others.find((bill) => bill.from > from);
  if (!after) return { words };
  const gap = daysBetween(to, after.from);
  if (gap === 0) return { words: `${words}, joins ${formatDay(after.from)}` };
  return gap > 0
    ? { words, tone: undefined }
    : { words: `${words}, overlaps from ${formatDay(after.from)} on`, tone: 'fault' };
}

const minorOf = (amount: number, currency: string) => toMinorUnits(amount, currency);

/** What quantity and rate of a line come to against its amount; null where one of them is not typed. */
export function lineCheck({ quantity, unit, rate, amount }: TypedLine, currency: string): Check | null {
  const [count, price] = [typedNumber(quantity), typedNumber(rate)];
  if (count === undefined || price === undefined || Number.isNaN(count * price)) return null;
  const product = minorOf((count * price) / (unit.trim() === '%' ? 100 : 1), currency);
  const typed = typedAmount(amount, currency);
  const words = formatAmount(product, currency);
  if (typed === null) return { words: `comes to ${words}` };
  const off = typed - product;
  // The product is rounded here, and the bill may have cut it off: one smallest coin is no difference.
  if (Math.abs(off) <= 1) return { words: `= ${words}` };
  return { words: `comes to ${words}, ${formatAmount(off, currency, { signed: true })} off`, tone: 'fault' };
}

const figures = (typed: TypedBill): Record<string, number> =>
  Object.fromEntries(
    typed.quantities.flatMap(({ name, figure }) => {
      const value = typedQuantity(name, figure);
      return value === undefined || Number.isNaN(value) ? [] : [[name, value]];
    }),
  );

/** The energy that the peak, held through the whole period, would come to. */
function mostKwh(peakKw: number, { from, lastDay }: TypedBill): number {
  return peakKw * 24 * daysBetween(from, dayAfter(lastDay));
}

/** The peak against the energy: no month has more energy than its peak held on through every hour. */
export function peakCheck(typed: TypedBill): Check | null {
  const { kwh, maxKw } = figures(typed);
  const most = maxKw === undefined ? NaN : mostKwh(maxKw, typed);
  if (kwh === undefined || maxKw === undefined || !(most > 0)) return null;
  // The night on which the clock goes back gives a period one hour more.
  if (kwh > most + maxKw) {
    return { words: `too low: held all hours it is ${formatQuantity(most, 'kWh')}`, tone: 'fault' };
  }
  return { words: `load factor ${formatNumber(kwh / most, { decimals: 2 })}` };
}

/** The power factor against that of the two energies. */
export function factorCheck(typed: TypedBill): Check | null {
  const { kwh, kvarh, powerFactor } = figures(typed);
  if (kwh === undefined || kvarh === undefined || kwh <= 0) return null;
  const ofEnergy = kwh / Math.hypot(kwh, kvarh);
  const words = `kWh and kvarh give ${formatNumber(ofEnergy, { decimals: 2 })}`;
  const isOdd = powerFactor !== undefined && Math.abs(powerFactor - ofEnergy) > oddFactor;
  return { words, tone: isOdd ? 'warn' : undefined };
}

const meteredOf: Record<string, keyof MeteredPeriod> = {
  kwh: 'kwh',
  kvarh: 'kvarh',
  kvarhLeading: 'kvarhLeading',
  maxKw: 'maxKw',
  maxKva: 'maxKva',
};

/** A typed figure against the meter: energies by per cent, the others by the metered value. */
export function meterCheck(name: string, printed: number | undefined, metered: MeteredPeriod | null): Check | null {
  if (name === 'powerFactor') return factorOfMeter(printed, metered);
  const key = meteredOf[name];
  const value = key && metered ? metered[key] : null;
  if (!metered || typeof value !== 'number') return null;
  const { unit, decimals } = billQuantity(name);
  const shown = formatNumber(value, { decimals });
  if (metered.missing > 0) return { words: `meter ${shown} at least, readings are missing` };
  if (printed === undefined || !/h$/.test(unit) || value <= 0) return { words: `meter ${shown}` };
  return {
    words: `meter ${offInPercent(printed, value)}`,
    tone: energiesDiffer(printed, value) ? 'warn' : undefined,
  };
}

/** The metered power factor: that of the peak, or of the whole period where the printed one is nearer to it. */
function factorOfMeter(printed: number | undefined, metered: MeteredPeriod | null): Check | null {
  if (!metered || metered.missing > 0) return null;
  const { powerFactorAtPeak: atPeak, powerFactorOfPeriod: ofPeriod } = metered;
  if (atPeak === null || ofPeriod === null) return null;
  const isOfPeriod = printed !== undefined && Math.abs(printed - ofPeriod) < Math.abs(printed - atPeak);
  const shown = formatNumber(isOfPeriod ? ofPeriod : atPeak, { decimals: 2 });
  return { words: isOfPeriod ? `meter ${shown} over the period` : `meter ${shown}` };
}

/** Everything said beside a quantity, faults first. */
export function quantityChecks(typed: TypedBill, index: number, metered: MeteredPeriod | null): Check[] {
  const row = typed.quantities[index];
  if (!row) return [];
  const { name, figure } = row;
  const value = typedQuantity(name, figure);
  const isTyped = value !== undefined && !Number.isNaN(value);
  const percent: Check | null =
    isTyped && isPercent(name, figure) ? { words: `taken as ${formatNumber(value, { upTo: 4 })}` } : null;
  const own = name === 'maxKw' ? peakCheck(typed) : name === 'powerFactor' ? factorCheck(typed) : null;
  const checks = [percent, meterCheck(name, isTyped ? value : undefined, metered), own].filter((one) => one !== null);
  return checks.sort((a, b) => Number(b.tone === 'fault') - Number(a.tone === 'fault'));
}

/** The bills nearest before and after a day that print energy and money. */
function neighboursOf(from: string, others: BillView[]): BillView[] {
  const priced = others.filter((bill) => (bill.quantities.kwh ?? 0) > 0 && priceOf(bill) !== null);
  const before = priced.filter((bill) => bill.from < from).at(-1);
  const after = priced.find((bill) => bill.from > from);
  return [before, after].filter((bill) => bill !== undefined);
}

const priceOf = ({ totalMinor, linesMinor, quantities: { kwh } }: BillView) =>
  kwh ? (totalMinor ?? linesMinor) / kwh : null;

/** The average price of a kWh and what it was in the bills around; null before energy and money are typed. */
export function priceCheck(typed: TypedBill, billedMinor: number, others: BillView[], currency: string) {
  const { kwh } = figures(typed);
  if (kwh === undefined || kwh <= 0 || billedMinor === 0) return null;
  const minorPerKwh = billedMinor / kwh;
  const unitsOf = (minor: number) => minor / (minorOf(1, currency) || 1);
  const shown = (minor: number) => formatNumber(unitsOf(minor), { decimals: 4 });
  const around = neighboursOf(typed.from, others);
  const isOdd =
    around.length > 0 &&
    around.every((bill) => Math.abs(minorPerKwh / (priceOf(bill) ?? minorPerKwh) - 1) > oddPriceShare);
  const beside = around.map((bill) => `${shown(priceOf(bill) ?? 0)} in ${formatBillName(bill)}`).join(', ');
  return {
    price: shown(minorPerKwh),
    check: { words: `${currency} per kWh${beside ? `; ${beside}` : ''}`, tone: isOdd ? 'warn' : undefined } as Check,
  };
}
