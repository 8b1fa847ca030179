import { january, ownInputs, text, type TariffCase } from './tariff-case';

/** Demand adjusted by power factor, and percentages on charges. */
export const chargeCases: TariffCase[] = [
  {
    id: 'MX-HM-2004-penalty',
    source:
      'Correccion del factor de potencia, industrial plant bill of January 2004 (teaching deck, scribd 381288443): printed answer from printed inputs',
    schedule: text(
      'MXN',
      'America/Mexico_City',
      `
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  energyCharge: { given: MXN }
  demandCharge: { given: MXN }
  pf: { formula: pf(kwh; kvarh), round: 0.0001 }
  penaltyPct: { formula: 60 * (0.9 / pf - 1), round: 0.1, unit: percent }
charges:
  energy: { amount: energyCharge, group: energy }
  demand: { amount: demandCharge, group: demand }
  penalty: { percentOf: [energy, demand], rate: penaltyPct, when: pf < 0.9, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { kwh: 495192, kvarh: 484884, energyCharge: 331383.84, demandCharge: 87151.61 } }],
    // 60 x (0.9 / 0.7145 - 1) = 15.58 -> 15.6 %; 418,535.45 x 0.156
    expected: { pf: 0.7145, penaltyPct: 15.6, penalty: 65291.53 },
    tolerance: 0.005,
  },
  ...(
    [
      [0.8, 150],
      [0.75, 300],
    ] as const
  ).map(([pf, surcharge], i) => ({
    id: `MY-TNB-example-${i + 1}`,
    source:
      'Pengiraan Surcaj Faktor Kuasa (explanatory note of a Malaysian utility, pdfcoffee): printed answers 150 and 300 on RM 2,000',
    schedule: text(
      'MYR',
      'Asia/Kuala_Lumpur',
      `
quantities:
  billed: { given: MYR }
  pf: { given: fraction }
  pointsBelow: { formula: 100 * excess(0.85; pf), unit: points }
charges:
  current: { amount: billed, group: energy }
  surcharge:
    percentOf: [current]
    per: pointsBelow
    tiers: [ { to: 10, rate: 1.5 }, { rate: 3 } ]
    group: reactive`,
    ),
    rows: [{ ...january, quantities: { billed: 2000, pf } }],
    expected: { surcharge },
    tolerance: 0.005,
  })),
  {
    id: 'CL-093-school',
    source:
      'Multas por factor de potencia, Circulo de Electricidad, January 2015, bill of a school: printed answer from printed inputs',
    schedule: text(
      'CLP',
      'America/Santiago',
      `
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  energyBill: { given: CLP }
  pf: { formula: pf(kwh; kvarh), round: 0.0001 }
  pointsBelow: { formula: 100 * excess(0.93; pf), unit: points }
charges:
  energy: { amount: energyBill, group: energy, round: 1 }
  surcharge: { percentOf: [energy], per: pointsBelow, rate: 1, group: reactive, round: 1 }`,
    ),
    rows: [{ ...january, quantities: { kwh: 4238, kvarh: 3102, energyBill: 358466 } }],
    expected: { pf: 0.8069, surcharge: 44127 },
    tolerance: 0.5,
  },
  {
    id: 'US-NE-extension-whole-bill',
    source:
      'Understanding Electricity Bills, G2312, University of Nebraska-Lincoln Extension, November 2018, table I. The fraction 0.40, 0.0265 USD/kWh and 2.5951 USD/kvar are back-derived from its figures; the demand line and the city dividend are taken as printed',
    schedule: text(
      'USD',
      'America/Chicago',
      `
quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw }
  kvarAtPeak: { value: kvarLagging, at: maxKw }
  demandLine: { given: USD }
  dividendLine: { given: USD }
  allowedKvar: { formula: 0.40 * maxKw, unit: kvar }
  excessKvar: { formula: excess(kvarAtPeak; allowedKvar), unit: kvar }
  pfPct: { formula: 100 * pf(maxKw; kvarAtPeak), round: 0.01, unit: percent }
charges:
  customer: { amount: 250.00, group: fixed }
  energy: { per: kwh, rate: 0.0265, group: energy }
  demand: { amount: demandLine, group: demand }
  reactive: { per: excessKvar, rate: 2.5951, group: reactive }
  dividend: { amount: dividendLine, group: tax }`,
    ),
    rows: [
      {
        ...january,
        quantities: { kwh: 470600, maxKw: 986.4, kvarAtPeak: 482.6, demandLine: 13617.5, dividendLine: 775.98 },
      },
    ],
    expected: {
      allowedKvar: 394.56,
      excessKvar: 88.04,
      pfPct: 89.83,
      energy: 12470.9,
      reactive: 228.47,
      total: 27342.85,
    },
    tolerance: 0.005,
  },
  {
    id: 'JP-20kV-base-2016',
    source:
      'How the high-voltage basic charge works (tcss-gunma), 20 kV in the Tokyo area, November 2016: printed answer from printed inputs',
    schedule: text(
      'JPY',
      'Asia/Tokyo',
      `
quantities:
  contractKw: { given: kW }
  pfDay: { given: percent }
charges:
  base: { per: contractKw, rate: 1630.80 * (185 - pfDay) / 100, group: demand, round: 1 }`,
    ),
    rows: [{ ...january, quantities: { contractKw: 3000, pfDay: 100 } }],
    expected: { base: 4158540 },
    tolerance: 0.5,
  },
  {
    id: 'US-generic-kVA-10',
    source: 'Power factor formulas: 8 types (Foretag Group, consultant page): printed answer from printed inputs',
    schedule: text(
      'USD',
      'America/New_York',
      `
quantities:
  maxKw: { highest: kw }
  pf: { given: fraction }
  maxKva: { formula: maxKw / pf, unit: kVA }
charges:
  demand: { per: maxKva, rate: 10, group: demand }`,
    ),
    rows: [{ ...january, quantities: { maxKw: 800, pf: 0.8 } }],
    expected: { maxKva: 1000, demand: 10000 },
    tolerance: 0.005,
  },
  {
    id: 'US-generic-090-over-pf',
    source:
      'Power factor formulas: 8 types (Foretag Group, consultant page): printed answer from printed inputs, penalty 1,000 above 800 kW x 10',
    schedule: text(
      'USD',
      'America/New_York',
      `
quantities:
  maxKw: { highest: kw }
  pf: { given: fraction, unity: 1 }
  billedKw: { formula: maxKw * max(1; 0.90 / pf), unit: kW }
charges:
  demand: { per: billedKw, rate: 10, group: demand }`,
    ),
    rows: [{ ...january, quantities: { maxKw: 800, pf: 0.8 } }],
    expected: { billedKw: 900, demand: 9000, reactiveCost: 1000 },
    tolerance: 0.005,
  },
  {
    id: 'US-IL-StCharles',
    source: `St Charles, Illinois, city code 13.08.260, Rate 5. ${ownInputs}`,
    schedule: text(
      'USD',
      'America/Chicago',
      `
quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw }
  pf: { given: fraction }
  billedKw: { formula: maxKw * (1 + excess(0.85; pf)), unit: kW }
charges:
  customer: { amount: 70.70, group: fixed }
  demand: { per: billedKw, rate: 20.20, group: demand }
  energy: { per: kwh, rate: 0.0630, group: energy }`,
    ),
    rows: [{ ...january, quantities: { kwh: 250000, maxKw: 600, pf: 0.78 } }],
    expected: { billedKw: 642, demand: 12968.4, total: 28789.1 },
    tolerance: 0.005,
  },
  {
    id: 'VN-k-table-083',
    source: `Circular 15/2014/TT-BCT, table k (Electric Power University). ${ownInputs}`,
    schedule: text(
      'VND',
      'Asia/Ho_Chi_Minh',
      `
quantities:
  energyCharge: { given: VND }
  cos: { given: fraction }
  k: { pick: cos, from: { 0.90: 0, 0.84: 7.14, 0.83: 8.43, 0.82: 9.76, 0.60: 50 }, otherwise: 52.54, unit: percent }
charges:
  energy: { amount: energyCharge, group: energy, round: 1 }
  reactive: { percentOf: [energy], rate: k, group: reactive, round: 1 }`,
    ),
    rows: [{ ...january, quantities: { energyCharge: 100000000, cos: 0.83 } }],
    expected: { k: 8.43, reactive: 8430000 },
    tolerance: 0.005,
  },
  ...(
    [
      [0.92, 7500],
      [0.97, -5000],
    ] as const
  ).map(([pf, amount]) => ({
    id: `IN-KSEB at ${pf}`,
    source: `Kerala power factor incentive and penalty (pgea.in): 0.5 % per 0.01 between 0.95 and 0.90, 1 % below, 0.5 % credit above. ${ownInputs}`,
    schedule: text(
      'INR',
      'Asia/Kolkata',
      `
quantities:
  energyCharge: { given: INR }
  pf: { given: fraction }
  pointsBelow: { formula: 100 * excess(0.95; pf), unit: points }
  pointsAbove: { formula: 100 * excess(pf; 0.95), unit: points }
charges:
  energy: { amount: energyCharge, group: energy }
  penalty: { percentOf: [energy], per: pointsBelow, tiers: [ { to: 5, rate: 0.5 }, { rate: 1 } ], group: reactive }
  incentive: { percentOf: [energy], per: pointsAbove, rate: -0.5, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { energyCharge: 500000, pf } }],
    expected: { [amount > 0 ? 'penalty' : 'incentive']: amount },
    tolerance: 0.005,
  })),
  {
    id: 'GH-EPC-095',
    source: `Explanation of bill, Enclave Power Company, Ghana (epcghana.com); the rate per kVA is a placeholder. ${ownInputs}`,
    schedule: text(
      'GHS',
      'Africa/Accra',
      `
quantities:
  maxKva: { highest: kva }
  pf: { given: fraction }
  points: { formula: 100 * excess(0.95; pf), unit: points }
charges:
  demand: { per: maxKva, rate: 60, group: demand }
  surcharge: { percentOf: [demand], per: points, rate: 1, group: reactive }`,
    ),
    rows: [{ ...january, quantities: { maxKva: 500, pf: 0.87 } }],
    expected: { demand: 30000, surcharge: 2400 },
    tolerance: 0.005,
  },
  {
    id: 'DE-MV-096-kVA',
    source: `Abrechnung Blindstrommehrbedarf, Anlage 7 of a German network operator (studylibde 7839312); price and rounding of kVA assumed. ${ownInputs}`,
    schedule: text(
      'EUR',
      'Europe/Berlin',
      `
quantities:
  maxKw: { highest: kw, round: 0.1 }
  cos: { given: fraction, round: 0.0001 }
  billedKva: { formula: if(cos < 0.96; maxKw / cos; maxKw), unit: kVA, round: 0.1 }
charges:
  demand: { per: billedKva, rate: 10, group: demand }`,
    ),
    rows: [{ ...january, quantities: { maxKw: 850, cos: 0.90123 } }],
    expected: { cos: 0.9012, billedKva: 943.2, demand: 9432 },
    tolerance: 0.005,
  },
  {
    id: 'CA-HQ-M-billing-demand',
    source: `Hydro-Quebec, Rate M bill details: greater of kW and 90 % of kVA, never below 65 % of the winter's highest. ${ownInputs}`,
    schedule: text(
      'CAD',
      'America/Toronto',
      `
seasons:
  winter: 12-01 to 03-31
  summer: rest
quantities:
  maxKw: { highest: kw }
  maxKva: { highest: kva }
  maxDemand: { formula: max(maxKw; 0.90 * maxKva), unit: kW }
  winterMax: { past: maxDemand, take: highest, over: this and last 11 periods, season: wholly winter }
  minimumKw: { formula: 0.65 * winterMax, unit: kW }
  billedKw: { formula: max(maxDemand; minimumKw), unit: kW }
charges:
  demand: { per: billedKw, rate: 1, group: demand }`,
    ),
    // June: the history's last month but two, March, lies wholly in winter; April and May (greater) do not.
    rows: [{ from: '2026-06-01', to: '2026-07-01', quantities: { maxKw: 800, maxKva: 950 } }],
    options: { history: { maxDemand: [1400, 1500, 1500] } },
    expected: { maxDemand: 855, minimumKw: 910, billedKw: 910 },
    tolerance: 0.005,
  },
];
