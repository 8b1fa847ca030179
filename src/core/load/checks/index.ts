import { localClockOf } from '../local-clock';
import type { LoadSeries } from '../series';
import { energyDiffers, type SaidEnergy } from './bill-energy';
import { clockShifts } from './clock-shifts';
import { impossibleReadings, spikes } from './extremes';
import type { LoadFinding } from './finding';
import { poorFactors, reactiveAlone } from './kvar';
import { flatLines, zerosAtWork } from './standing-still';

const order = { fault: 0, caution: 1, note: 2 };

/**
 * Looks a series over for readings that are there but may not be true. Nothing is changed. Gaps and repeated readings
 * stand in the report of the file.
 *
 * The identifier of Hampel and the cross-correlation are methods of the field; their thresholds, and those of the other
 * checks, are choices of ours, named where they stand, set so that a year without faults shows none.
 *
 * @param load  The series
 * @param options.timeZone  IANA zone of the site
 * @param options.said  Energies that bills or registers say for periods
 * @param options.serviceKw  What the service can carry; null or left out: not known. [kW]
 * @returns What to look at, what cannot be true first, then in order of time
 */
export function checkLoad(
  load: LoadSeries,
  options: { timeZone: string; said?: readonly SaidEnergy[]; serviceKw?: number | null },
): LoadFinding[] {
  const clock = localClockOf(load, options.timeZone);
  const zeros = zerosAtWork(load);
  const alone = reactiveAlone(load);
  const found = [
    ...impossibleReadings(load, options.serviceKw ?? null),
    ...energyDiffers(load, options.said ?? []),
    ...spikes(load, clock),
    // Noughts of the active channel alone are told once, by what says more.
    ...zeros.filter((one) => !alone.some(({ fromMs, toMs }) => fromMs === one.fromMs && toMs === one.toMs)),
    ...alone,
    ...flatLines(load),
    ...poorFactors(load),
    ...clockShifts(load, clock),
  ];
  return found.sort((a, b) => order[a.severity] - order[b.severity] || a.fromMs - b.fromMs);
}
