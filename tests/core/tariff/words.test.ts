import { describe, expect, it } from 'vitest';
import { describeSchedule, priceBills, priceQuantities, readSchedule, type PricedBill } from '@/core/tariff';
import { buildSchedule, buildSeries } from './build';
import { kestrel, millrace, tidewater } from './worked-schedules';

// Sentences of the language's design, section 10, with its figures.

const lineWords = (bill: PricedBill | undefined): Record<string, string> =>
  Object.fromEntries((bill?.lines ?? []).map(({ id, explanation }) => [id, explanation]));
const quantityWords = (bill: PricedBill | undefined): Record<string, string | undefined> =>
  Object.fromEntries(Object.entries(bill?.quantities ?? {}).map(([name, { explanation }]) => [name, explanation]));

describe('explanations', () => {
  const quantities = { kwhPeak: 300_000, kwhOffPeak: 500_000, kvarh: 400_000, maxKva: 2100, leadNight: 900 };
  const [july] = priceQuantities(readSchedule(millrace), [{ from: '2026-07-01', to: '2026-08-01', quantities }], {
    history: { maxKva: [3000] },
  });

  it('say lines with the numbers put in', () => {
    expect(lineWords(july)).toMatchObject({
      service: 'Service: 420.00 EUR.',
      demand: 'Demand: 2,400 kVA x 11.50 EUR per kVA = 27,600.00 EUR (clause 4.2).',
      fuelRider: 'Fuel rider: 800,000 kWh x 0.0031 EUR per kWh = 2,480.00 EUR.',
      surcharge: 'Surcharge: 1 point x 1 % of 114,200.00 EUR (demand 27,600.00 + energy 86,600.00) = 1,142.00 EUR.',
      minimum: 'Minimum: not needed, 119,692.80 is above 30,000.00 (15 x contractKva = 15 x 2,000).',
      tax: 'Tax: 6 % of 119,692.80 EUR (all 9 lines above) = 7,181.57 EUR.',
    });
  });

  it('say quantities with the numbers put in, and what each is worked out from', () => {
    expect(quantityWords(july)).toMatchObject({
      billedKva:
        'billedKva = max(maxKva; 0.80 x yearKva; 0.50 x contractKva) = max(2,100; 0.80 x 3,000; 0.50 x 2,000) = 2,400 kVA: the second.',
      pf: 'pf = pf(allKwh; kvarh) = pf(800,000; 400,000) = 0.894427, to 0.01: 0.89.',
      yearKva: 'yearKva = 3,000 kVA, the highest maxKva of the last 11 periods (1 known), June 2026.',
      kvarh: 'kvarh = 400,000 kvarh, as the bill prints it.',
    });
    expect(july!.quantities['billedKva']!.uses).toEqual(['maxKva', 'yearKva', 'contractKva']);
    expect(july!.lines.find(({ id }) => id === 'surcharge')!.uses).toEqual([
      'pointsBelow',
      'demand',
      'energyPeak',
      'energyOffPeak',
    ]);
  });

  it('can open every name a line or quantity uses', () => {
    const known = new Set([
      ...Object.keys(july!.quantities),
      ...Object.keys(july!.inputs),
      ...july!.lines.map(({ id }) => id),
    ]);
    const used = [...july!.lines, ...Object.values(july!.quantities), ...Object.values(july!.inputs)].flatMap(
      ({ uses }) => uses,
    );
    expect(used.filter((name) => !known.has(name))).toEqual([]);
    expect(july!.inputs['fuel']).toMatchObject({ value: 0.0031, explanation: 'fuel = 0.0031, the rider of 2026-07.' });
    expect(july!.inputs['contractKva']).toMatchObject({
      value: 2000,
      label: 'Contract power',
      explanation: 'contractKva = 2,000 kVA, from the contract.',
    });
  });

  it('say tiers with their ends, and what raised a bill', () => {
    const rows = [
      { from: '2026-03-01', to: '2026-04-01', quantities: { maxKw: 1250, kwh: 510_000, kvarh: 340_000 } },
      { from: '2026-04-01', to: '2026-05-01', quantities: { maxKw: 60, kwh: 9000, kvarh: 2000 } },
    ];
    const [march, april] = priceQuantities(readSchedule(kestrel), rows, { contract: { contractKw: 900 } });
    expect(lineWords(march)['energy']).toBe(
      'Energy: 346,375 kWh x 0.081 + 163,625 kWh x 0.064 = 38,528.38 USD; the first tier ends at 250 x billedKw = 346,375 kWh, the second tier ends at 400 x billedKw = 554,200 kWh.',
    );
    expect(quantityWords(march)['billedKw']).toBe(
      'billedKw = maxKw x max(1; 0.92 / pf) = 1,250 x max(1; 0.92 / 0.83) = 1,385.542, to 0.1: 1,385.5 kW.',
    );
    expect(lineWords(april)['minimum']).toBe(
      'Minimum: raises 1,603.82 to 16,200.00 (18 x contractKw = 18 x 900): 14,596.18 USD.',
    );
  });

  it('say a straddled line piece by piece, with what fell into each', () => {
    const [bill] = priceQuantities(readSchedule(millrace), [{ from: '2026-07-16', to: '2026-08-16', quantities }], {
      history: { maxKva: [3000] },
    });
    expect(lineWords(bill)['reactive']).toBe(
      'Reactive: 16 of 31 days under Sheet 4: 80,000 kvarh x 0.0180 EUR per kvarh; 15 of 31 days under Sheet 5: 136,000 kvarh x 0.0210 EUR per kvarh; together 2,125.16 EUR.',
    );
    expect(lineWords(bill)['service']).toBe('Service: 420.00 EUR.');
    const load = buildSeries({
      from: '2026-06-16',
      to: '2026-07-16',
      timeZone: 'Europe/Oslo',
      stepMinutes: 30,
      powers: (local) => [500, local.getUTCMonth() === 5 ? 300 : 250, 0],
    });
    const [shared] = priceBills(readSchedule(tidewater), load, { periods: [{ from: '2026-06-16', to: '2026-07-16' }] });
    // 15 days each of 16 hours: 1,600 and 800 kvarh a day beyond 40 %.
    expect(lineWords(shared)['excess']).toContain('24,000 of 36,000 kvarh x 0.0180 EUR per kvarh');
  });

  it('say measures with their window and instant, picks with their step', () => {
    const schedule = buildSchedule(
      `windows:
  peak: { days: weekdays, hours: 08:00-20:00 }
quantities:
  peakKwh: { sum: kwh, in: peak }
  maxKw: { highest: kw, in: peak }
  kvarAtPeak: { value: kvarLagging, at: maxKw }
  top: { highest: kw, count: 2, days: distinct }
  lagOver: { sum: excess(kvarhLagging; 0.50 * kwh), each: hour }
  cos: { formula: pf(maxKw; kvarAtPeak) }
  price: { pick: cos, from: { 0.95: 0, 0.80: 0.041554 }, otherwise: 0.062332, unit: EUR/kvarh }
  flagged: { given: flag, default: 0 }
charges:
  reactive: { per: lagOver, rate: price, group: reactive }
  waived: { amount: 10, when: not (flagged = 0), group: reactive }`,
      { zeroKwh: '{ pf: 1 }' },
    );
    const load = buildSeries({
      from: '2026-07-01',
      to: '2026-08-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 15,
      powers: (local) => (local.getUTCDate() === 14 && local.getUTCHours() === 15 ? [100, 60, 0] : [50, 0, 0]),
    });
    const [bill] = priceBills(schedule, load, { periods: [{ from: '2026-07-01', to: '2026-08-01' }] });
    expect(quantityWords(bill)).toEqual({
      peakKwh: 'peakKwh = 13,850 kWh, the sum of kWh in peak (weekdays 08:00-20:00).',
      maxKw:
        'maxKw = 100 kW, the highest kW of 15 minutes in peak (weekdays 08:00-20:00), Tuesday 14 July 2026 15:00 to 15:15.',
      kvarAtPeak: 'kvarAtPeak = 60 kvar, the kvar lagging where "maxKw" was set, on Tuesday 14 July 2026 15:00.',
      top: 'top = 75 kW, the mean of the 2 highest on distinct days kW of 15 minutes, the first Tuesday 14 July 2026 15:00 to 15:15.',
      lagOver:
        'lagOver = 10 kvarh, the sum over 744 hours of excess(kvarhLagging; 0.50 x kwh): 1 of them has a part; the most, 10 kvarh, on Tuesday 14 July 2026 15:00 to 16:00.',
      cos: 'cos = pf(maxKw; kvarAtPeak) = pf(100; 60) = 0.857493.',
      price: 'price = 0.041554 EUR/kvarh: cos 0.857493 is from 0.80 on, below 0.95.',
      flagged: 'flagged = 0, the value the schedule takes where none is given.',
    });
    expect(lineWords(bill)['waived']).toBe('Waived: not charged, "not flagged = 0" does not hold: flagged is 0.');
    expect(lineWords(bill)['reactive']).toBe('Reactive: 10 kvarh x 0.041554 EUR per kvarh = 0.42 EUR.');
  });

  it('say what a look back sums', () => {
    const schedule = buildSchedule(`
quantities:
  fault: { given: flag, default: 0 }
  waivers: { past: fault, take: sum, over: earlier periods of this year }
charges:
  fine: { per: waivers, rate: 10, group: adjustment }`);
    const row = { from: '2026-03-01', to: '2026-04-01', quantities: { fault: 0 } };
    const [bill] = priceQuantities(schedule, [row], { history: { fault: [1, 1] } });
    expect(quantityWords(bill)['waivers']).toBe('waivers = 2, the sum of fault over earlier periods of this year.');
  });

  it('say why nothing is charged', () => {
    const schedule = buildSchedule(
      'quantities:\n  over: { given: kvarh }\ncharges:\n  service: { amount: 5, group: fixed }\n  surcharge: { percentOf: [service], per: over, rate: 1, group: reactive }',
    );
    const [bill] = priceQuantities(schedule, [{ from: '2026-07-01', to: '2026-08-01', quantities: { over: 0 } }]);
    expect(lineWords(bill)['surcharge']).toBe('Surcharge: none, over is 0.');
  });
});

describe('describeSchedule', () => {
  const described = describeSchedule(readSchedule(millrace));

  it('is plain JSON with every part a page shows', () => {
    expect(JSON.parse(JSON.stringify(described))).toEqual(described);
    expect(described).toMatchObject({
      id: 'millrace-large',
      currency: 'EUR',
      straddle: 'intervals',
      inForce: '2026-01-01',
      source: { publisher: 'Millrace Power', status: 'invented' },
    });
    const [first, second] = described.versions;
    expect(first).toMatchObject({ from: '2026-01-01', note: null, demandWindow: { minutes: 15, everyMinutes: null } });
    expect(second).toMatchObject({ from: '2026-08-01', note: 'Sheet 5' });
    expect(first!.seasons).toEqual([
      { name: 'summer', words: '05-01 to 10-31' },
      { name: 'winter', words: 'rest' },
    ]);
    expect(first!.windows.map(({ name }) => name)).toEqual(['peak', 'night', 'offPeak']);
    expect(first!.contract).toEqual([
      { name: 'contractKva', label: 'Contract power', unit: 'kVA', default: 2000, range: [100, 50_000], clause: null },
    ]);
    expect(first!.charges.find(({ name }) => name === 'surcharge')!.words).toBe(
      '1 up to 10; 2 % per points of pointsBelow of demand, energyPeak, energyOffPeak',
    );
    expect(second!.charges.map(({ name }) => name)).not.toContain('fuelRider');
    expect(first!.quantities.find(({ name }) => name === 'billedKva')).toEqual({
      name: 'billedKva',
      label: null,
      unit: 'kVA',
      clause: '4.2',
      kind: 'formula',
      words: 'max(maxKva; 0.80 x yearKva; 0.50 x contractKva)',
    });
  });
});
