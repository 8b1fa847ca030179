import { describe, expect, it } from 'vitest';
import { PriceError, priceBills, type PricedBill } from '@/core/tariff';
import type { LoadSeries } from '@/core/load';
import { buildSchedule, buildSeries, valuesOf, type Powers } from './build';

const windows = `
windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
  night: { days: every day, hours: 22:00-06:00 }
  offPeak: { rest: peak }`;

/** Quantities of one bill under a schedule that only measures. */
function measured(
  quantities: string,
  load: LoadSeries,
  period: { from: string; to: string },
  head: Record<string, string> = {},
): PricedBill {
  const schedule = buildSchedule(
    `${windows}\nquantities:\n${quantities}\ncharges:\n  service: { amount: 1, group: fixed }`,
    { timeZone: 'Europe/Lisbon', ...head },
  );
  return priceBills(schedule, load, { periods: [period] })[0]!;
}

function twoDays(powers: (local: Date, index: number) => Powers, stepMinutes = 15): LoadSeries {
  return buildSeries({ from: '2026-07-13', to: '2026-07-15', timeZone: 'Europe/Lisbon', stepMinutes, powers });
}

const monday = { from: '2026-07-13', to: '2026-07-14' };
const both = { from: '2026-07-13', to: '2026-07-15' };
const clock = (local: Date): number => local.getUTCHours() * 60 + local.getUTCMinutes();

describe('measures', () => {
  it('sum a channel in each window, judged by the beginning of the interval', () => {
    // 100 kW all day: 12 hours of peak, 12 outside, 8 at night.
    const bill = measured(
      '  kwh: { sum: kwh, inEach: [peak, offPeak] }\n  nightKwh: { sum: kwh, in: night }',
      twoDays(() => [100, 0, 0]),
      monday,
    );
    expect(valuesOf(bill)).toEqual({ kwhPeak: 1200, kwhOffPeak: 1200, nightKwh: 800 });
  });

  it('find the highest of a demand window and the instant it begins, the earliest at a tie', () => {
    const load = twoDays((local) => [clock(local) === 15 * 60 || clock(local) === 16 * 60 ? 500 : 100, 0, 0]);
    const bill = measured('  maxKw: { highest: kw }', load, both);
    expect(bill.quantities['maxKw']).toMatchObject({ value: 500, unit: 'kW', at: '2026-07-13T14:00:00.000Z' });
    expect(bill.quantities['maxKw']!.explanation).toBe(
      'maxKw = 500 kW, the highest kW of 15 minutes, Monday 13 July 2026 15:00 to 15:15.',
    );
  });

  it('average over a demand window of several intervals, from local midnight', () => {
    // 600 kW from 15:15 to 15:45: the half hours 15:00 and 15:30 see 300 + 50 each, a rolling one sees all.
    const load = twoDays((local) => [clock(local) >= 915 && clock(local) < 945 ? 600 : 100, 0, 0], 5);
    const block = measured('  maxKw: { highest: kw }', load, both, { demandWindow: '30 min' });
    expect(block.quantities['maxKw']!.value).toBeCloseTo(350, 9);
    expect(block.quantities['maxKw']!.at).toBe('2026-07-13T14:00:00.000Z');
    const rolling = measured('  maxKw: { highest: kw }', load, both, { demandWindow: '30 min rolling every 5 min' });
    expect(rolling.quantities['maxKw']).toMatchObject({ value: 600, at: '2026-07-13T14:15:00.000Z' });
  });

  it('count a demand window only if it lies wholly inside the window and the period', () => {
    // 900 kW from 19:45 to 20:15 crosses the end of peak; 800 kW from 23:45 on Monday to 00:15 crosses the period.
    const load = twoDays((local) => {
      const minute = clock(local);
      if (minute >= 1185 && minute < 1215) return [900, 0, 0];
      return minute >= 1425 || minute < 15 ? [800, 0, 0] : [100, 0, 0];
    });
    const head = { demandWindow: '30 min rolling every 15 min' };
    // Inside peak the window of 19:30 sees (100 + 900) / 2; that of 19:45 would see 900 but ends outside.
    expect(valuesOf(measured('  maxKw: { highest: kw, in: peak }', load, monday, head))).toEqual({ maxKw: 500 });
    expect(valuesOf(measured('  maxKw: { highest: kw, in: offPeak }', load, monday, head))).toEqual({ maxKw: 500 });
  });

  it('take kva from net kvar: hypot(kw, lagging - leading)', () => {
    const load = twoDays((_, index) => (index === 3 ? [300, 500, 100] : [300, 100, 100]));
    const bill = measured(
      '  maxKva: { highest: kva }\n  kvah: { sum: kvah, each: interval }\n  kvahPooled: { formula: hypot(kwh; net), unit: kVAh }'.replace(
        '  kvahPooled',
        '  kwh: { sum: kwh }\n  net: { sum: kvarhNet }\n  kvahPooled',
      ),
      load,
      monday,
    );
    const { maxKva, kvah, net, kvahPooled } = valuesOf(bill);
    expect(maxKva).toBe(500);
    // 95 intervals of 75 kVAh and one of 125; pooled: hypot(7,200, 100).
    expect(kvah).toBeCloseTo(95 * 75 + 125, 9);
    expect(net).toBeCloseTo(100, 9);
    expect(kvahPooled).toBeCloseTo(Math.sqrt(7200 ** 2 + 100 ** 2), 9);
  });

  it('net only inside a cell', () => {
    // Hour by hour lagging and leading alternate: by hour the excess stays, by day net is zero.
    const load = twoDays((local) => (local.getUTCHours() % 2 === 0 ? [100, 40, 0] : [100, 0, 40]), 60);
    const bill = measured(
      '  hourly: { sum: excess(kvarhNet; 0), each: hour }\n  daily: { sum: excess(kvarhNet; 0), each: day }\n  net: { sum: kvarhNet }',
      load,
      monday,
    );
    expect(valuesOf(bill)).toEqual({ hourly: 480, daily: 0, net: 0 });
  });

  it('average the highest of several, on distinct days if asked', () => {
    const load = twoDays((local) => {
      const minute = clock(local);
      if (local.getUTCDate() === 13) return [minute === 600 ? 500 : minute === 615 ? 480 : 100, 0, 0];
      return [minute === 700 - 10 ? 400 : 100, 0, 0];
    });
    const bill = measured(
      '  top2: { highest: kw, count: 2 }\n  top2Days: { highest: kw, count: 2, days: distinct }\n  top9Days: { highest: kw, count: 9, days: distinct }',
      load,
      both,
    );
    expect(valuesOf(bill)).toEqual({ top2: 490, top2Days: 450, top9Days: 450 });
  });

  it('take the lowest where a condition holds, and a value at its instant', () => {
    const load = twoDays((local) => {
      const hour = local.getUTCHours();
      if (hour < 4) return [50, 0, 5];
      return hour < 8 ? [300, 0, 80] : [1000, 450, 0];
    });
    const bill = measured(
      '  maxKw: { highest: kw }\n  minKw: { lowest: kw, where: kw >= 0.25 * maxKw }\n  leadAtMin: { value: kvarLeading, at: minKw }\n  lagAtMax: { value: kvarLagging, at: maxKw }',
      load,
      monday,
    );
    expect(valuesOf(bill)).toEqual({ maxKw: 1000, minKw: 300, leadAtMin: 80, lagAtMax: 450 });
  });

  it('take a value in the very cell that set the instant', () => {
    // The hour from 10:00 averages 200 kW; its kvar are 30, though single quarters had none and 120.
    const load = twoDays((local) => {
      const minute = clock(local);
      return minute >= 600 && minute < 660 ? [200, minute === 600 ? 120 : 0, 0] : [100, 0, 0];
    });
    const bill = measured(
      '  maxKw: { highest: kw }\n  kvarAtPeak: { value: kvarLagging, at: maxKw }\n  kvaAtPeak: { value: kva, at: maxKw }',
      load,
      monday,
      { demandWindow: '60 min' },
    );
    expect(valuesOf(bill)).toMatchObject({ maxKw: 200, kvarAtPeak: 30 });
    expect(valuesOf(bill)['kvaAtPeak']).toBeCloseTo(Math.sqrt(200 ** 2 + 30 ** 2), 9);
  });

  it('are 0 without instant over no cell, with values at it', () => {
    const bill = measured(
      '  maxKw: { highest: kw, where: kw > 900 }\n  kvarAtPeak: { value: kvarLagging, at: maxKw }',
      twoDays(() => [100, 50, 0]),
      monday,
    );
    expect(valuesOf(bill)).toEqual({ maxKw: 0, kvarAtPeak: 0 });
    expect(bill.quantities['maxKw']!.at).toBeUndefined();
    expect(bill.notes.some((note) => note.includes('"maxKw"'))).toBe(true);
  });
});

describe('missing and estimated intervals', () => {
  const load = twoDays((local) => [clock(local) === 600 ? 900 : 100, 50, 0]);
  load.quality[41] = 2;
  for (const channel of [load.kwh, load.kvarhLagging, load.kvarhLeading]) channel[41] = NaN;
  load.quality[90] = 1;

  it('leave missing ones out of sums and say how many', () => {
    const bill = measured(
      '  kwh: { sum: kwh }\n  over: { sum: excess(kvarhLagging; 0.1 * kwh), each: hour }',
      load,
      monday,
    );
    // 95 of 96 quarters: 94 x 25 + 225; the hour with a gap counts what is there.
    expect(valuesOf(bill)['kwh']).toBeCloseTo(94 * 25 + 225, 9);
    expect(bill.notes).toContain('1 of 96 intervals are missing: sums are of what is there, never scaled up.');
  });

  it('never let a cell with a gap be a maximum', () => {
    // The hour of 10:00 holds 900 kW and a gap.
    const bill = measured(
      '  maxKw: { highest: kw }\n  quarter: { highest: kw, each: interval }\n  day: { highest: kwh, each: day }',
      load,
      both,
      { demandWindow: '60 min' },
    );
    expect(valuesOf(bill)).toMatchObject({ quarter: 900, day: 23 * 100 + (900 + 300) / 4 });
    // On Tuesday the same hour is whole: (900 + 3 x 100) / 4.
    expect(bill.quantities['maxKw']).toMatchObject({ value: 300, at: '2026-07-14T09:00:00.000Z' });
  });

  it('mark what an estimated interval touches, and nothing else', () => {
    const bill = measured(
      '  kwh: { sum: kwh, inEach: [peak, offPeak] }\n  allKwh: { formula: total(kwh), unit: kWh }\n  maxKw: { highest: kw }',
      load,
      monday,
    );
    const marked = Object.entries(bill.quantities)
      .filter(([, { isEstimated }]) => isEstimated)
      .map(([name]) => name);
    expect(marked).toEqual(['kwhOffPeak', 'allKwh']);
    expect(bill.notes).toContain('1 of 96 intervals are estimated.');
  });

  it('count intervals outside the series as missing, and refuse a period with none', () => {
    const bill = measured(
      '  kwh: { sum: kwh }\n  perDay: { highest: kwh, each: day }',
      twoDays(() => [100, 0, 0]),
      { from: '2026-07-14', to: '2026-07-16' },
    );
    expect(valuesOf(bill)).toEqual({ kwh: 2400, perDay: 2400 });
    expect(bill.notes).toContain('96 of 192 intervals are missing: sums are of what is there, never scaled up.');
    expect(() =>
      measured(
        '  kwh: { sum: kwh }',
        twoDays(() => [1, 0, 0]),
        { from: '2026-08-01', to: '2026-09-01' },
      ),
    ).toThrow('the series has no interval of this period');
  });

  it('refuse a channel the series does not carry, and count leading as 0 in net values', () => {
    const bare = twoDays(() => [300, 400, 0]);
    bare.kvarhLeading.fill(NaN);
    expect(() => measured('  lead: { sum: kvarhLeading }', bare, monday)).toThrow(PriceError);
    const bill = measured('  maxKva: { highest: kva }', bare, monday);
    expect(valuesOf(bill)).toEqual({ maxKva: 500 });
    expect(bill.notes).toContain('The series does not carry leading kvarh: net and apparent values count it as 0.');
    bare.kvarhLagging.fill(NaN);
    expect(() => measured('  maxKva: { highest: kva }', bare, monday)).toThrow(
      'does not carry kvarhLagging, which "maxKva" measures',
    );
  });
});

describe('steps of the series', () => {
  it('take a step longer than the demand window as the window, noted', () => {
    const bill = measured(
      '  maxKw: { highest: kw }',
      twoDays((local) => [local.getUTCHours() === 9 ? 700 : 100, 0, 0], 60),
      monday,
    );
    expect(valuesOf(bill)).toEqual({ maxKw: 700 });
    expect(bill.notes).toContain(
      "The series' step of 60 minutes is longer than the demand window of 15: the step is taken as the window.",
    );
  });

  it('add shorter steps up to the demand window before they look for the highest', () => {
    // Five-minute energies: 09:00 to 09:15 holds 10 + 70 + 10 kWh = 360 kW; the single 70 kWh would be 840 kW. Elsewhere 5 kWh, 60 kW.
    const fine = twoDays((local) => {
      const minute = local.getUTCHours() * 60 + local.getUTCMinutes();
      return [minute === 545 ? 840 : minute === 540 || minute === 550 ? 120 : 60, 0, 0];
    }, 5);
    expect(valuesOf(measured('  maxKw: { highest: kw }', fine, monday))).toEqual({ maxKw: 360 });
  });

  it('name an estimated interval that sets a demand', () => {
    const load = twoDays((local) => [local.getUTCHours() === 9 && local.getUTCMinutes() === 30 ? 700 : 100, 0, 0]);
    expect(measured('  maxKw: { highest: kw }', load, monday).notes.join()).not.toMatch(/not measured/);
    load.quality[load.kwh.findIndex((kwh) => kwh === Math.max(...load.kwh))] = 1;
    const { notes } = measured('  maxKw: { highest: kw }', load, monday);
    expect(notes.join('\n')).toMatch(/"maxKw" is set by an estimated interval, .*09:30: it was not measured\./);
  });

  it('refuse a demand window or rolling step that is no multiple of the step', () => {
    const load = twoDays(() => [100, 0, 0], 10);
    expect(() => measured('  maxKw: { highest: kw }', load, monday)).toThrow(
      "15 minutes are no multiple of the series' step of 10 minutes",
    );
    expect(() =>
      measured('  maxKw: { highest: kw }', load, monday, { demandWindow: '30 min rolling every 5 min' }),
    ).toThrow("5 minutes are no multiple of the series' step of 10 minutes");
  });

  it('refuse a rolling step shorter than the step, even where the window is as long as it', () => {
    const load = twoDays(() => [100, 0, 0], 15);
    const head = { demandWindow: '15 min rolling every 5 min' };
    expect(() => measured('  maxKw: { highest: kw }', load, monday, head)).toThrow(
      "5 minutes are no multiple of the series' step of 15 minutes",
    );
  });

  it('refuse a border inside an interval', () => {
    const schedule = buildSchedule(
      'windows:\n  odd: { days: every day, hours: 08:15-10:00 }\nquantities:\n  kwh: { sum: kwh, in: odd }'.replace(
        'kwh: {',
        'oddKwh: {',
      ),
    );
    expect(() =>
      priceBills(
        schedule,
        twoDays(() => [1, 0, 0], 30),
        { periods: [monday] },
      ),
    ).toThrow('08:15 falls inside an interval of 30 minutes');
    expect(() =>
      priceBills(
        schedule,
        twoDays(() => [1, 0, 0], 15),
        { periods: [monday] },
      ),
    ).not.toThrow();
  });
});
