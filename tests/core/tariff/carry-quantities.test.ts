import { describe, expect, it } from 'vitest';
import { carryQuantities } from '@/core/tariff';
import { buildSchedule } from './build';

const period = { from: '2026-04-01', to: '2026-05-01' };
const windows = `windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
  low: { rest: peak }
`;
/** What the bills print: energy by window, the highest quarter-hour. */
const standing = buildSchedule(`${windows}quantities:
  kwh: { sum: kwh, inEach: [peak, low] }
  maxKw: { highest: kw, label: Peak }
charges:
  energy: { per: kwh, rate: { peak: 0.12, low: 0.08 }, group: energy }
  demand: { per: maxKw, rate: 5, group: demand }`);
const values = { kwhPeak: 300, kwhLow: 200, maxKw: 40 };
const from = { schedule: standing, values };

const carried = (body: string, head: Record<string, string> = {}) =>
  carryQuantities(from, buildSchedule(body, head), period);
const namesOf = ({ missing }: ReturnType<typeof carried>) => missing.map(({ name }) => name);

describe('carryQuantities', () => {
  it('carries what measures the same under another name, and energy of all windows together', () => {
    const result = carried(`quantities:
  allKwh: { sum: kwh }
  peakKw: { highest: kw }
charges:
  energy: { per: allKwh, rate: 0.1, group: energy }
  demand: { per: peakKw, rate: 5, group: demand }`);
    expect(result).toEqual({ quantities: { allKwh: 500, peakKw: 40 }, missing: [] });
  });

  it('does not take a name for the thing: another demand window is another quantity', () => {
    const body = `quantities: { maxKw: { highest: kw } }
charges: { demand: { per: maxKw, rate: 5, group: demand } }`;
    const result = carried(body, { demandWindow: '60 min' });
    expect([result.quantities, namesOf(result)]).toEqual([{}, ['maxKw']]);
  });

  it('does not carry a window of other hours, and names what is missing', () => {
    const result = carried(`windows: { peak: { days: weekdays, hours: 08:00-18:00 }, low: { rest: peak } }
quantities: { kwh: { sum: kwh, inEach: [peak, low] }, kvarh: { sum: kvarhLagging } }
charges:
  energy: { per: kwh, rate: { peak: 0.12, low: 0.08 }, group: energy }
  reactive: { per: kvarh, rate: 0.01, group: reactive }`);
    expect([result.quantities, namesOf(result)]).toEqual([{}, ['kwhPeak', 'kwhLow', 'kvarh']]);
  });

  it('carries a window of the same hours only on the same clock', () => {
    const body = `${windows}quantities: { energy: { sum: kwh, in: peak } }
charges: { power: { per: energy, rate: 0.1, group: energy } }`;
    expect(carried(body).quantities).toEqual({ energy: 300 });
    expect(carried(body, { timeZone: 'Europe/Oslo' }).quantities).toEqual({});
  });

  it('asks only for what a line needs', () => {
    const result = carried(`quantities: { allKwh: { sum: kwh }, kvarh: { sum: kvarhLagging } }
charges: { energy: { per: allKwh, rate: 0.1, group: energy } }`);
    expect(result.missing).toEqual([]);
  });

  it('carries what the bill says where name and unit agree', () => {
    const given = (unit: string) =>
      buildSchedule(`quantities: { heat: { given: ${unit} } }
charges: { warmth: { per: heat, rate: 1, group: energy } }`);
    const told = { schedule: given('GJ'), values: { heat: 7 } };
    expect(carryQuantities(told, given('GJ'), period).quantities).toEqual({ heat: 7 });
    expect(carryQuantities(told, given('MWh'), period).quantities).toEqual({});
  });
});
