// Schedules worked by hand in the language's design.

/** kVA demand with a ratchet, time of use, kvarh beyond an allowance, surcharge by points, a new sheet in August. */
export const millrace = `schedule: millrace-large
title: Large supply, kVA demand, time of use
currency: EUR
timeZone: Europe/Lisbon
source: { publisher: Millrace Power, title: Sheet 4, date: 2025-12-15, status: invented }
inForce: 2026-01-01
demandWindow: 15 min
holidays: { calendar: PT, add: [2026-12-24] }
straddle: intervals
rounding: 0.01
zeroKwh: { pf: 1 }

contract:
  contractKva: { unit: kVA, default: 2000, range: [100, 50000], label: Contract power }

rates:
  allowance: 0.40
  fuel: { months: { 2026-07: 0.0031, 2026-08: 0.0029 } }

seasons:
  summer: 05-01 to 10-31
  winter: rest

windows:
  peak:
    - { season: summer, days: weekdays, hours: 10:00-20:00 }
    - { season: winter, days: weekdays, hours: [08:00-11:00, 17:00-22:00] }
  night:   { days: every day, hours: 22:00-06:00 }
  offPeak: { rest: peak }

quantities:
  kwh:         { sum: kwh, inEach: [peak, offPeak] }
  allKwh:      { formula: total(kwh), unit: kWh }
  kvarh:       { sum: kvarhLagging }
  maxKva:      { highest: kva }
  yearKva:     { past: maxKva, take: highest, over: last 11 periods }
  billedKva:   { formula: max(maxKva; 0.80 * yearKva; 0.50 * contractKva), unit: kVA, clause: "4.2" }
  excessKvarh: { formula: excess(kvarh; allowance * allKwh), unit: kvarh }
  leadNight:   { sum: excess(kvarhLeading; 0.20 * kwh), each: hour, in: night }
  pf:          { formula: pf(allKwh; kvarh), round: 0.01 }
  pointsBelow: { formula: 100 * excess(0.90; pf), unit: points }

charges:
  service:   { amount: 420.00, group: fixed, label: Service }
  demand:    { per: billedKva, rate: { summer: 11.50, winter: 8.20 }, group: demand, clause: "4.2" }
  energy:
    per: kwh
    rate:
      peak:    { summer: 0.1420, winter: 0.1310 }
      offPeak: { summer: 0.0880, winter: 0.0910 }
    group: energy
  fuelRider: { per: allKwh, rate: fuel, group: adjustment }
  reactive:  { per: excessKvarh, rate: 0.0180, group: reactive }
  leading:   { per: leadNight, rate: 0.0120, group: reactive }
  surcharge:
    percentOf: [demand, energy]
    per: pointsBelow
    tiers:
      - { to: 10, rate: 1 }
      - { rate: 2 }
    group: reactive
  minimum:   { topUp: all above, to: 15 * contractKva, group: adjustment }
  tax:       { percentOf: all above, rate: 6, group: tax }

versions:
  2026-08-01:
    note: Sheet 5
    rates: { allowance: 0.33 }
    charges:
      reactive:  { rate: 0.0210 }
      fuelRider: removed
      levy:      { per: allKwh, rate: 0.0011, group: tax, before: tax }
`;

/** The same without its reactive lines and its version. */
export const millracePlain = `schedule: millrace-plain
currency: EUR
timeZone: Europe/Lisbon
inForce: 2026-01-01
demandWindow: 15 min
holidays: { calendar: PT, add: [2026-12-24] }
straddle: intervals

rates:
  fuel: { months: { 2026-10: 0.0031, 2026-11: 0.0027 } }

seasons:
  summer: 05-01 to 10-31
  winter: rest

windows:
  peak:
    - { season: summer, days: weekdays, hours: 10:00-20:00 }
    - { season: winter, days: weekdays, hours: [08:00-11:00, 17:00-22:00] }
  offPeak: { rest: peak }

quantities:
  kwh:       { sum: kwh, inEach: [peak, offPeak] }
  allKwh:    { formula: total(kwh), unit: kWh }
  maxKva:    { highest: kva }
  yearKva:   { past: maxKva, take: highest, over: last 11 periods }
  billedKva: { formula: max(maxKva; 0.80 * yearKva), unit: kVA }

charges:
  service:   { amount: 420.00, group: fixed }
  demand:    { per: billedKva, rate: { summer: 11.50, winter: 8.20 }, group: demand }
  energy:
    per: kwh
    rate:
      peak:    { summer: 0.1420, winter: 0.1310 }
      offPeak: { summer: 0.0880, winter: 0.0910 }
    group: energy
  fuelRider: { per: allKwh, rate: fuel, group: adjustment }
  tax:       { percentOf: all above, rate: 6, group: tax }
`;

/** kW adjusted by power factor, tiers by hours of use, monthly rider, minimum, tax. */
export const kestrel = `schedule: kestrel
currency: USD
timeZone: America/Denver
inForce: 2026-01-01
demandWindow: 15 min
straddle: days
zeroKwh: { pf: 1 }

contract:
  contractKw: { unit: kW }

rates:
  fuel: { months: { 2026-03: 0.00412, 2026-04: 0.00398 } }

quantities:
  kwh:      { sum: kwh }
  kvarh:    { sum: kvarhLagging }
  maxKw:    { highest: kw }
  pf:       { formula: pf(kwh; kvarh), round: 0.01 }
  billedKw: { formula: maxKw * max(1; 0.92 / pf), unit: kW, round: 0.1 }

charges:
  service:   { amount: 95.00, group: fixed }
  demand:    { per: billedKw, rate: 12.40, group: demand }
  energy:
    per: kwh
    tiers:
      - { to: 250 * billedKw, rate: 0.081 }
      - { to: 400 * billedKw, rate: 0.064 }
      - { rate: 0.049 }
    group: energy
  fuelRider: { per: kwh, rate: fuel, group: adjustment }
  minimum:   { topUp: all above, to: 18 * contractKw, group: adjustment }
  tax:       { percentOf: all above, rate: 8, group: tax }
`;

/** kvarh settled by day, leading energy at night, new prices inside a bill. */
export const tidewater = `schedule: tidewater
currency: EUR
timeZone: Europe/Oslo
inForce: 2026-01-01
straddle: intervals

windows:
  night: { days: every day, hours: 23:00-07:00 }
  day: { rest: night }

quantities:
  kwh:         { sum: kwh }
  excessKvarh: { sum: excess(kvarhLagging; 0.40 * kwh), each: day, in: day }
  leadNight:   { sum: kvarhLeading, in: night }

charges:
  fixed:  { amount: 310, group: fixed }
  energy: { per: kwh, rate: 0.095, group: energy }
  excess: { per: excessKvarh, rate: 0.0180, group: reactive }
  lead:   { per: leadNight, rate: 0.0120, group: reactive }

versions:
  2026-07-01:
    charges:
      energy: { rate: 0.099 }
      excess: { rate: 0.0210 }
      lead:   { rate: 0.0150 }
`;
