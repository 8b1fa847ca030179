import { figure, january, ownInputs, type FormCase } from './form-case';

/** Reactive energy and power beyond an allowance, singly, by bands, as a cliff. */
export const energyCases: FormCase[] = [
  {
    id: 'ES-P1-3000-1500',
    form: 'kvarh-price-by-pf-band',
    source: `Example quantities: fornieles.es (allowance of 990 kvarh printed); prices: enchufesolar.com; both cite RD 1164/2001 and Circular 3/2020. ${ownInputs}`,
    period: january,
    quantities: {
      ...{ kwhP1: 3000, kwhP2: 0, kwhP3: 0, kwhP4: 0, kwhP5: 0, kwhP6: 0 },
      ...{ kvarhP1: 1500, kvarhP2: 0, kvarhP3: 0, kvarhP4: 0, kvarhP5: 0, kvarhP6: 0 },
      leading: 0,
    },
    figures: [
      figure('allowedP1', 990, 'allowed'),
      figure('excessKvarhP1', 510, 'excess'),
      figure('cosP1', 0.8944, 'cos', 0.00005),
      figure('reactiveP1', 21.19, 'charge'),
    ],
    within: 0.005,
  },
  ...(
    [
      ['TR-cliff-edge', 20500, 20500, true],
      ['TR-cliff-edge, just at the limit', 20000, 0, false],
    ] as const
  ).map(([id, drawn, charge, isListed]) => ({
    id,
    form: 'kvarh-cliff',
    source: `EPDK Usul ve Esaslar art. 13(3)-(4), as reproduced (hasanyucelmuhendislik.com): the whole quantity once 20 % is passed. ${ownInputs}`,
    period: january,
    quantities: { kwh: 100000, drawn, delivered: 0 },
    figures: [
      figure('billedDrawn', charge, isListed ? 'billed_kvarh' : undefined),
      figure('inductive', charge, isListed ? 'charge' : undefined),
    ],
    within: 0.005,
  })),
  {
    id: 'TH-MEA-412',
    form: 'kvar-over-share-by-time-of-day',
    source: `Large General Service 4.1.2, Metropolitan Electricity Authority (testmeaor.mea.or.th). ${ownInputs}`,
    period: january,
    quantities: { kwh: 900000, maxKwOnPeak: 1800, maxKwPartialPeak: 2000, maxKwOffPeak: 0, maxKvar: 1500 },
    // 1,800 x 285.05 + 200 x 58.88 = 524,866; 1,500 - 0.6197 x 2,000 = 260.6 -> 261
    figures: [
      figure('onPeakDemand + partialDemand', 524866, 'demand'),
      figure('energy', 2832390, 'energy'),
      figure('excessKvar', 261, 'excess_kvar'),
      figure('powerFactor', 14634.27, 'pf_charge'),
      figure('total', 3372202.51, 'total_before_Ft_VAT'),
    ],
    within: 0.005,
  },
  {
    id: 'PE-MT2-30pct',
    form: 'kvarh-share-of-kwh',
    source: `Pliego tarifario MT2, Osinergmin (Id 150000). ${ownInputs}`,
    period: january,
    quantities: { kwhPeak: 10000, kwhOffPeak: 50000, maxKwPeak: 150, maxKwOffPeak: 200, kvarh: 24000 },
    figures: [
      figure('excessKvarh', 6000, 'excess_kvarh'),
      figure('reactive', 288.6, 'reactive'),
      figure('total', 27190.47, 'total_sin_igv'),
    ],
    within: 0.005,
  },
  {
    id: 'IT-MV-2023',
    form: 'kvarh-bands-by-window',
    source: `Penali energia reattiva (energyteam.it, table of ARERA 712/2022 and 232/2022), medium voltage, April to December 2023; bands not pooled is our reading. ${ownInputs}`,
    period: { from: '2023-10-01', to: '2023-11-01' },
    quantities: {
      ...{ kwhF1: 40000, kvarhF1: 34000, kwhF2: 20000, kvarhF2: 7000 },
      ...{ kwhF3: 30000, kvarhF3: 20000, injected: 3000, maxKw: 0 },
    },
    figures: [
      figure('reactiveF1', 100.85, 'F1'),
      figure('reactiveF2', 1.82, 'F2'),
      figure('injection', 18.18, 'F3'),
      figure('reactiveF1 + reactiveF2 + reactiveF3 + injection', 120.85, 'total'),
    ],
    within: 0.005,
  },
  {
    id: 'FR-tan04-HV-metered',
    form: 'kvarh-winter-tangent',
    source: `Facturation (Alpes Technologies): tan phi 0.4, November to March; the price of 1.94 ct/kvarh is from memory. ${ownInputs}`,
    period: january,
    quantities: { kwh: 200000, winterKwh: 200000, kvarh: 110000 },
    figures: [
      figure('tan', 0.55, 'tan'),
      figure('excessKvarh', 30000, 'excess_kvarh'),
      figure('reactive', 582, 'charge'),
    ],
    within: 0.005,
  },
  {
    id: 'UK-DNO-33pct',
    form: 'kvarh-share-larger-sense',
    source: `London Power Networks, Statement of Charges, October 2011, para. 2.21; the rate of 0.3 p is a placeholder. ${ownInputs}`,
    period: january,
    quantities: { kwh: 500000, drawn: 210000, delivered: 0 },
    figures: [
      figure('excessKvarh', 45000, 'excess'),
      figure('reactive', 135, 'charge_gbp'),
      figure('reactiveCost', 135),
    ],
    within: 0.005,
  },
  {
    id: 'US-CA-00005',
    form: 'kwh-price-per-point',
    source:
      'From memory: schedules of a large Californian utility, 0.00005 USD per kWh and whole percentage point from 85 %',
    period: january,
    quantities: { kwh: 1500000, pfPct: 81, maxKw: 0 },
    figures: [figure('adjustment', 300, 'adjustment')],
    within: 0.005,
  },
  {
    id: 'US-TVA-lead-lag',
    form: 'kvar-lag-at-peak-lead-at-minimum',
    source:
      'From memory: kvar lagging above 33 % of kW at the highest demand, every leading kvar at the lowest demand of at least 25 % of it',
    period: january,
    quantities: { kwh: 0, maxKw: 10000, lagAtMax: 4500, minKw: 6000, leadAtMin: 900 },
    figures: [figure('lag', 552, 'lag'), figure('lead', 1026, 'lead'), figure('lag + lead', 1578, 'total')],
    within: 0.005,
  },
];
