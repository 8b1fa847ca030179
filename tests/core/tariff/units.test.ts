import { describe, expect, it } from 'vitest';
import { wordProblem, type Schedule } from '@/core/tariff';
import { buildSchedule, problemsOf } from './build';

// Units are facts of the trade: kWh, kvarh, kVAh are energies, kW, kvar, kVA powers; a power times hours is an energy.

const build = (
  quantity: string,
  charge = 'fee: { amount: contractKva * late * useHours * share, group: fixed }',
): Schedule =>
  buildSchedule(
    `contract:
  contractKva: { unit: kVA, default: 1 }
  plantMw: { unit: MW, default: 1 }
  lowSide: { unit: flag, default: 0 }
  useHours: { unit: h, default: 250 }
  other: { default: 1 }
rates: { share: 0.4, seasonal: { summer: 0.3, winter: 0.4 }, dear: 12.5 }
seasons: { summer: 05-01 to 10-31, winter: rest }
windows: { peak: { days: weekdays, hours: 08:00-20:00 }, low: { rest: peak } }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  kwhBy: { sum: kwh, inEach: [peak, low] }
  maxKw: { highest: kw }
  maxKva: { highest: kva }
  maxKvar: { highest: kvarLagging }
  cos: { formula: pf(kwh; kvarh) }
  late: { given: flag, default: 0 }
  price: { pick: cos, from: { 0.95: 0 }, otherwise: 0.06, unit: EUR/kvarh }
  ${quantity}
charges:
  ${charge}
  uses: { amount: seasonal + dear + other * plantMw * lowSide, group: fixed }
`,
    { zeroKwh: '{ pf: 1, ratio: 0 }', source: '{ status: invented }' },
  );
const said = (quantity: string, charge?: string): string[] =>
  problemsOf(() => build(quantity, charge)).map((problem) => wordProblem(problem).replace(/^\d+:\d+ /, ''));
const noted = (quantity: string, charge?: string): string[] =>
  build(quantity, charge)
    .notes.map(({ path, message }) => `${path}: ${message}`)
    .filter((note) => !note.includes('is used by no line'));

const energy = 'Energy goes with energy, power with power; a power times hours is an energy.';

describe('units that do not go together', () => {
  it.each<[quantity: string, read: string]>([
    ['q: { formula: kwh + maxKw }', `q.formula: an energy (kWh) and a power (kW) cannot be added. ${energy}`],
    ['q: { formula: kvarh - maxKw }', `q.formula: an energy (kvarh) and a power (kW) cannot be subtracted. ${energy}`],
    ['q: { formula: maxKw > kwh }', `q.formula: a power (kW) and an energy (kWh) cannot be compared. ${energy}`],
    ['q: { formula: max(maxKva; 0.9 * kwh) }', 'q.formula: a power (kVA) and an energy (kWh) cannot be compared.'],
    [
      'q: { formula: excess(kvarh; share * maxKw) }',
      'q.formula: an energy (kvarh) and a power (kW) cannot be compared.',
    ],
    ['q: { formula: excess(kvarh; tanOf(0.9) * maxKw) }', 'q.formula: an energy (kvarh) and a power (kW) cannot be'],
    ['q: { formula: pf(kwh; maxKvar) }', 'q.formula: an energy (kWh) and a power (kvar) cannot make a power factor.'],
    ['q: { formula: pf(kvarh; kwh) }', 'q.formula: pf( ) takes the active value first. Write pf(active; reactive).'],
    ['q: { formula: hypot(kwh; maxKvar) }', 'q.formula: an energy (kWh) and a power (kvar) cannot be added.'],
    [
      'q: { formula: if(lowSide; kwh; maxKw) }',
      'q.formula: an energy (kWh) and a power (kW) cannot stand for each other.',
    ],
    ['q: { formula: total(kwhBy) + maxKw }', 'q.formula: an energy (kWh) and a power (kW) cannot be added.'],
    ['q: { formula: kwh + cos }', 'q.formula: an energy (kWh) and a bare number cannot be added.'],
    ['q: { formula: max(maxKw; plantMw) }', 'q.formula: kW and MW differ by a thousand. Multiply one by 1000.'],
    ['q: { formula: max(maxKva; contractKva), unit: kVAh }', 'q.unit: "kVAh" does not fit: it comes out as a power.'],
    ['q: { formula: kwh / hours, unit: kWh }', 'q.unit: "kWh" does not fit: it comes out as a power.'],
    ['q: { formula: kwh, unit: MWh }', 'q.unit: "MWh" is a thousand off.'],
    ['q: { highest: kw, unit: kWh }', 'q.unit: "kWh" does not fit: it comes out as a power.'],
    ['q: { highest: kw, where: kw > 0.5 * kwh }', 'q.where: a power (kW) and an energy (kWh) cannot be compared.'],
    ['q: { sum: excess(kvarhLagging; 0.5 * kw), each: hour }', 'q.sum: an energy (kvarh) and a power (kW) cannot be'],
    ['q: { past: maxKw > kvarh, take: streak }', 'q.past: a power (kW) and an energy (kvarh) cannot be compared.'],
  ])('%s', (quantity, read) => {
    expect(said(quantity)).toHaveLength(1);
    expect(said(quantity)[0]).toContain(`quantities.${read}`);
  });

  const fee = 'fee: { amount: contractKva * late * useHours * share, group: fixed }';
  it.each<[charge: string, read: string]>([
    [
      'c: { per: kwh, rate: price, group: reactive }',
      'charges.c.rate: the rate is per kvarh, the line per kWh. Charge the',
    ],
    [
      'c: { per: kwhBy, rate: 1.02 * price, group: energy }',
      'charges.c.rate: the rate is per kvarh, the line per kWh.',
    ],
    [
      'c: { per: maxKw, rate: dollars, group: demand }',
      'charges.c.rate: the rate is in USD, the schedule in EUR. Give it in',
    ],
    [
      'c: { per: kwh, tiers: [ { to: maxKw, rate: 1 }, { rate: 2 } ], group: energy }',
      'charges.c.tiers.1.to: the upper end is a power (kW), the quantity an energy. Multiply it by hours of use',
    ],
    [
      'c: { per: maxKw, tiers: [ { to: 0.5 * kwh, rate: 1 }, { rate: 2 } ], group: energy }',
      'charges.c.tiers.1.to: the upper end is an energy (kWh), the quantity a power.',
    ],
    ['c: { amount: 1, when: maxKw > kwh, group: fixed }', 'charges.c.when: a power (kW) and an energy (kWh) cannot be'],
  ])('%s', (charge, read) => {
    const problems = said('dollars: { formula: 5, unit: USD/kW }', `${fee}\n  ${charge}`);
    expect(problems).toHaveLength(1);
    expect(problems[0]).toContain(read);
  });
});

describe('units that are only odd are noted', () => {
  it.each<[quantity: string, read: string]>([
    [
      'q: { formula: kwh + kvarh }',
      'quantities.q.formula: The formula adds kWh to kvarh as they are: active and reactive stand at right angles, hypot(a; b) adds them.',
    ],
    [
      'q: { formula: maxKw - maxKvar }',
      'quantities.q.formula: The formula subtracts kvar from kW as they are: active and reactive stand at right angles, hypot(a; b) adds them.',
    ],
    [
      'q: { formula: kvarh / kwh, unit: kvarh }',
      'quantities.q.unit: "kvarh" does not fit: it comes out as a bare number.',
    ],
  ])('%s', (quantity, read) => {
    expect(noted(quantity)).toEqual([read]);
  });

  it('an amount of unlike names: each may stand for itself times 1 (kVA times hours is an energy)', () => {
    expect(
      noted('q: { formula: 1 }', 'fee: { amount: contractKva * late * useHours * share + maxKw + kwh, group: fixed }'),
    ).toEqual([`charges.fee.amount: an energy and a power (kW) cannot be added. ${energy}`]);
  });
});

describe('units raise no false alarm', () => {
  // Forms of published rules, see the table of forms in the language's design.
  it.each([
    'q: { formula: excess(kvarh; 0.33 * kwh), unit: kvarh }',
    'q: { formula: excess(kvarh; tanOf(0.9) * kwh), unit: kvarh }',
    'q: { formula: excess(maxKvar; 0.6197 * maxKw), unit: kvar }',
    'q: { formula: kvarh + 0.09 * lowSide * kwh, unit: kvarh }',
    'q: { formula: kvarh + 0.09 * kwh, unit: kvarh }',
    'q: { formula: excess(kvarh; seasonal * kwh), unit: kvarh }',
    'q: { formula: kvarh / kwh }',
    'q: { formula: max(maxKw; 0.90 * maxKva; 0.6 * contractKva), unit: kW }',
    'q: { formula: maxKw * max(1; 0.92 / cos), unit: kW }',
    'q: { formula: maxKw * (1 + excess(0.85; cos)), unit: kW }',
    'q: { formula: if(cos < 0.96; maxKw / cos; maxKw), unit: kW }',
    'q: { formula: if(kvarh > 0.15 * kwh; kvarh; 0), unit: kvarh }',
    'q: { formula: hypot(kwh; kvarh), unit: kVAh }',
    'q: { formula: sqrt(kwh ^ 2 + kvarh ^ 2), unit: kVAh }',
    'q: { formula: kwh / hours, unit: kW }',
    'q: { formula: kwh / maxKw / hours, unit: points }',
    'q: { formula: excess(kwh; 250 * maxKw), unit: kWh }',
    'q: { formula: excess(kwh; useHours * maxKw), unit: kWh }',
    'q: { formula: excess(kwh; other * maxKw), unit: kWh }',
    'q: { formula: kwh / 1000, unit: MWh }',
    'q: { formula: 0.001 * kwh, unit: MWh }',
    'q: { formula: max(maxKw; 1000 * plantMw), unit: kW }',
    'q: { formula: sqrt((1 + max(kvarh / kwh; 0.4) ^ 2) / (1 + 0.4 ^ 2)) - 1 }',
    'q: { formula: kwh * excess(0.92 / cos; 1), unit: kWh }',
    'q: { formula: 0.05 * kwh + 1.10 * maxKw, unit: EUR }',
    'q: { formula: price * kvarh + dear * maxKw, unit: EUR }',
    'q: { formula: 60 * (0.90 / cos - 1), round: 0.1 }',
    'q: { formula: maxKw + 5, unit: kW }',
    'q: { formula: kwh > 0 and maxKw > 0 and not lowSide }',
    'q: { sum: kwh * excess(0.92 / pf(kwh; kvarhLagging); 1), each: hour }',
    'q: { sum: between(kvarhLagging; 0.3 * kwh; 0.4 * kwh), each: day }',
    'q: { highest: kw * 0.92 / pf(kw; kvarLagging) }',
    'q: { lowest: kw, where: kw >= 0.25 * maxKw }',
    'q: { formula: max(kvarh; kwh), unit: kVAh }',
  ])('%s', (quantity) => {
    expect(said(quantity)).toEqual([]);
    expect(noted(quantity)).toEqual([]);
  });

  const fee = 'fee: { amount: contractKva * late * useHours * share, group: fixed }';
  it.each([
    'c: { per: kvarh, rate: price, group: reactive }',
    'c: { per: kwh, tiers: [ { to: 250 * maxKw, rate: 1 }, { rate: 2 } ], group: energy }',
    'c: { per: kvarh, tiers: [ { to: 0.75 * kwh, rate: 1 }, { rate: 2 } ], group: reactive }',
    'c: { per: kwh, tiers: [ { to: useHours * maxKw, rate: 1 }, { rate: 2 } ], group: energy }',
    'c: { amount: 0.05 * kwh + 3.10 * maxKw + 2.30 * days, group: fixed }',
    'c: { per: kwh, rate: 0.00005 * 100 * excess(0.85; cos), group: reactive }',
    'c: { percentOf: fee, per: kwh, rate: price, group: tax }',
    'c: { topUp: all above, to: 15 * contractKva, group: adjustment }',
    'c: { amount: 0.5 * fee, when: fee > 100, group: fixed }',
  ])('%s', (charge) => {
    expect(said('q: { formula: 1 }', `${fee}\n  ${charge}`)).toEqual([]);
    expect(noted('q: { formula: 1 }', `${fee}\n  ${charge}`)).toEqual([]);
  });
});
