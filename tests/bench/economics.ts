import { rankInputs, sampleAppraisal, type Investment, type Spreads } from '../../src/core/economics';
import type { Measured } from './run';

const samples = 1000;
const runs = 5;

const investment: Investment = {
  capitalCost: 114_400,
  incentive: 10_000,
  saving: { energy: -6_500, demand: 55_500, reactive: 21_200, fixed: 0, adjustment: 900, tax: 1_700 },
  savingWithHours: { energy: -6_500, reactive: 21_200 },
  growth: { energy: 0.02, demand: 0.03, reactive: 0.03, fixed: 0 },
  yearlyUpkeep: 2_400,
  upkeepGrowth: 0.02,
  taxRate: 0.25,
  depreciationYears: 10,
  discountRate: 0.08,
  years: 20,
};

const spreads: Spreads = {
  saving: 0.1,
  hours: 0.05,
  work: 0.15,
  upkeep: 0.2,
  energyGrowth: 0.01,
  demandGrowth: 0.01,
};

/**
 * Draws a thousand samples of an investment of 20 years: growth by group, upkeep, tax, incentive, the monthly band and the
 * ranking of its inputs. No bill is priced again.
 */
export function benchEconomics(): Measured[] {
  const medians = new Set<number>();
  let cpuMicroseconds = 0;
  let wallMs = 0;
  for (let run = 0; run < runs; run++) {
    const used = process.cpuUsage();
    const start = performance.now();
    const { npv, band } = sampleAppraisal(investment, spreads, { samples, seed: run });
    rankInputs(investment, spreads);
    wallMs += performance.now() - start;
    const { user, system } = process.cpuUsage(used);
    cpuMicroseconds += user + system;
    if (band.length !== 12 * investment.years + 1) throw new Error('the band must hold every month');
    medians.add(npv.p50);
  }
  if (medians.size < runs) throw new Error('every seed must draw other samples');
  return [
    {
      name: 'economic draws with the monthly band of 20 years',
      perSecond: (runs * samples) / (cpuMicroseconds / 1e6),
      atLeast: samples,
      figures: `per second of processor time: ${samples} draws in ${(wallMs / runs).toFixed(0)} ms by the clock, growth by group, tax and incentive counted`,
    },
  ];
}
