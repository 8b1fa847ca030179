import { readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import {
  assumeMonth,
  monthAtPowerFactor,
  priceMonth,
  readSchedule,
  ToldError,
  type AssumedMonth,
  type Schedule,
  type ToldMonth,
} from '@/core/tariff';
import { amountsOf, buildSchedule } from './build';

const read = (id: string): Schedule => readSchedule(readFileSync(path.resolve('tariffs', `${id}.yaml`), 'utf8'));
const lp4 = read('ostrander-lp4');
const millrace = read('millrace-kva');

const february = { from: '2026-02-01', to: '2026-03-01' };
const told = (given: Partial<ToldMonth>): ToldMonth => ({
  period: february,
  quick: {},
  typed: {},
  contract: {},
  ...given,
});
const valuesOf = ({ asked }: Pick<AssumedMonth, 'asked'>) =>
  Object.fromEntries(asked.map(({ quantity, value }) => [quantity.name, value]));
const basesOf = ({ asked }: AssumedMonth) =>
  Object.fromEntries(asked.map(({ quantity, basis }) => [quantity.name, basis]));
const near = (value: number) => expect.closeTo(value, 4);

// February 2026 has 672 hours; 19 working days (Presidents' Day is none) of 8 hours on peak: 152, and 520 off peak.
const full = told({ quick: { energyKwh: 1_344_000, peakKw: 2500, powerFactor: 0.8 } });

describe('assumeMonth', () => {
  // 1,344,000 x 152 / 672 and x 520 / 672; tan(arccos 0.8) = 0.75.
  it('shares energy by the hours of the windows and takes kvarh from the power factor', () => {
    const month = assumeMonth(lp4, full);
    expect(valuesOf(month)).toEqual({
      kwhOnPeak: near(304_000),
      kwhOffPeak: near(1_040_000),
      kvarh: near(1_008_000),
      maxKw: 2500,
    });
    expect(basesOf(month)).toEqual({ kwhOnPeak: 'assumed', kwhOffPeak: 'assumed', kvarh: 'assumed', maxKw: 'quick' });
  });

  it('takes what is told for one window from the whole, and leaves the rest to the other', () => {
    const month = assumeMonth(lp4, { ...full, typed: { kwhOnPeak: 400_000 } });
    expect(valuesOf(month)).toMatchObject({ kwhOnPeak: 400_000, kwhOffPeak: near(944_000) });
    expect(basesOf(month)).toMatchObject({ kwhOnPeak: 'typed', kwhOffPeak: 'assumed' });
  });

  it('adds up the windows where they are all told and the whole is not', () => {
    const quick = { peakKw: 2500, energyKvarh: 500_000 };
    const month = assumeMonth(lp4, told({ quick, typed: { kwhOnPeak: 300_000, kwhOffPeak: 700_000 } }));
    expect(month).toMatchObject({ energyKwh: 1_000_000, kvarhPerKwh: 0.5 });
  });

  // Portugal's clock loses an hour on 29 March 2026: 743 hours. 22 working days, winter, 5 hours of peak: 110; 31 nights of 7 hours less
  // the one lost: 216; the rest 417. 1,000 kW and pf 0.8: 1,250 kVA at a peak of 1,000 kW.
  it('counts the hours of a month in which the clock changes, season by season', () => {
    const month = assumeMonth(
      millrace,
      told({
        period: { from: '2026-03-01', to: '2026-04-01' },
        quick: { energyKwh: 743_000, peakKw: 1000, powerFactor: 0.8 },
      }),
    );
    expect(valuesOf(month)).toEqual({
      kwhPeak: near(110_000),
      kwhFull: near(417_000),
      kwhNight: near(216_000),
      maxKva: near(1250),
    });
  });

  // 600 kW and 450 kvar through 31 days of 16 day hours (496): each hour 450 - 0.35 x 600 = 240 beyond the allowance. Peak 900 kW.
  it('lets the schedule settle its own formulas hour by hour', () => {
    const month = assumeMonth(
      read('tidewater-kvarh'),
      told({
        period: { from: '2026-01-01', to: '2026-02-01' },
        quick: { energyKwh: 446_400, peakKw: 900, energyKvarh: 334_800 },
      }),
    );
    expect(valuesOf(month)).toEqual({ kwh: 446_400, maxKw: near(900), excessKvarh: near(119_040), leadNight: 0 });
  });

  it('says what to type where something is not told', () => {
    const month = assumeMonth(lp4, told({ quick: { energyKwh: 1000 } }));
    const words = Object.fromEntries(month.asked.map(({ quantity, words: how }) => [quantity.name, how]));
    expect(valuesOf(month)).toMatchObject({ maxKw: null, kvarh: null });
    expect(words).toMatchObject({ maxKw: 'type the kW', kvarh: 'type kvarh or the power factor' });
  });

  it('takes a given power factor from the month, and the default of what else the bill would say', () => {
    const schedule = buildSchedule(`quantities:
  kwh: { sum: kwh }
  pf: { given: pf, unity: 1 }
  heat: { given: GJ, default: 4 }
charges:
  energy: { per: kwh, rate: 0.1, group: energy }
  penalty: { amount: 100, when: pf < 0.9, group: reactive }
  warmth: { per: heat, rate: 2, group: energy }`);
    const month = assumeMonth(schedule, told({ quick: { energyKwh: 1000, powerFactor: 0.85 } }));
    expect(valuesOf(month)).toEqual({ kwh: 1000, pf: near(0.85), heat: 4 });
    expect(basesOf(month)).toEqual({ kwh: 'quick', pf: 'assumed', heat: 'default' });
  });

  it('refuses figures that contradict one another, at the field to change', () => {
    const fault = (given: Partial<ToldMonth>) => {
      try {
        assumeMonth(lp4, told(given));
        return null;
      } catch (error) {
        return error instanceof ToldError ? [error.field, error.message] : error;
      }
    };
    // 1,344,000 kWh in 672 hours are 2,000 kW on average.
    expect(fault({ quick: { energyKwh: 1_344_000, peakKw: 1999 } })).toEqual([
      'peakKw',
      expect.stringContaining('2,000 kW'),
    ]);
    // 600 kvarh to 800 kWh: 0.8.
    expect(fault({ quick: { energyKwh: 800, energyKvarh: 600, powerFactor: 0.85 } })).toEqual([
      'powerFactor',
      expect.stringContaining('0.800'),
    ]);
    expect(fault({ quick: { energyKwh: 1000 }, typed: { kwhOnPeak: 1200 } })).toEqual([
      'energyKwh',
      expect.stringContaining('1,200'),
    ]);
    expect(fault({ quick: { energyKwh: 1000 }, typed: { kwhOnPeak: 200, kwhOffPeak: 700 } })).toEqual([
      'energyKwh',
      expect.stringContaining('come to 900, not 1,000'),
    ]);
    expect(fault({ quick: { energyKwh: 0, energyKvarh: 5 } })).toEqual(['energyKwh', expect.any(String)]);
  });

  it('names what the period cannot be priced for', () => {
    const before = told({ period: { from: '2024-02-01', to: '2024-03-01' }, quick: { energyKwh: 1000, peakKw: 5 } });
    expect(() => assumeMonth(lp4, before)).toThrow('the schedule is in force from 2024-10-01 on');
    expect(() => assumeMonth(lp4, { ...full, contract: { contractKw: 1 } })).toThrow('between 500 and 20,000 kW');
  });
});

describe('priceMonth', () => {
  // 2,000 kW throughout at pf 0.8 is the bill worked line by line in library.test.ts: 101,337.37, at unity 96,551.01.
  const steady = told({ quick: { energyKwh: 1_344_000, peakKw: 2000, powerFactor: 0.8 } });

  it('prices what was told in short like the month it stands for', () => {
    const month = assumeMonth(lp4, steady);
    const { bill } = priceMonth(lp4, steady, month, {});
    expect(bill.total).toBe(101_337.37);
    const unity = priceMonth(lp4, steady, monthAtPowerFactor(lp4, steady, month, 1), {});
    expect(unity.bill.total).toBe(96_551.01);
  });

  // At 0.95 the demand is no longer adjusted: that is the bill at unity.
  it('prices it again with the field raised', () => {
    const month = assumeMonth(lp4, steady);
    const raised = monthAtPowerFactor(lp4, steady, month, 0.95);
    // 1,344,000 x tan(arccos 0.95) = 1,344,000 x 0.3286841.
    expect(valuesOf(raised)).toMatchObject({ kvarh: expect.closeTo(441_751.4, 0), maxKw: 2000 });
    expect(priceMonth(lp4, steady, raised, {}).bill.total).toBe(96_551.01);
  });

  // Millrace, January 2026, winter: 744 hours, 1,000 kW at pf 0.8, 1,250 kVA. Told 2,000 kVA of every earlier month: 0.75 x 2,000 = 1,500,
  // times 6.90 = 10,350.00; settled at 1,250: 0.60 x 1,800 = 1,080 is less, 1,250 x 6.90 = 8,625.00.
  it('takes earlier months to be like this one unless told', () => {
    const input = told({
      period: { from: '2026-01-01', to: '2026-02-01' },
      quick: { energyKwh: 744_000, peakKw: 1000, powerFactor: 0.8 },
    });
    const month = assumeMonth(millrace, input);
    const settled = priceMonth(millrace, input, month, {});
    expect(settled.lookBacks).toEqual([
      { name: 'maxKva', label: 'Highest apparent power', unit: 'kVA', months: 11, value: near(1250), basis: 'assumed' },
    ]);
    expect(amountsOf(settled.bill)['power']).toBe(8625);
    const ratcheted = priceMonth(millrace, input, month, { maxKva: 2000 });
    expect(ratcheted.lookBacks[0]).toMatchObject({ value: 2000, basis: 'typed' });
    expect(amountsOf(ratcheted.bill)['power']).toBe(10_350);
  });

  it('moves what was typed with the power factor, down to what it is at unity', () => {
    const input = told({
      period: { from: '2026-01-01', to: '2026-02-01' },
      quick: { energyKwh: 744_000, peakKw: 1000, powerFactor: 0.8 },
      typed: { maxKva: 1350 },
    });
    const month = assumeMonth(millrace, input);
    const kvaAt = (factor: number) => valuesOf(monthAtPowerFactor(millrace, input, month, factor))['maxKva'];
    expect(kvaAt(0.8)).toEqual(near(1350));
    expect(kvaAt(1)).toEqual(near(1000));
    // Assumed 1,250 here and 1,000 / 0.95 = 1,052.632 there: 1,000 + 350 x 52.632 / 250.
    expect(kvaAt(0.95)).toEqual(expect.closeTo(1073.684, 2));
  });

  // 2,000 kVA at pf 0.8 are 1,600 kW; at 0.95 these are 1,684.21 kVA.
  it('takes the peak from the kVA a bill prints where it prints no kW', () => {
    const input = told({
      period: { from: '2026-01-01', to: '2026-02-01' },
      quick: { energyKwh: 744_000, powerFactor: 0.8 },
      typed: { maxKva: 2000 },
    });
    const month = assumeMonth(millrace, input);
    expect(month.peakKw).toEqual(near(1600));
    expect(valuesOf(monthAtPowerFactor(millrace, input, month, 0.95))['maxKva']).toEqual(expect.closeTo(1684.21, 2));
  });

  it('needs the month to have a power factor before another is asked', () => {
    const input = told({ quick: { energyKwh: 1000, peakKw: 5 } });
    expect(() => monthAtPowerFactor(lp4, input, assumeMonth(lp4, input), 0.95)).toThrow(
      'month must have a power factor',
    );
  });

  it('names the quantity a line waits for', () => {
    const input = told({ quick: { energyKwh: 1000, powerFactor: 0.9 } });
    expect(() => priceMonth(lp4, input, assumeMonth(lp4, input), {})).toThrow(
      expect.objectContaining({ name: 'maxKw' }),
    );
  });
});
