import { quality as grades, type LoadSeries } from '../series';
import { instantsOf, type LoadFinding } from './finding';

/** Bills print whole units, and a meter read an hour from midnight is off by an hour of about 730. Both are choices of ours. */
const leastKwh = 1;
const leastShare = 0.002;

/** The energy a bill or a register says was drawn between two instants. */
export interface SaidEnergy {
  name: string;
  fromMs: number;
  toMs: number;
  kwh: number;
}

/**
 * Periods whose readings add up to another energy than bill or register says. Only periods that lie in the series whole
 * and without a missing reading are compared.
 */
export function energyDiffers(load: LoadSeries, said: readonly SaidEnergy[]): LoadFinding[] {
  const stepMs = load.stepMinutes * 60_000;
  return said.flatMap(({ name, fromMs, toMs, kwh }) => {
    const run = { from: Math.round((fromMs - load.startMs) / stepMs), to: Math.round((toMs - load.startMs) / stepMs) };
    if (run.from < 0 || run.to > load.kwh.length || run.to <= run.from) return [];
    if (load.quality.subarray(run.from, run.to).includes(grades.missing)) return [];
    const found = load.kwh.subarray(run.from, run.to).reduce((sum, energy) => sum + energy, 0);
    const off = Math.abs(found - kwh);
    if (Number.isNaN(found) || off <= leastKwh || off <= leastShare * Math.abs(found)) return [];
    const severity = off > 0.02 * Math.abs(kwh) ? ('fault' as const) : ('caution' as const);
    return [{ ...instantsOf(load, run), fault: 'energy-differs' as const, severity, found, against: kwh, name }];
  });
}
