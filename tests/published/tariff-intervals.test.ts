import { describe, expect, it } from 'vitest';
import { priceBills } from '@/core/tariff';
import { amountsOf, buildSchedule, buildSeries, valuesOf, type Powers } from '../core/tariff/build';

const day = { from: '2026-01-14', to: '2026-01-15' };
const none: Powers = [0, 0, 0];

/** One Wednesday of hours, the powers given by hour of the clock. */
function hours(timeZone: string, byHour: Record<number, Powers>) {
  return buildSeries({ ...day, timeZone, stepMinutes: 60, powers: (local) => byHour[local.getUTCHours()] ?? none });
}

describe('published billing rules settled within the period, from intervals', () => {
  // EPM, Energia reactiva (CREG 015/2018, 199/2019): inductive above 50 % of the hour's kWh plus all capacitive, times M. Own inputs:
  // 60 - 50 = 10; 45 < 50; 8 capacitive: 18 kvarh x 150 x M 3 = 8,100. M is the number of months in a row: two months before this one.
  it('settles Colombian excess hour by hour and multiplies by the months in a row', () => {
    const schedule = buildSchedule(
      `
quantities:
  over: { sum: excess(kvarhLagging; 0.5 * kwh), each: hour }
  capacitive: { sum: kvarhLeading }
  excessKvarh: { formula: over + capacitive, unit: kvarh }
  run: { past: excessKvarh > 0, take: streak, unit: months }
charges:
  reactive: { per: excessKvarh, rate: 150 * run, group: reactive }`,
      { currency: 'COP', timeZone: 'America/Bogota' },
    );
    const load = hours('America/Bogota', { 9: [100, 60, 0], 10: [100, 45, 0], 22: [10, 0, 8] });
    const [bill] = priceBills(schedule, load, { periods: [day], history: { excessKvarh: [0, 7, 4] } });
    expect(valuesOf(bill)).toMatchObject({ over: 10, capacitive: 8, excessKvarh: 18, run: 3 });
    expect(amountsOf(bill)).toEqual({ reactive: 8100 });
  });

  // Tarifa MT 2019 and reactive FAQ, EDP Servico Universal (ERSE Despachos 7253/2010, 10/2010): factors 0.33 / 1 / 3 by day outside
  // vazio, every capacitive kvarh inside. Marginal bands and both prices are from memory; inputs are our own: 10,000 kWh, 6,000 kvarh:
  // 1,000 x 0.33 + 1,000 + 1,000 x 3 = 4,330 kvarh x 0.025 = 108.25; 500 x 0.019 = 9.50.
  it('weighs Portuguese daily bands', () => {
    const schedule = buildSchedule(`
windows:
  vazio: { days: every day, hours: 22:00-08:00 }
  day: { rest: vazio }
quantities:
  band1: { sum: between(kvarhLagging; 0.3 * kwh; 0.4 * kwh), each: day, in: day }
  band2: { sum: between(kvarhLagging; 0.4 * kwh; 0.5 * kwh), each: day, in: day }
  band3: { sum: excess(kvarhLagging; 0.5 * kwh), each: day, in: day }
  weighted: { formula: 0.33 * band1 + band2 + 3 * band3, unit: kvarh }
  injected: { sum: kvarhLeading, in: vazio }
charges:
  inductive: { per: weighted, rate: 0.025, group: reactive }
  capacitive: { per: injected, rate: 0.019, group: reactive }`);
    // 14 hours of the day: ten with 1,000 kW and 600 kvar, four idle; 50 kvar delivered in the ten hours of vazio.
    const load = buildSeries({
      ...day,
      timeZone: 'Europe/Lisbon',
      stepMinutes: 15,
      powers: (local) => {
        const hour = local.getUTCHours();
        if (hour >= 22 || hour < 8) return [0, 0, 50];
        return hour < 18 ? [1000, 600, 0] : none;
      },
    });
    const [bill] = priceBills(schedule, load, { periods: [day] });
    const { band1, band2, band3, weighted } = valuesOf(bill);
    for (const band of [band1, band2, band3]) expect(band).toBeCloseTo(1000, 9);
    expect(weighted).toBeCloseTo(4330, 9);
    expect(amountsOf(bill)).toEqual({ inductive: 108.25, capacitive: 9.5 });
  });

  // Energia reativa, EDP Escelsa (REN 414/2010): sum of kWh x (0.92 / fT - 1) over hours, lagging 06-24 h, leading 00-06 h; the price is
  // ours. Hours: 36.448 + 0 + 6.342 kWh (from fT 0.857493, 0.960824, 0.83205) x 0.30 = 12.84.
  it('re-scales Brazilian hours to the reference without netting', () => {
    const schedule = buildSchedule(
      `
zeroKwh: { pf: 1 }
windows:
  night: { days: every day, hours: 00:00-06:00 }
  day: { rest: night }
quantities:
  lagKwh: { sum: kwh * excess(0.92 / pf(kwh; kvarhLagging); 1), each: hour, in: day }
  leadKwh: { sum: kwh * excess(0.92 / pf(kwh; kvarhLeading); 1), each: hour, in: night }
  ere: { formula: lagKwh + leadKwh, unit: kWh }
charges:
  excess: { per: ere, rate: 0.30, group: reactive }`,
      { currency: 'BRL', timeZone: 'America/Sao_Paulo' },
    );
    const load = hours('America/Sao_Paulo', { 10: [500, 300, 0], 11: [520, 150, 0], 3: [60, 0, 40] });
    const [bill] = priceBills(schedule, load, { periods: [day] });
    const { lagKwh, leadKwh } = valuesOf(bill);
    expect(lagKwh).toBeCloseTo(36.448, 3);
    expect(leadKwh).toBeCloseTo(6.342, 3);
    expect(amountsOf(bill)).toEqual({ excess: 12.84 });
    expect(bill!.reactiveCost).toBe(12.84);
  });
});
