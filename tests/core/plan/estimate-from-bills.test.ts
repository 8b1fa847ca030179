import { describe, expect, it } from 'vitest';
import type { LoadSeries } from '@/core/load';
import {
  createSimulator,
  estimateFromBills,
  layOutBills,
  type BillsEstimate,
  type PlanMotor,
  type PlanSetup,
} from '@/core/plan';
import { priceBills, type PrintedRow, type Schedule } from '@/core/tariff';
import { buildMotor } from '../machine/build-motor';
import { randomOf } from '../tariff/bound/build-box';
import { buildSchedule, buildSeries } from '../tariff/build';

const utc = { timeZone: 'UTC', demandWindow: '15 min', zeroKwh: '{ pf: 1 }' };
const march = { from: '2026-03-01', to: '2026-04-01' };

/** Estimates a plan of capacitors alone: their kvar and losses are known without any machine. */
function withBank(schedule: Schedule, quantities: Record<string, number>, kvar: number): BillsEstimate {
  const basis = { schedule, rows: [{ ...march, quantities }], options: {} };
  const year = layOutBills(basis);
  const setup: PlanSetup = { controls: [], banks: [{ steps: 1, stepKvar: kvar, lossWPerKvar: 2 }] };
  return estimateFromBills({ ...basis, year, plant: { load: year.evenLoad, motors: [] }, setup });
}

describe('estimateFromBills, by hand', () => {
  // March 2026 in UTC has 744 hours. A bank of 300 kvar with 2 W/kvar delivers 223,200 kvarh and draws 0.6 kW, 446.4 kWh.
  const kvarhTariff = buildSchedule(
    `quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
  over: { formula: excess(kvarh; 0.5 * kwh), unit: kvarh }
charges:
  demand: { per: maxKw, rate: 10, group: demand }
  energy: { per: kwh, rate: 0.10, group: energy }
  reactive: { per: over, rate: 0.02, group: reactive }`,
    utc,
  );

  it('takes what is delivered off the lagging energy: at best in even hours, at worst in hours that draw none', () => {
    const estimate = withBank(kvarhTariff, { kwh: 372_000, kvarh: 334_800, maxKw: 800 }, 300);
    // Before: 8,000 + 37,200 + (334,800 - 186,000) x 0.02 = 2,976, total 48,176.00.
    expect(estimate.standing).toBeCloseTo(48_176, 2);
    // After, even: 334,800 - 223,200 = 111,600 kvarh, below half of 372,446.4 kWh; 800.6 kW. 8,006 + 37,244.64 = 45,250.64.
    expect(estimate.total.best).toBeCloseTo(45_250.64, 2);
    expect(estimate.total.low).toBeCloseTo(45_250.64, 2);
    // At worst none of it meets lagging energy: (334,800 - 186,223.2) x 0.02 = 2,971.54 more.
    expect(estimate.total.high).toBeCloseTo(48_222.18, 2);
    expect(estimate.saving.best).toBeCloseTo(2925.36, 2);
    expect(estimate.saving.low).toBeCloseTo(-46.18, 2);
    expect(estimate.widths).toEqual([{ doubt: 'netting', width: expect.closeTo(2971.54, 2) as number }]);
  });

  it('names the leading energy that is left over', () => {
    const withLead = buildSchedule(
      `quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  lead: { sum: kvarhLeading }
charges:
  energy: { per: kwh, rate: 0.10, group: energy }
  lagging: { per: kvarh, rate: 0.01, group: reactive }
  leading: { per: lead, rate: 0.03, group: reactive }`,
      utc,
    );
    const { bills } = withBank(withLead, { kwh: 372_000, kvarh: 100_000, lead: 5000 }, 300);
    const [, lagging, leading] = bills[0]!.quantities;
    // Delivered 223,200: at best for the register all 100,000 are met and 123,200 lead besides the 5,000; at worst nothing is met.
    expect(lagging!.after).toMatchObject({ low: 0, high: 100_000 });
    expect(leading!.after.low).toBeCloseTo(128_200, 6);
    expect(leading!.after.high).toBeCloseTo(228_200, 6);
  });

  it('takes the highest kVA apart by the powers it may have been made of', () => {
    const kvaTariff = buildSchedule(
      `quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw }
  maxKva: { highest: kva }
charges:
  demand: { per: maxKva, rate: 10, group: demand }
  energy: { per: kwh, rate: 0.10, group: energy }
  power: { per: maxKw, rate: 1, group: demand }`,
      utc,
    );
    const { bills, widths } = withBank(kvaTariff, { kwh: 372_000, maxKw: 800, maxKva: 1000 }, 300);
    const after = bills[0]!.quantities.find(({ name }) => name === 'maxKva')!.after;
    // 800 kW and 600 kvar become 800.6 and 300: 854.96 kVA. 500 kW, the mean, and 866.03 kvar become 500.6 and 566.03: 755.64 kVA.
    expect(after.best).toBeCloseTo(854.96, 2);
    expect(after.high).toBeCloseTo(854.96, 2);
    expect(after.low).toBeCloseTo(755.64, 2);
    expect(widths[0]!.doubt).toBe('moment');
    expect(widths[0]!.width).toBeCloseTo(993.3, 1);
  });

  it('reads the reactive energy behind a printed power factor, and works the factor out again', () => {
    const pfTariff = buildSchedule(
      `quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
  pf: { formula: pf(kwh; kvarh), round: 0.01 }
  billedKw: { formula: maxKw * max(1; 0.95 / pf), unit: kW, round: 0.1 }
charges:
  demand: { per: billedKw, rate: 10, group: demand }
  energy: { per: kwh, rate: 0.10, group: energy }`,
      utc,
    );
    const { standing, total, bills } = withBank(pfTariff, { kwh: 372_000, maxKw: 800, pf: 0.8 }, 300);
    // Before: 800 x 0.95/0.80 = 950 kW, 9,500 + 37,200.
    expect(standing).toBeCloseTo(46_700, 2);
    // 372,000 x tan(arccos 0.80) = 279,000 kvarh, of which 55,800 are left: pf 0.99, no more than 800.6 kW: 8,006 + 37,244.64.
    expect(bills[0]!.quantities.find(({ name }) => name === 'kvarh')!.after.best).toBeCloseTo(55_800, 6);
    expect(total.best).toBeCloseTo(45_250.64, 2);
    // At worst the 279,000 stay, and up to what 0.795 stands for, 283,807: pf 0.795 of 372,446, which rounds to 0.80: 950.7 kW, 9,507.
    expect(total.high).toBeCloseTo(9507 + 37_244.64, 2);
  });

  it('keeps a look back that a month before the bills set', () => {
    const ratchet = buildSchedule(
      `quantities:
  kwh: { sum: kwh }
  maxKva: { highest: kva }
  yearKva: { past: maxKva, take: highest, over: this and last 11 periods }
charges:
  demand: { per: yearKva, rate: 10, group: demand }
  energy: { per: kwh, rate: 0.10, group: energy }`,
      utc,
    );
    const kept = withBank(ratchet, { kwh: 372_000, maxKva: 1000, yearKva: 1400 }, 300);
    // The ratchet of 1,400 kVA stands: 14,000 + 37,244.64.
    expect(kept.total.best).toBeCloseTo(51_244.64, 2);
    const own = withBank(ratchet, { kwh: 372_000, maxKva: 1000, yearKva: 1000 }, 300);
    // Set by the month itself it falls with the month's own: no highest kW is printed, so the mean 500 kW stand for it at best.
    // 866.03 - 300 = 566.03 kvar with 500.6 kW: 755.64 kVA, 7,556.40 + 37,244.64.
    expect(own.total.best).toBeCloseTo(44_801.04, 0);
  });
});

describe('estimateFromBills beside the year that was metered', () => {
  const schedule = buildSchedule(
    `windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
  low: { rest: peak }
quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  allKwh: { formula: total(kwh), unit: kWh }
  kvarh: { sum: kvarhLagging }
  lead: { sum: kvarhLeading, in: low }
  maxKw: { highest: kw }
  maxKva: { highest: kva }
  pf: { formula: pf(allKwh; kvarh), round: 0.01 }
  over: { formula: excess(kvarh; 0.4 * allKwh), unit: kvarh }
  points: { formula: 100 * excess(0.95; pf), unit: points }
  yearKva: { past: maxKva, take: highest, over: this and last 11 periods }
charges:
  service: { amount: 400, group: fixed }
  demand: { per: yearKva, rate: 9, group: demand }
  energy: { per: kwh, rate: { peak: 0.12, low: 0.08 }, group: energy }
  reactive: { per: over, rate: 0.02, group: reactive }
  leading: { per: lead, rate: 0.01, group: reactive }
  slope: { percentOf: [demand], per: points, rate: 1, group: reactive }
  tax: { percentOf: all above, rate: 20, group: tax }`,
    utc,
  );
  const periods = [
    { from: '2026-03-01', to: '2026-03-15' },
    { from: '2026-03-15', to: '2026-04-01' },
  ];

  /** A plant whose reactive power is at least its motors' own, and whose highest kVA draws between mean and highest power. */
  function plantLoad(seed: number, motor: PlanMotor, standing: { kw: Float64Array; kvar: Float64Array }): LoadSeries {
    const random = randomOf(seed);
    const restKw = 800 + 1500 * random();
    const restKvar = 200 + 900 * random();
    const swing = 0.7 * random();
    return buildSeries({
      from: '2026-03-01',
      to: '2026-04-01',
      timeZone: 'UTC',
      stepMinutes: 15,
      powers: (local, i) => {
        const day = 1 + swing * Math.sin(((local.getUTCHours() - 8) * Math.PI) / 12) + 0.05 * random();
        const runs = motor.shaftKw[i]! > 0 ? 1 : 0;
        return [
          restKw * day + runs * standing.kw[1]!,
          restKvar * day * (0.6 + 0.4 * random()) + runs * standing.kvar[1]!,
          0,
        ];
      },
    });
  }

  it('holds the bills that the same plan makes of the readings', () => {
    let held = 0;
    let narrower = 0;
    for (let seed = 1; seed <= 40; seed++) {
      const random = randomOf(seed * 7919);
      const empty = buildSeries({
        from: '2026-03-01',
        to: '2026-04-01',
        timeZone: 'UTC',
        stepMinutes: 15,
        powers: () => [0, 0, 0],
      });
      const [starts, ends] = [Math.floor(6 * random()), 16 + Math.floor(8 * random())];
      const shaftKw = Float64Array.from(empty.kwh, (_, i) => {
        const hour = ((i % 96) / 4) | 0;
        return hour >= starts && hour < ends ? 1200 : 0;
      });
      const motor: PlanMotor = { motor: buildMotor(), shaftKw, standingFieldA: 95 };
      const { standing } = createSimulator({ load: empty, motors: [motor] }).placed[0]!;
      const load = plantLoad(seed, motor, standing);
      const setup: PlanSetup = {
        controls: [[{ holds: 'field-current', fieldCurrentA: 100 + Math.floor(40 * random()) }]],
      };
      const metered = priceBills(schedule, load, { periods });
      const planned = priceBills(schedule, createSimulator({ load, motors: [motor] }).apply(setup.controls), {
        periods,
      });
      const printed = ['kwhPeak', 'kwhLow', 'kvarh', 'lead', 'maxKw', 'maxKva', 'pf', 'yearKva'];
      const rows = metered.map((bill, i): PrintedRow => ({
        ...periods[i]!,
        quantities: Object.fromEntries(printed.map((name) => [name, bill.quantities[name]!.value])),
      }));
      const basis = { schedule, rows, options: {} };
      const year = layOutBills(basis);
      expect(year.evenLoad.kwh.length).toBe(load.kwh.length);
      const estimate = estimateFromBills({ ...basis, year, plant: { load: year.evenLoad, motors: [motor] }, setup });
      for (const [i, bill] of estimate.bills.entries()) {
        expect(bill.standing).toBeCloseTo(metered[i]!.total, 2);
        expect(planned[i]!.total).toBeGreaterThanOrEqual(bill.total.low - 0.01);
        expect(planned[i]!.total).toBeLessThanOrEqual(bill.total.high + 0.01);
        for (const { name, after } of bill.quantities) {
          const value = planned[i]!.quantities[name]!.value;
          expect(value, name).toBeGreaterThanOrEqual(after.low - 1e-6);
          expect(value, name).toBeLessThanOrEqual(after.high + 1e-6);
          held++;
        }
        if (bill.total.high - bill.total.low < 0.2 * bill.standing) narrower++;
      }
    }
    expect(held).toBeGreaterThan(400);
    expect(narrower).toBeGreaterThan(40);
  });
});
