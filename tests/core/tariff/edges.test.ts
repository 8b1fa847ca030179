import { describe, expect, it } from 'vitest';
import { priceBills, priceQuantities, PriceError } from '@/core/tariff';
import { amountsOf, buildSchedule, buildSeries, problemsOf, valuesOf } from './build';

// Amounts worked by hand from the text of the language.

const march = { from: '2026-03-01', to: '2026-04-01' };
const energy = 'quantities:\n  kwh: { sum: kwh }\n  kvarh: { sum: kvarhLagging }\n';

describe('a formula that has no value', () => {
  it('harms no line that is not charged', () => {
    const schedule = buildSchedule(
      `${energy}charges:
  reactive: { per: kvarh, rate: 100 / kwh, when: kwh > 0, group: reactive }
  share: { amount: 10 / kwh, when: kwh > 0, group: fixed }`,
    );
    const [bill] = priceQuantities(schedule, [{ ...march, quantities: { kwh: 0, kvarh: 5 } }]);
    expect(amountsOf(bill)).toEqual({ reactive: 0, share: 0 });
    expect(bill!.lines[0]).not.toHaveProperty('rate');
    expect(bill!.lines[0]!.explanation).toBe('Reactive: not charged, "kwh > 0" does not hold: kwh is 0.');
  });

  it('as a rate harms no line whose quantity is 0, in pieces too', () => {
    const schedule = buildSchedule(
      `${energy}charges:
  reactive: { per: kvarh, rate: 100 / kwh, group: reactive }
versions:
  2026-03-16: { charges: { reactive: { rate: 200 / kwh } } }`,
    );
    const [bill] = priceQuantities(schedule, [{ ...march, quantities: { kwh: 0, kvarh: 0 } }]);
    expect(bill!.total).toBe(0);
  });

  it('is told with bill and place where it counts', () => {
    const schedule = buildSchedule(`${energy}charges:\n  fee: { amount: 10 / kwh, group: fixed }`);
    const rows = [{ ...march, quantities: { kwh: 0 } }];
    expect(() => priceQuantities(schedule, rows)).toThrow(PriceError);
    expect(() => priceQuantities(schedule, rows)).toThrow(
      'March 2026: charges.fee.amount: the formula divides by zero (characters 1 to 8).',
    );
  });

  it('says so where only the bill at unity power factor has it', () => {
    const schedule = buildSchedule(
      `${energy}  hours1: { formula: kwh / kvarh, unit: points }\ncharges:\n  fee: { amount: hours1, group: fixed }`,
    );
    expect(() => priceQuantities(schedule, [{ ...march, quantities: { kwh: 5, kvarh: 5 } }])).toThrow(
      'March 2026, at unity power factor: quantities.hours1.formula: the formula divides by zero',
    );
  });

  it('gives way to the figure the bill prints', () => {
    const schedule = buildSchedule(
      `${energy}  billed: { formula: kvarh / kwh, unit: kW }\ncharges:\n  demand: { per: billed, rate: 2, group: demand }`,
    );
    const [bill] = priceQuantities(schedule, [{ ...march, quantities: { kwh: 0, kvarh: 5, billed: 7 } }]);
    expect(bill).toMatchObject({ total: 14, reactiveCost: 0 });
  });
});

describe('at unity from printed figures', () => {
  it('the kVA of the instant of the highest kW is that kW', () => {
    const schedule = buildSchedule(
      'quantities:\n  maxKw: { highest: kw }\n  kvaThen: { value: kva, at: maxKw }\ncharges:\n  demand: { per: kvaThen, rate: 2, group: demand }',
    );
    const [bill] = priceQuantities(schedule, [{ ...march, quantities: { maxKw: 300, kvaThen: 500 } }]);
    expect(bill).toMatchObject({ total: 1000, reactiveCost: 400 });
  });

  it('what rests on a figure nobody gives keeps what the bill prints', () => {
    const schedule = buildSchedule(
      'quantities:\n  maxKw: { highest: kw }\n  agreed: { given: kW }\n  billed: { formula: max(maxKw; agreed), unit: kW }\ncharges:\n  demand: { per: billed, rate: 1, group: demand }',
    );
    // Whether 7 kW was metered or agreed cannot be told: it is no saving.
    const [bill] = priceQuantities(schedule, [{ ...march, quantities: { maxKw: 5, billed: 7 } }]);
    expect(bill).toMatchObject({ total: 7, reactiveCost: 0 });
    expect(bill!.notes).toContain(
      'At unity power factor "billed" cannot be told from the figures printed: it keeps 7 kW.',
    );
  });
});

describe('at unity from intervals', () => {
  it('what only that run lacks is not noted on the bill', () => {
    const schedule = buildSchedule(
      'quantities:\n  lagKw: { highest: kw, where: kvarLagging > 10 }\ncharges:\n  demand: { per: lagKw, rate: 1, group: demand }',
      { demandWindow: '60 min' },
    );
    const load = buildSeries({ ...march, timeZone: 'Europe/Lisbon', stepMinutes: 60, powers: () => [50, 20, 0] });
    const [bill] = priceBills(schedule, load, { periods: [march] });
    expect(bill).toMatchObject({ total: 50, reactiveCost: 50, notes: [] });
  });
});

describe('versions that add', () => {
  const text = `contract:
  firm: { unit: kW, default: 10 }
rates:
  base: 0.1
windows:
  peak: { days: every day, hours: 10:00-20:00 }
  offPeak: { rest: peak }
quantities:
  kwh: { sum: kwh, inEach: [peak, offPeak] }
charges:
  energy: { per: kwh, rate: base, group: energy }
  fixed: { amount: firm, group: fixed }
versions:
  2026-03-01:
    contract: { more: { unit: kW, default: 5, before: end } }
    rates: { step: 0.2, base: 2 * step }
    windows:
      shoulder: { days: every day, hours: 06:00-10:00 }
      offPeak: { rest: [peak, shoulder] }
      night: { days: every day, hours: 00:00-01:00, before: peak }
    quantities:
      kwh: { inEach: [peak, shoulder, offPeak] }
      atNight: { sum: kwh, in: night, before: end }
    charges:
      fixed: { amount: firm + more + atNight }`;
  const load = buildSeries({
    from: '2026-02-28',
    to: '2026-03-02',
    timeZone: 'Europe/Lisbon',
    stepMinutes: 60,
    powers: () => [1, 0, 0],
  });

  it('windows, rates and contract inputs let what follows use them', () => {
    const [before, after] = priceBills(buildSchedule(text), load, {
      periods: [
        { from: '2026-02-28', to: '2026-03-01' },
        { from: '2026-03-01', to: '2026-03-02' },
      ],
    });
    expect(amountsOf(before)).toEqual({ energyPeak: 1, energyOffPeak: 1.4, fixed: 10 });
    expect(valuesOf(after)).toMatchObject({ kwhPeak: 10, kwhShoulder: 4, kwhOffPeak: 10, atNight: 1 });
    // 0.40 a kWh; 10 + 5 + 1.
    expect(amountsOf(after)).toEqual({ energyPeak: 4, energyShoulder: 1.6, energyOffPeak: 4, fixed: 16 });
  });

  it('say where quantities and lines stand', () => {
    const broken = text.replace(', in: night, before: end', ', in: night');
    expect(problemsOf(() => buildSchedule(broken)).map(({ path, message }) => `${path} ${message}`)).toEqual([
      'versions.2026-03-01.quantities.atNight is new in this version but does not say where it stands.',
    ]);
  });
});

describe('looking back at lines by window', () => {
  const text = (past: string): string => `windows:
  peak: { days: weekdays, hours: 10:00-20:00 }
  offPeak: { rest: peak }
quantities:
  kwh: { sum: kwh, inEach: [peak, offPeak] }
  before: { past: ${past}, take: sum, over: last 2 periods, unit: EUR }
charges:
  energy: { per: kwh, rate: 0.1, group: energy }
  fee: { amount: 0.01 * before, group: fixed }`;

  it('takes a member, as billed then', () => {
    const rows = [100, 200, 300].map((kwhPeak, i) => ({
      from: `2026-0${i + 1}-01`,
      to: `2026-0${i + 2}-01`,
      quantities: { kwhPeak, kwhOffPeak: 10 },
    }));
    const bills = priceQuantities(buildSchedule(text('energyPeak + energyOffPeak')), rows);
    expect(bills.map((bill) => valuesOf(bill)['before'])).toEqual([0, 11, 32]);
  });

  it('refuses the whole of it, which would be 0 for ever, and names nobody bears', () => {
    const told = (past: string): string[] =>
      problemsOf(() => buildSchedule(text(past))).map(({ message, remedy }) => `${message} ${remedy}`);
    expect(told('energy')).toEqual([
      '"energy" is made below, one value per window. Name the members: energyPeak + energyOffPeak.',
    ]);
    expect(told('energyPaek')).toEqual(['nothing is called "energyPaek". Did you mean "energyPeak"?']);
  });
});

describe('estimated intervals', () => {
  it('mark a mean of the highest of which they are not the first', () => {
    const load = buildSeries({
      ...march,
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (_, i) => [i === 5 ? 500 : i === 50 ? 300 : i === 99 ? 200 : 10, 0, 0],
    });
    load.quality[50] = 1;
    const schedule = buildSchedule(
      'quantities:\n  top: { highest: kw }\n  top2: { highest: kw, count: 2, days: distinct }\ncharges:\n  demand: { per: top2, rate: 1, group: demand }\n  other: { per: top, rate: 1, group: demand }',
      { demandWindow: '60 min' },
    );
    const [bill] = priceBills(schedule, load, { periods: [march] });
    expect(bill!.quantities['top2']).toMatchObject({ value: 400, isEstimated: true });
    expect(bill!.quantities['top']).not.toHaveProperty('isEstimated');
  });
});

describe('mistakes', () => {
  it('in the name of a part are told alone: what it holds stays known', () => {
    const problems = problemsOf(() =>
      buildSchedule(
        'quantites:\n  over: { sum: kwh }\ncharges:\n  fee: { per: over, rate: 1, group: energy }\n  late: { percentOf: [fee], rate: x, group: tax }',
      ),
    );
    expect(problems.map(({ path, message }) => `${path}: ${message}`)).toEqual([
      'quantites: is not a part of a schedule.',
      'charges.late.rate: nothing is called "x".',
    ]);
  });

  it('in the name of a part of a version are told alone', () => {
    const problems = problemsOf(() =>
      buildSchedule(
        'quantities:\n  kwh: { sum: kwh }\ncharges:\n  fee: { per: kwh, rate: 1, group: energy }\nversions:\n  2026-01-01: { chargs: { more: { amount: 1, group: fixed, before: end } }, currency: USD }\n  2026-02-01: { charges: { more: { amount: 2 } } }',
      ),
    );
    expect(problems.map(({ path }) => path)).toEqual(['versions.2026-01-01.chargs', 'versions.2026-01-01.currency']);
  });

  it('in the number of a mean are refused', () => {
    const problems = problemsOf(() =>
      buildSchedule(
        'quantities:\n  kw: { highest: kw }\n  top: { past: kw, take: mean of 0 highest, over: last 3 periods }\ncharges:\n  fee: { per: top, rate: 1, group: energy }',
      ),
    );
    expect(problems.map(({ message }) => message)).toEqual(['"mean of 0 highest" is nothing to take of the past.']);
  });

  it('in the price of a broken quantity are told with it', () => {
    const problems = problemsOf(() =>
      buildSchedule(
        'quantities:\n  over: { sum: kvah }\ncharges:\n  fee: { per: over, tiers: [ { to: 5, rate: 1 }, { to: 6, rate: 2 } ], group: energy }',
      ),
    );
    expect(problems.map(({ path }) => path)).toEqual(['quantities.over', 'charges.fee.tiers.2']);
  });
});
