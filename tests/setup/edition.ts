import type { EditionContent, EditionPlan } from '@/schemas/edition';

const plan: EditionPlan = {
  name: 'Plan A',
  fields: [{ motorId: 1, name: 'M-1', fieldA: 164, todayA: 109 }],
  yearTotal: 900_000,
  saving: 60_000,
  reactiveCost: 12_000,
  groupTotals: { energy: 600_000, demand: 250_000, reactive: 10_000, fixed: 5_000, adjustment: 15_000, tax: 20_000 },
  capitalCost: 90_000,
  yearlyUpkeep: 0,
  economics: { discountPercent: 8, escalationPercent: 0, horizonYears: 10 },
  appraisal: { simplePaybackYears: 1.5, discountedPaybackYears: 1.65, npv: 312_604.88, irr: 0.6605, notes: [] },
  paybackWords: '18 months',
  paybackSpread: { lowMonths: 15, highMonths: 22 },
  hoursLeading: 0,
  nearestLimit: 'field, M-1 at 80 %',
  worstPf: 0.95,
  extraLossKwh: 80_000,
};

/** An edition's content with round figures of its own. */
export function buildEditionContent(given: Partial<EditionContent> = {}): EditionContent {
  return {
    number: 1,
    madeOn: '2026-12-01',
    currency: 'USD',
    practice: { name: 'Calder & Vane', phone: '555 0142' },
    by: 'Tom Renwick',
    client: 'Kestrel Gap Lime & Stone',
    site: { name: 'Works 2', place: 'Kestrel Gap', timeZone: 'America/Chicago' },
    meter: 'OV 5510-274',
    schedule: { title: 'Large power', sha256: 'a'.repeat(64) },
    year: { from: '2025-11-01', to: '2026-11-01' },
    readings: { intervals: 35_040, missing: 0, estimated: 672, stepMinutes: 15 },
    standing: { ...plan, name: 'Standing', yearTotal: 960_000, saving: 0, reactiveCost: 72_000, capitalCost: 0 },
    plan,
    others: [],
    bills: [
      {
        from: '2025-11-01',
        to: '2026-11-01',
        before: 960_000,
        after: 900_000,
        billed: 960_100,
        reactiveCost: 72_000,
        reactiveCostAfter: 12_000,
        lines: [
          { id: 'demand', label: 'Demand', group: 'demand', before: 310_000, after: 250_000 },
          { id: 'energy', label: 'Energy', group: 'energy', before: 650_000, after: 650_000 },
        ],
      },
    ],
    findings: [],
    motors: [],
    assumed: [],
    cashFlow: [0, 12, 24].map((month) => ({ month, cumulative: -90_000 + month * 5_000 })),
    sources: [],
    notes: [],
    ...given,
  };
}
