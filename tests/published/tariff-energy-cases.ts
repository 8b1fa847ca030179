import { january, ownInputs, text, type TariffCase } from './tariff-case';

/** Reactive energy and power beyond an allowance, singly, by bands, as a cliff. */
export const energyCases: TariffCase[] = [
  {
    id: 'ES-P1-3000-1500',
    source: `Example quantities: fornieles.es (allowance of 990 kvarh printed); prices: enchufesolar.com; both cite RD 1164/2001 and Circular 3/2020. ${ownInputs}`,
    schedule: text(
      'EUR',
      'Europe/Madrid',
      `
windows:
  p1: { days: weekdays, hours: 10:00-14:00 }
quantities:
  kwh: { sum: kwh, inEach: [p1] }
  kvarh: { sum: kvarhLagging, inEach: [p1] }
  allowed: { formula: 0.33 * kwh, unit: kvarh }
  cos: { formula: pf(kwh; kvarh) }
  excessKvarh: { formula: excess(kvarh; allowed), unit: kvarh }
  price: { pick: cos, from: { 0.95: 0, 0.80: 0.041554 }, otherwise: 0.062332, unit: EUR/kvarh }
charges:
  reactive: { per: excessKvarh, rate: price, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwhP1: 3000, kvarhP1: 1500 } }],
    expected: { allowedP1: 990, excessKvarhP1: 510, reactiveP1: 21.19 },
    tolerance: 0.005,
  },
  ...(
    [
      [20500, 20500],
      [20000, 0],
    ] as const
  ).map(([kvarh, charge]) => ({
    id: `TR-cliff-edge at ${kvarh}`,
    source: `EPDK Usul ve Esaslar art. 13(3)-(4), as reproduced (hasanyucelmuhendislik.com): the whole quantity once 20 % is passed. ${ownInputs}`,
    schedule: text(
      'TRY',
      'Europe/Istanbul',
      `
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  billed: { formula: if(kvarh > 0.20 * kwh; kvarh; 0), unit: kvarh }
charges:
  reactive: { per: billed, rate: 1.00, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwh: 100000, kvarh } }],
    expected: { billed: charge, reactive: charge },
    tolerance: 0.005,
  })),
  {
    id: 'TH-MEA-412',
    source: `Large General Service 4.1.2, Metropolitan Electricity Authority (testmeaor.mea.or.th). ${ownInputs}`,
    schedule: text(
      'THB',
      'Asia/Bangkok',
      `
windows:
  onPeak: { days: every day, hours: 18:30-21:30 }
  partialPeak: { days: every day, hours: 08:00-18:30 }
quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw, inEach: [onPeak, partialPeak] }
  maxKvar: { highest: kvarLagging }
  extraKw: { formula: excess(maxKwPartialPeak; maxKwOnPeak), unit: kW }
  excessKvar: { formula: excess(maxKvar; 0.6197 * max(maxKwOnPeak; maxKwPartialPeak)), unit: kvar, round: 1 half down }
charges:
  onPeakDemand: { per: maxKwOnPeak, rate: 285.05, group: demand }
  partialDemand: { per: extraKw, rate: 58.88, group: demand }
  energy: { per: kwh, rate: 3.1471, group: energy }
  service: { amount: 312.24, group: fixed }
  powerFactor: { per: excessKvar, rate: 56.07, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwh: 900000, maxKwOnPeak: 1800, maxKwPartialPeak: 2000, maxKvar: 1500 } }],
    // 1,800 x 285.05 + 200 x 58.88 = 524,866; 1,500 - 0.6197 x 2,000 = 260.6 -> 261
    expected: { energy: 2832390, excessKvar: 261, powerFactor: 14634.27, total: 3372202.51 },
    tolerance: 0.005,
  },
  {
    id: 'PE-MT2-30pct',
    source: `Pliego tarifario MT2, Osinergmin (Id 150000). ${ownInputs}`,
    schedule: text(
      'PEN',
      'America/Lima',
      `
windows:
  peak: { days: every day, hours: 18:00-23:00 }
  offPeak: { rest: peak }
quantities:
  kwh: { sum: kwh, inEach: [peak, offPeak] }
  maxKw: { highest: kw, inEach: [peak, offPeak] }
  kvarh: { sum: kvarhLagging }
  extraKw: { formula: excess(maxKwOffPeak; maxKwPeak), unit: kW }
  excessKvarh: { formula: excess(kvarh; 0.30 * total(kwh)), unit: kvarh }
charges:
  fixed: { amount: 4.87, group: fixed }
  energy: { per: kwh, rate: { peak: 0.2769, offPeak: 0.2376 }, group: energy }
  generation: { per: maxKwPeak, rate: 61.35, group: demand }
  distribution: { per: maxKwPeak, rate: 15.13, group: demand }
  distributionExtra: { per: extraKw, rate: 15.52, group: demand }
  reactive: { per: excessKvarh, rate: 0.0481, group: reactive }`,
    ),
    rows: [
      {
        ...january,
        quantities: { kwhPeak: 10000, kwhOffPeak: 50000, maxKwPeak: 150, maxKwOffPeak: 200, kvarh: 24000 },
      },
    ],
    expected: { excessKvarh: 6000, reactive: 288.6, total: 27190.47 },
    tolerance: 0.005,
  },
  {
    id: 'IT-MV-2023',
    source: `Penali energia reattiva (energyteam.it, table of ARERA 712/2022 and 232/2022), medium voltage, April to December 2023; bands not pooled is our reading. ${ownInputs}`,
    schedule: text(
      'EUR',
      'Europe/Rome',
      `
windows:
  f1: { days: weekdays, hours: 08:00-19:00 }
  f2: { days: weekdays, hours: [07:00-08:00, 19:00-23:00] }
  f3: { rest: [f1, f2] }
quantities:
  kwh: { sum: kwh, inEach: [f1, f2] }
  kvarh: { sum: kvarhLagging, inEach: [f1, f2] }
  injected: { sum: kvarhLeading, in: f3 }
charges:
  reactive:
    per: kvarh
    tiers: [ { to: 0.33 * kwh, rate: 0 }, { to: 0.75 * kwh, rate: 0.00456 }, { rate: 0.00606 } ]
    group: reactive
  injection: { per: injected, rate: 0.00606, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwhF1: 40000, kvarhF1: 34000, kwhF2: 20000, kvarhF2: 7000, injected: 3000 } }],
    expected: { reactiveF1: 100.85, reactiveF2: 1.82, injection: 18.18 },
    tolerance: 0.005,
  },
  {
    id: 'FR-tan04-HV-metered',
    source: `Facturation (Alpes Technologies): tan phi 0.4, November to March; the price of 1.94 ct/kvarh is from memory. ${ownInputs}`,
    schedule: text(
      'EUR',
      'Europe/Paris',
      `
seasons:
  winter: 11-01 to 03-31
  summer: rest
windows:
  winterTime: { season: winter, days: every day, hours: 00:00-24:00 }
contract:
  lowSide: { unit: flag, default: 0 }
quantities:
  winterKwh: { sum: kwh, in: winterTime }
  kvarh: { sum: kvarhLagging, in: winterTime }
  tan: { formula: ratio(kvarh; winterKwh) }
  excessKvarh: { formula: excess(kvarh + 0.09 * lowSide * winterKwh; 0.4 * winterKwh), unit: kvarh }
charges:
  reactive: { per: excessKvarh, rate: 0.0194, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { winterKwh: 200000, kvarh: 110000 } }],
    expected: { tan: 0.55, excessKvarh: 30000, reactive: 582 },
    tolerance: 0.005,
  },
  {
    id: 'UK-DNO-33pct',
    source: `London Power Networks, Statement of Charges, October 2011, para. 2.21; the rate of 0.3 p is a placeholder. ${ownInputs}`,
    schedule: text(
      'GBP',
      'Europe/London',
      `
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  excessKvarh: { formula: excess(kvarh; 0.33 * kwh), unit: kvarh }
charges:
  reactive: { per: excessKvarh, rate: 0.0030, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwh: 500000, kvarh: 210000 } }],
    expected: { excessKvarh: 45000, reactive: 135, reactiveCost: 135 },
    tolerance: 0.005,
  },
  {
    id: 'US-CA-00005',
    source:
      'From memory: schedules of a large Californian utility, 0.00005 USD per kWh and whole percentage point from 85 %',
    schedule: text(
      'USD',
      'America/Los_Angeles',
      `
quantities:
  kwh: { sum: kwh }
  pfPct: { given: percent, round: 1 }
charges:
  adjustment: { per: kwh, rate: 0.00005 * (85 - pfPct), group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwh: 1500000, pfPct: 81 } }],
    expected: { adjustment: 300 },
    tolerance: 0.005,
  },
  {
    id: 'US-TVA-lead-lag',
    source:
      'From memory: kvar lagging above 33 % of kW at the highest demand, every leading kvar at the lowest demand of at least 25 % of it',
    schedule: text(
      'USD',
      'America/Chicago',
      `
quantities:
  maxKw: { highest: kw }
  minKw: { lowest: kw, where: kw >= 0.25 * maxKw }
  lagAtMax: { value: kvarLagging, at: maxKw }
  leadAtMin: { value: kvarLeading, at: minKw }
  excessKvar: { formula: excess(lagAtMax; 0.33 * maxKw), unit: kvar }
charges:
  lag: { per: excessKvar, rate: 0.46, group: reactive }
  lead: { per: leadAtMin, rate: 1.14, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { maxKw: 10000, lagAtMax: 4500, minKw: 6000, leadAtMin: 900 } }],
    expected: { lag: 552, lead: 1026, total: 1578 },
    tolerance: 0.005,
  },
];
