import { medianOf } from '../robust';
import type { LoadSeries } from '../series';
import { usualPeakKwh } from './extremes';
import { instantsOf, meanPower, runsWhere, type LoadFinding } from './finding';

/** Choices of ours: a plant at work (a tenth of its usual peak) does not run below this power factor. */
const poorestFactor = 0.2;
const atWork = 0.1;
/** And one that draws nothing does not draw this part of its usual lagging energy. */
const aloneShare = 0.05;

/**
 * Power factors no working plant has, told once with their number: kvarh beside the wrong kWh, or with a multiplier of
 * their own. Displacement factor from the energies of the interval, lagging and leading netted.
 */
export function poorFactors(load: LoadSeries): LoadFinding[] {
  const { kwh, kvarhLagging, kvarhLeading } = load;
  const working = atWork * usualPeakKwh(load);
  const netOf = (i: number) => carried(kvarhLagging[i]!) - carried(kvarhLeading[i]!);
  const factorOf = (i: number) => kwh[i]! / Math.hypot(kwh[i]!, netOf(i));
  const runs = runsWhere(kwh.length, (i) => kwh[i]! > working && factorOf(i) < poorestFactor);
  if (runs.length === 0) return [];
  const factors = runs.flatMap(({ from, to }) => Array.from({ length: to - from }, (_, at) => factorOf(from + at)));
  const whole = instantsOf(load, { from: runs[0]!.from, to: runs.at(-1)!.to });
  return [
    {
      ...whole,
      intervals: factors.length,
      fault: 'poor-factor',
      severity: 'caution',
      found: medianOf(factors),
      against: poorestFactor,
    },
  ];
}

/** Reactive energy while no active energy is drawn, for at least an hour: the active channel may have failed. */
export function reactiveAlone(load: LoadSeries): LoadFinding[] {
  const { kwh, kvarhLagging, stepMinutes } = load;
  const usual = medianOf(kvarhLagging.filter((energy) => energy > 0));
  if (!(usual > 0)) return [];
  return runsWhere(kwh.length, (i) => kwh[i] === 0 && kvarhLagging[i]! > aloneShare * usual)
    .filter(({ from, to }) => (to - from) * stepMinutes >= 60)
    .map((run) => ({
      ...instantsOf(load, run),
      fault: 'reactive-alone' as const,
      severity: 'caution' as const,
      found: meanPower(load, Math.max(...kvarhLagging.subarray(run.from, run.to))),
      against: 0,
    }));
}

const carried = (energy: number) => (Number.isNaN(energy) ? 0 : energy);
