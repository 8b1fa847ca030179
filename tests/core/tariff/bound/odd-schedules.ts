/** Schedules that use what published ones seldom do, so that no construct of the language goes without its ranges. */

const head = (rest: string): string => `schedule: example
currency: EUR
timeZone: Europe/Lisbon
inForce: 2025-01-01
${rest}
`;

const functions = head(`straddle: days
demandWindow: 60 min
zeroKwh: { pf: 0.9, ratio: 0.3 }
contract:
  size: { unit: kW, default: 400, range: [10, 5000] }
  since: { unit: date, default: 20250115 }
quantities:
  kwh: { sum: kwh }
  lag: { sum: kvarhLagging }
  lead: { sum: kvarhLeading }
  net: { sum: kvarhNet }
  kvah: { sum: kvah, each: hour }
  maxKw: { highest: kw }
  minKw: { lowest: kw, where: kw >= 0.25 * maxKw }
  leadAtMin: { value: kvarLeading, at: minKw }
  lagAtMax: { value: kvarLagging, at: maxKw }
  top3: { highest: kva, count: 3, days: distinct }
  top4: { highest: kvarNet, count: 4, where: kw > 0.5 * maxKw }
  low2: { lowest: kw, count: 2, days: distinct }
  cos: { formula: pf(kwh; lag), round: 0.01 }
  tan: { formula: ratio(net; kwh), round: 0.001 down }
  power: { formula: (1 + cos) ^ 2 + 0.5 ^ tan, round: 0.0001 up }
  length: { formula: hypot(kwh; lag; lead) + abs(net) + 3 * sqrt(lag) * sqrt(lag), unit: kWh }
  flags: { formula: (cos < 0.9 and not tan > 0.4) or lag = lead or lag != net or lag <= 0 or cos >= 1, unit: flag }
  part: { formula: between(lag; 0.2 * kwh; 0.5 * kwh), unit: kvarh, round: 1 half down }
  sure: { formula: if(kwh > 0; lag / max(kwh; 1); 2), unit: kvarh }
  point: { formula: tanOf(max(0.2; min(1; cos))), round: 0.01 }
  price: { pick: cos, from: { 0.95: 0, 0.9: 0.01, 0.8: 0.02 * point }, otherwise: 0.05, unit: EUR/kvarh }
  age: { formula: daysSince(since), unit: days }
charges:
  fixed: { amount: 2.30 * days + hours, group: fixed }
  demand: { per: maxKw, rate: 3.1 * power, group: demand }
  energy:
    per: kwh
    tiers: [ { to: 20 * maxKw, rate: 0.2 }, { to: 50 * top3, rate: 0.1 }, { rate: 0.15 } ]
    group: energy
  reactive: { per: lag, rate: price, when: flags = 1, group: reactive }
  leading: { per: leadAtMin, rate: 0.7, group: reactive }
  coincident: { per: lagAtMax, rate: 0.3, group: reactive }
  bonus: { percentOf: [demand, energy], per: cos, tiers: [ { to: 0.8, rate: -1 }, { to: 0.9, rate: 3 }, { rate: -9 } ], group: reactive }
  netLine: { amount: 0.001 * net + 0.001 * (top4 - low2) + 0.0001 * length, round: 0.05 up, group: adjustment }
  sizeLine: { amount: 0.01 * size * (age > 100) + sure + 0.001 * part + 0.0001 * kvah, group: fixed }
  most: { cap: [reactive, leading, coincident], to: 0.4 * energy, group: adjustment }
  least: { topUp: all above, to: 6 * size, group: adjustment }
  tax: { percentOf: all above, rate: 7, group: tax }`)
  .replace('  netLine: { amount', '  netLine: { amount')
  .replace('  sizeLine: { amount', '  sizeLine: { amount');

const borders = head(`straddle: intervals
demandWindow: 30 min rolling every 15 min
zeroKwh: { pf: 1, ratio: 0 }
rates:
  rider: { months: { 2026-04: 0.01, 2026-05: -0.02, 2026-06: 0.03 } }
seasons: { warm: 05-01 to 05-07, cold: rest }
windows:
  day: { days: weekdays, hours: 07:00-21:00 }
  rest: { rest: day }
quantities:
  kwh: { sum: kwh, inEach: [day, rest] }
  all: { formula: total(kwh), unit: kWh }
  lag: { sum: kvarhLagging }
  over: { sum: excess(kvarhLagging; 0.3 * kwh), each: day }
  rescaled: { sum: kwh * excess(0.92 / pf(kwh; kvarhLagging); 1), each: hour, where: kwh > 0 }
  maxKva: { highest: kva, in: day }
  past: { past: maxKva, take: highest, over: this and last 3 periods }
  mean: { past: lag + 1, take: mean of 2 highest, over: last 3 periods }
  low: { past: over, take: lowest, over: last 2 periods }
  run: { past: over > 100, take: streak, unit: months }
  years: { past: lag > 500, take: count, over: this and earlier periods of this year }
  sum: { past: reactive + tax, take: sum, over: last 4 periods }
charges:
  service: { amount: { warm: 10, cold: 20 }, group: fixed }
  demand: { per: past, rate: { warm: 3, cold: 5 }, group: demand }
  energy: { per: kwh, rate: { day: { warm: 0.2, cold: 0.3 }, rest: 0.1 }, group: energy }
  riderLine: { per: all, rate: rider, group: adjustment }
  reactive: { per: over, rate: { warm: 0.05, cold: 0.02 }, group: reactive }
  scaled: { per: rescaled, rate: 0.1 * (1 + run), when: run < 3, group: reactive }
  average: { per: mean, rate: 0.001 * low / 100, group: reactive }
  memory: { amount: 0.01 * sum + years, group: adjustment }
  bonus: { percentOf: [energy, riderLine, reactive], rate: -2, when: past < 400, group: adjustment }
  least: { topUp: [demand, service], to: 500, group: demand }
  most: { cap: all above, to: 9000 + 0.2 * all, group: adjustment }
  tax: { percentOf: all above, rate: 20, group: tax }
versions:
  2026-05-05:
    charges:
      reactive: { rate: { warm: 0.08, cold: 0.01 } }
      least: removed
      levy: { per: all, rate: 0.001, group: tax, before: tax }`);

export const odd = { functions, borders };
