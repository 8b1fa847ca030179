import { describe, expect, it } from 'vitest';
import { priceBills, priceQuantities, readSchedule } from '@/core/tariff';
import { amountsOf, buildSchedule, buildSeries, problemsOf } from './build';

const base = `
seasons:
  summer: 05-01 to 10-31
  winter: rest
rates:
  fuel: { months: { 2026-06: 0.01, 2026-07: 0.02 } }
  share: 0.4
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw }
  over: { formula: excess(kvarh; share * kwh), unit: kvarh }
charges:
  service: { amount: 30, group: fixed }
  demand: { per: maxKw, rate: { summer: 3, winter: 2 }, group: demand }
  energy: { per: kwh, rate: 0.10, group: energy }
  fuelRider: { per: kwh, rate: fuel, group: adjustment }
  reactive: { per: over, rate: 0.02, group: reactive }
  tax: { percentOf: all above, rate: 5, group: tax }
versions:
  2026-07-01:
    note: Sheet 2
    rates: { share: 0.3, fuel: { months: { 2026-08: 0.03 } } }
    charges:
      service: removed
      demand: { rate: { summer: 6 } }
      energy: { tiers: [ { to: 500, rate: 0.10 }, { rate: 0.20 } ] }
      levy: { amount: 7, group: tax, before: tax }
      bonus: { percentOf: [energy], rate: -1, group: adjustment, before: end }
`;
const row = { quantities: { kwh: 1000, kvarh: 500, maxKw: 10 } };
const june = { from: '2026-06-01', to: '2026-07-01', ...row };
const july = { from: '2026-07-01', to: '2026-08-01', ...row };
const august = { from: '2026-08-01', to: '2026-09-01', ...row };

describe('versions', () => {
  it('change fields, add and remove entries from their day on', () => {
    const [before, after, later] = priceQuantities(buildSchedule(base), [june, july, august]);
    // 5 % of 30 + 30 + 100 + 10 + 2.
    expect(amountsOf(before)).toEqual({ service: 30, demand: 30, energy: 100, fuelRider: 10, reactive: 2, tax: 8.6 });
    // 50 + 100; 500 - 300 = 200 kvarh; 5 % of 60 + 150 + 20 + 4 + 7; the bonus stands after the tax.
    expect(amountsOf(after)).toEqual({
      demand: 60,
      energy: 150,
      fuelRider: 20,
      reactive: 4,
      levy: 7,
      tax: 12.05,
      bonus: -1.5,
    });
    expect(after!.lines.map(({ id }) => id)).toEqual([
      'demand',
      'energy',
      'fuelRider',
      'reactive',
      'levy',
      'tax',
      'bonus',
    ]);
    expect(amountsOf(later)['fuelRider']).toBe(30);
  });

  it('keep the season they do not speak of', () => {
    const winter = priceQuantities(buildSchedule(base.replace('2026-08: 0.03', '2026-12: 0.03')), [
      { ...june, from: '2026-12-01', to: '2027-01-01' },
    ]);
    expect(amountsOf(winter[0])['demand']).toBe(20);
  });

  it('change a quantity into another kind', () => {
    const changed = base
      .replace(
        '    charges:',
        '    quantities:\n      over: { pick: kvarh, from: { 400: 100 }, otherwise: 0, unit: kvarh }\n    charges:',
      )
      .replace('share: 0.3, ', '');
    const [, after] = priceQuantities(buildSchedule(changed), [june, july]);
    expect(amountsOf(after)['reactive']).toBe(2);
  });

  it('add to a percentage what it is taken per, and turn it into another charge only where they say so', () => {
    const text = (change: string): string => `quantities:
  kwh: { sum: kwh }
  points: { formula: kwh / 500, unit: points }
charges:
  energy: { per: kwh, rate: 0.10, group: energy }
  extra: { percentOf: energy, rate: 2, group: reactive }
versions:
  2026-07-01: { charges: { extra: { ${change} } } }
`;
    const extras = (change: string): (number | undefined)[] =>
      priceQuantities(buildSchedule(text(change)), [june, july]).map((bill) => amountsOf(bill)['extra']);
    // 2 % of 100.00; 2 points of 3 % each; 2 points of 7.00 each.
    expect(extras('per: points, rate: 3')).toEqual([2, 6]);
    expect(extras('percentOf: removed, per: points, rate: 7')).toEqual([2, 14]);
  });

  it('replace lists and windows whole, and are checked like a file', () => {
    const broken = base.replace('{ to: 500, rate: 0.10 }, { rate: 0.20 }', '{ to: 500, rate: 0.10 }');
    const [problem] = problemsOf(() => buildSchedule(broken));
    expect(problem).toMatchObject({
      path: 'versions.2026-07-01.charges.energy.tiers.1',
      message: 'the last tier has an upper end.',
    });
  });

  it.each([
    [
      '      bonus: { percentOf: [energy], rate: -1, group: adjustment, before: nowhere }',
      'nothing in charges is called "nowhere".',
    ],
    ['      tax: { rate: 6, before: levy }', 'is said of an entry that is there already.'],
    ['      energi: removed', 'is not there to be removed. Did you mean "energy"?'],
  ])('refuse %s', (line, words) => {
    const broken = base.replace('      bonus: { percentOf: [energy], rate: -1, group: adjustment, before: end }', line);
    expect(
      problemsOf(() => buildSchedule(broken))
        .map(({ message, remedy }) => `${message} ${remedy}`.trim())
        .join(),
    ).toContain(words);
  });

  it('refuse a place said outside a version', () => {
    const broken = base.replace('rate: 5, group: tax', 'rate: 5, group: tax, before: energy');
    expect(problemsOf(() => buildSchedule(broken))[0]).toMatchObject({
      path: 'charges.tax.before',
      message: 'is said outside a version.',
    });
  });

  it('refuse a date that is none or before the schedule', () => {
    expect(problemsOf(() => buildSchedule(base.replace('2026-07-01:', '2026-7-1:')))[0]).toMatchObject({
      message: '"2026-7-1" is not a date.',
    });
    expect(problemsOf(() => buildSchedule(base, { inForce: '2026-07-01' }))[0]).toMatchObject({
      message: 'does not lie after inForce, 2026-07-01.',
    });
    expect(problemsOf(() => buildSchedule(base.replace('    note: Sheet 2', '    currency: USD')))[0]).toMatchObject({
      path: 'versions.2026-07-01.currency',
    });
  });
});

describe('a bill across two texts', () => {
  const across = { from: '2026-06-16', to: '2026-07-16', ...row };

  it('by days works each line out under each text with the whole quantities', () => {
    const [bill] = priceQuantities(buildSchedule(base), [across]);
    // Half and half: service 15; demand (30 + 60) / 2; energy (100 + 150) / 2; fuel (10 + 20) / 2; reactive (2 + 4) / 2; levy 3.50;
    // bonus -1 % of the second half of energy, 75; tax 5 % of what stands above it in each piece.
    expect(amountsOf(bill)).toEqual({
      service: 15,
      demand: 45,
      energy: 125,
      fuelRider: 15,
      reactive: 3,
      levy: 3.5,
      tax: 10.33,
      bonus: -0.75,
    });
    expect(bill!.notes).toContain(
      'The period lies under 2 versions of the schedule (from 2026-07-01 on): divided by days.',
    );
    expect(bill!.quantities['over']!.value).toBe(200);
  });

  it('by the first or last day takes that text for the whole bill, seasons still by days', () => {
    const start = priceQuantities(buildSchedule(base, { straddle: 'start' }), [across])[0];
    expect(amountsOf(start)).toEqual({ service: 30, demand: 30, energy: 100, fuelRider: 10, reactive: 2, tax: 8.6 });
    const end = priceQuantities(buildSchedule(base, { straddle: 'end' }), [across])[0];
    expect(amountsOf(end)).toEqual({
      demand: 60,
      energy: 150,
      fuelRider: 20,
      reactive: 4,
      levy: 7,
      tax: 12.05,
      bonus: -1.5,
    });
    // 16 October to 15 November: (16 days of summer x 6 + 15 of winter x 2) / 31 x 10 kW.
    const autumn = { ...across, from: '2026-10-16', to: '2026-11-16' };
    const schedule = buildSchedule(base.replace('2026-08: 0.03', '2026-10: 0.03'), { straddle: 'start' });
    expect(amountsOf(priceQuantities(schedule, [autumn])[0])['demand']).toBe(40.65);
  });

  it('compares whole lines with a minimum weighted by days', () => {
    const text = base
      .replace('  tax: {', '  minimum: { topUp: all above, to: 400, group: adjustment }\n  tax: {')
      .replace('    charges:\n', '    charges:\n      minimum: { to: 500 }\n');
    const [bill] = priceQuantities(buildSchedule(text), [across]);
    // 450 - (15 + 45 + 125 + 15 + 3); the levy stands below it.
    expect(amountsOf(bill)['minimum']).toBe(247);
  });

  it('by intervals shares summed measures by what fell into each part, and the rest by days', () => {
    const load = buildSeries({
      from: '2026-06-16',
      to: '2026-07-16',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (local) => (local.getUTCMonth() === 5 ? [30, 0, 0] : [10, 10, 0]),
    });
    const [bill] = priceBills(buildSchedule(base, { straddle: 'intervals' }), load, { periods: [across] });
    // 360 hours each: 10,800 and 3,600 kWh; 3,600 kvarh in July only: none beyond 40 % or 30 % of 14,400 = 5,760 and 4,320.
    const amounts = amountsOf(bill);
    expect(amounts['demand']).toBe(135);
    expect(amounts['fuelRider']).toBe(108 + 72);
    // 1,440 x 3/4 under the first text; (50 + 13,900 x 0.20) x 1/4 under the second.
    expect(amounts['energy']).toBe(1080 + 707.5);
    expect(amounts['reactive']).toBe(0);
  });

  it('gives exactly its percentage of the printed lines where it does not change', () => {
    const text = base
      .replace('levy: { amount: 7, group: tax, before: tax }', 'levy: { amount: 7.01, group: tax, before: tax }')
      .replace('amount: 30', 'amount: 30.01');
    const [bill] = priceQuantities(buildSchedule(text), [{ ...across, to: '2026-07-13' }]);
    const printed = bill!.lines
      .filter(({ id }) => id !== 'tax' && id !== 'bonus')
      .reduce((sum, { amount }) => sum + amount, 0);
    expect(amountsOf(bill)['tax']).toBe(Math.round(printed * 5) / 100);
  });

  it('notes a file that does not say how, and goes by days', () => {
    const schedule = buildSchedule(base, { straddle: '' });
    expect(schedule.notes.map(({ path }) => path)).toContain('straddle');
    expect(priceQuantities(schedule, [across])[0]!.total).toBe(
      priceQuantities(buildSchedule(base), [across])[0]!.total,
    );
  });
});

describe('families', () => {
  const text = (charges: string, more = ''): string => `
windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
  low: { rest: peak }
  night: { days: every day, hours: 00:00-06:00 }
quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  kvarh: { sum: kvarhLagging, inEach: [low, peak] }
  over: { formula: excess(kvarh; 0.5 * kwh), unit: kvarh }
${more}
charges:
${charges}`;
  const values = { kwhPeak: 100, kwhLow: 200, kvarhPeak: 80, kvarhLow: 90 };
  const period = { from: '2026-07-01', to: '2026-08-01', quantities: values };

  it('stand for one quantity and one line per window', () => {
    const schedule = buildSchedule(
      text(
        '  reactive: { per: over, rate: { peak: 2, low: 1 }, label: Reactive, group: reactive }\n  tax: { percentOf: [reactive], rate: 10, group: tax }\n  half: { amount: total(reactive) / 2, group: fixed }',
      ),
    );
    const [bill] = priceQuantities(schedule, [period]);
    expect(bill!.quantities).toMatchObject({ overPeak: { value: 30 }, overLow: { value: 0 } });
    expect(amountsOf(bill)).toEqual({ reactivePeak: 60, reactiveLow: 0, tax: 6, half: 30 });
    expect(bill!.lines.map(({ label }) => label)).toEqual(['Reactive, low', 'Reactive, peak', 'Tax', 'Half']);
  });

  it('can be named by member', () => {
    const [bill] = priceQuantities(buildSchedule(text('  reactive: { per: overPeak, rate: 1, group: reactive }')), [
      period,
    ]);
    expect(amountsOf(bill)).toEqual({ reactive: 30 });
  });

  it('must stand for the same windows in one formula', () => {
    const other = '  nights: { sum: kwh, inEach: [night, peak] }\n  mixed: { formula: kwh + nights, unit: kWh }';
    expect(problemsOf(() => buildSchedule(text('  a: { amount: 1, group: fixed }', other)))[0]).toMatchObject({
      path: 'quantities.mixed',
      message: '"kwh" and "nights" stand for different windows.',
    });
  });

  it('note windows that overlap or leave gaps', () => {
    const other = '  nights: { sum: kwh, inEach: [night, low] }';
    const messages = buildSchedule(text('  a: { amount: 1, group: fixed }', other)).notes.map(({ message }) => message);
    expect(messages).toContain('The windows night, low overlap, that time counts twice: every day 00:00-06:00.');
    expect(messages).toContain('The windows night, low leave gaps, that time counts in none: weekdays 08:00-20:00.');
  });
});

describe('what a schedule tells', () => {
  it('keeps where it comes from and notes what is open', () => {
    const schedule = readSchedule(
      'schedule: bare\ncurrency: EUR\ntimeZone: Europe/Lisbon\nquantities:\n  maxKw: { highest: kw }\ncharges:\n  a: { amount: 1, group: fixed }',
    );
    expect(schedule).toMatchObject({
      id: 'bare',
      title: 'bare',
      inForce: null,
      currency: 'EUR',
      timeZone: 'Europe/Lisbon',
      meters: 'one',
    });
    expect(schedule.notes.map(({ path }) => path)).toEqual(['inForce', 'source', 'demandWindow', 'quantities.maxKw']);
  });
});
