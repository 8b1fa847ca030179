import { figure, january, ownInputs, type FormCase } from './form-case';

/** Demand adjusted by power factor, and percentages on charges. */
export const chargeCases: FormCase[] = [
  {
    id: 'MX-HM-2004-penalty',
    form: 'percent-rational-curve',
    source:
      'Correccion del factor de potencia, industrial plant bill of January 2004 (teaching deck, scribd 381288443): printed answer from printed inputs; its demand charge of 87,151.61 stands as kW at 100.00',
    period: { from: '2004-01-01', to: '2004-02-01' },
    quantities: { kwh: 495192, kvarh: 484884, maxKw: 871.5161 },
    // 60 x (0.9 / 0.7145 - 1) = 15.58 -> 15.6 %; 418,535.45 x 0.156
    figures: [
      figure('energy', 331383.84),
      figure('demand', 87151.61),
      figure('pf', 0.7145, 'pf', 0.00005),
      figure('penaltyPct', 15.6, 'penalty_pct', 0.05),
      figure('penalty', 65291.53, 'penalty'),
    ],
    within: 0.005,
  },
  ...(
    [
      [0.8, 150],
      [0.75, 300],
    ] as const
  ).map(([pf, surcharge], i) => ({
    id: `MY-TNB-example-${i + 1}`,
    form: 'percent-per-hundredth-two-slopes',
    source:
      'Pengiraan Surcaj Faktor Kuasa (explanatory note of a Malaysian utility, pdfcoffee): printed answers 150 and 300 on RM 2,000',
    period: january,
    quantities: { kwh: 8000, pf },
    figures: [figure('energy', 2000), figure('surcharge', surcharge, 'surcharge')],
    within: 0.005,
  })),
  {
    id: 'CL-093-school',
    form: 'percent-per-hundredth',
    source:
      'Multas por factor de potencia, Circulo de Electricidad, January 2015, bill of a school: printed answer from printed inputs',
    period: { from: '2015-01-01', to: '2015-02-01' },
    quantities: { kwh: 4238, kvarh: 3102 },
    figures: [
      figure('pf', 0.8069, 'pf', 0.00005),
      figure('energy', 358466),
      figure('surcharge', 44127, 'surcharge_clp'),
    ],
    within: 0.5,
  },
  {
    id: 'US-NE-extension-whole-bill',
    form: 'kvar-over-share-of-kw',
    source:
      'Understanding Electricity Bills, G2312, University of Nebraska-Lincoln Extension, November 2018, table I. The fraction 0.40, 0.0265 USD/kWh, 2.5951 USD/kvar, 13.80525 USD/kW and the dividend of 2.92086 % are back-derived from its figures',
    period: { from: '2016-07-15', to: '2016-08-15' },
    quantities: { kwh: 470600, maxKw: 986.4, kvarAtPeak: 482.6 },
    figures: [
      figure('allowedKvar', 394.56, 'allowed_kvar'),
      figure('excessKvar', 88.04, 'excess_kvar'),
      figure('energy', 12470.9, 'energy'),
      figure('demand', 13617.5),
      figure('reactive', 228.47),
      figure('dividend', 775.98),
      figure('customer + energy + demand + reactive', 26566.87, 'bill_amount'),
      figure('total', 27342.85, 'current_bill'),
    ],
    within: 0.005,
    inside: { pf_pct: { values: [89.83], why: 'no line rests on it; the case at the free region checks it' } },
  },
  {
    id: 'US-NE-extension-whole-bill, its power factor',
    form: 'kvar-below-free-region',
    source: 'Understanding Electricity Bills, G2312, table I: power factor at the peak, printed',
    period: { from: '2016-07-15', to: '2016-08-15' },
    quantities: { kwh: 470600, maxKw: 986.4, kvarAtPeak: 482.6 },
    figures: [figure('pfPct', 89.83)],
    within: 0.005,
  },
  {
    id: 'JP-20kV-base-2016',
    form: 'base-charge-both-sides-of-85',
    source:
      'How the high-voltage basic charge works (tcss-gunma), 20 kV in the Tokyo area, November 2016: printed answer from printed inputs',
    period: { from: '2016-11-01', to: '2016-12-01' },
    quantities: { contractKw: 3000, pfDay: 100, kwh: 0 },
    figures: [figure('base', 4158540, 'base_charge')],
    within: 0.5,
  },
  {
    id: 'US-generic-kVA-10',
    form: 'kva-demand-from-kw',
    source: 'Power factor formulas: 8 types (Foretag Group, consultant page): printed answer from printed inputs',
    period: january,
    quantities: { maxKw: 800, pf: 0.8, kwh: 0 },
    figures: [figure('maxKva', 1000, 'kVA'), figure('demand', 10000, 'charge')],
    within: 0.005,
  },
  {
    id: 'US-generic-090-over-pf',
    form: 'kw-reference-over-pf',
    source:
      'Power factor formulas: 8 types (Foretag Group, consultant page): printed answer from printed inputs, penalty 1,000 above 800 kW x 10',
    period: january,
    quantities: { maxKw: 800, pf: 0.8, kwh: 300000 },
    figures: [figure('billedKw', 900, 'billed_kW'), figure('demand', 9000), figure('reactiveCost', 1000, 'penalty')],
    within: 0.005,
  },
  {
    id: 'US-IL-StCharles',
    form: 'kw-linear-below-reference',
    source: `St Charles, Illinois, city code 13.08.260, Rate 5. ${ownInputs}`,
    period: january,
    quantities: { kwh: 250000, maxKw: 600, pf: 0.78 },
    figures: [
      figure('billedKw', 642, 'billed_kW'),
      figure('demand', 12968.4, 'demand'),
      figure('total', 28789.1, 'total'),
    ],
    within: 0.005,
  },
  {
    id: 'VN-k-table-083',
    form: 'percent-lookup-table',
    source: `Circular 15/2014/TT-BCT, table k (Electric Power University). ${ownInputs}`,
    period: january,
    quantities: { kwh: 62500, cos: 0.83 },
    figures: [figure('energy', 100000000), figure('k', 8.43, 'k_pct'), figure('reactive', 8430000, 'Tq_vnd')],
    within: 0.005,
  },
  ...(
    [
      ['IN-KSEB-92', 0.92, 'penalty', 7500, 'amount'],
      ['IN-KSEB-92, credited at 0.97', 0.97, 'incentive', -5000, undefined],
    ] as const
  ).map(([id, pf, line, amount, key]) => ({
    id,
    form: 'percent-bonus-and-two-slopes',
    source: `Kerala power factor incentive and penalty (pgea.in): 0.5 % per 0.01 between 0.95 and 0.90, 1 % below, 0.5 % credit above. ${ownInputs}`,
    period: january,
    quantities: { kwh: 80000, pf, drawn: 30000, delivered: 0 },
    figures: [figure('energy', 500000), figure(line, amount, key)],
    within: 0.005,
  })),
  {
    id: 'GH-EPC-095',
    form: 'surcharge-on-kva-charge',
    source: `Explanation of bill, Enclave Power Company, Ghana (epcghana.com); the rate per kVA is a placeholder. ${ownInputs}`,
    period: january,
    quantities: { maxKva: 500, pf: 0.87, kwh: 0 },
    figures: [figure('demand', 30000, 'demand'), figure('surcharge', 2400, 'surcharge')],
    within: 0.005,
  },
  {
    id: 'DE-MV-096-kVA',
    form: 'kw-over-pf-after-trigger',
    source: `Abrechnung Blindstrommehrbedarf, Anlage 7 of a German network operator (studylibde 7839312); price and rounding of kVA assumed. ${ownInputs}`,
    period: january,
    quantities: { maxKw: 850, cos: 0.90123, kwh: 0, delivered: 0 },
    figures: [
      figure('cos', 0.9012, 'cos', 0.00005),
      figure('billedKva', 943.2, 'billed_kVA'),
      figure('demand', 9432, 'charge'),
    ],
    within: 0.005,
  },
  {
    id: 'CA-HQ-M-billing-demand',
    form: 'kw-or-share-of-kva',
    source: `Hydro-Quebec, Rate M bill details: greater of kW and 90 % of kVA, never below 65 % of the winter's highest. ${ownInputs}`,
    // June: the history's last month but two, March, lies wholly in winter; April and May (greater) do not.
    period: { from: '2026-06-01', to: '2026-07-01' },
    quantities: { maxKw: 800, maxKva: 950, kwh: 0 },
    options: { history: { maxDemand: [1400, 1500, 1500] } },
    figures: [
      figure('maxDemand', 855, 'max_demand'),
      figure('minimumKw', 910, 'minimum'),
      figure('billedKw', 910, 'billed'),
    ],
    within: 0.005,
  },
];
