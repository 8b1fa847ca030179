import type { BillingPeriod } from '../load';
import { PriceError } from './errors';
import type { Schedule, ScheduleExample } from './model';
import { priceBills } from './price/compile-pricing';
import { priceQuantities } from './price/price-quantities';
import type { PricedBill } from './types';

/** How a worked bill of a schedule compares with what the schedule makes of it. */
export interface ExampleResult {
  title: string;
  source?: string;
  period: BillingPeriod;
  /** Path of the example in the file: `examples.1`. */
  path: string;
  /** `found` is null where the bill has no such figure, or could not be priced. */
  figures: { name: string; expected: number; found: number | null; fits: boolean }[];
  /** Whether the bill could be priced and every figure fits. */
  fits: boolean;
  /** Why the bill could not be priced, in the words of the PriceError. */
  problem?: string;
  bill?: PricedBill;
}

/** Prices the worked bills a schedule carries and compares the figures they must give, in the order of the file. */
export function checkExamples(schedule: Schedule): ExampleResult[] {
  return schedule.examples.map((example) => {
    const { title, source, path, from, to } = example;
    const about = { title, ...(source !== undefined && { source }), period: { from, to }, path };
    try {
      const bill = priceExample(schedule, example);
      const figures = example.expect.map(({ name, value, tolerance }) => {
        const found = figureOf(bill, name);
        return { name, expected: value, found, fits: found !== null && Math.abs(found - value) <= tolerance };
      });
      return { ...about, figures, fits: figures.every((figure) => figure.fits), bill };
    } catch (error) {
      if (!(error instanceof PriceError)) throw error;
      const figures = example.expect.map(({ name, value }) => ({ name, expected: value, found: null, fits: false }));
      return { ...about, figures, fits: false, problem: error.message };
    }
  });
}

function priceExample(schedule: Schedule, example: ScheduleExample): PricedBill {
  const { from, to, contract, history, quantities, readings } = example;
  if (!readings) return priceQuantities(schedule, [{ from, to, quantities }], { contract, history })[0]!;
  const { startMs, stepMinutes, kwh } = readings;
  const load = {
    startMs,
    stepMinutes,
    kwh: Float64Array.from(kwh),
    kvarhLagging: Float64Array.from(readings.kvarhLagging),
    kvarhLeading: Float64Array.from(readings.kvarhLeading),
    quality: new Uint8Array(kwh.length),
  };
  return priceBills(schedule, load, { periods: [{ from, to }], contract, history, given: [quantities] })[0]!;
}

function figureOf(bill: PricedBill, name: string): number | null {
  if (name === 'total' || name === 'reactiveCost') return bill[name];
  const quantity = Object.hasOwn(bill.quantities, name) ? bill.quantities[name] : undefined;
  return bill.lines.find(({ id }) => id === name)?.amount ?? quantity?.value ?? null;
}
