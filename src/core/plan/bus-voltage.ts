import type { LoadSeries } from '../load';
import { busVoltagePu, supplyImpedance } from './supply';
import type { Plant } from './types';
import { noUpstream, upstreamLosses } from './upstream';

/** Estimated voltage of the bus behind the first meter over the metered intervals. */
export interface BusVoltage {
  /** [pu of rated] */
  leastPu: number;
  greatestPu: number;
  /** Hours below and above what is allowed; 0 where nothing is said. [h] */
  hoursBelow: number;
  hoursAbove: number;
}

/**
 * Estimated voltage of the first meter's bus, from the power it takes and the supply's impedance.
 *
 * @param plant  Supply, and what lies between meter and bus.
 * @param load  The first meter's series.
 * @returns null where the supply is not known or no interval is metered
 */
export function busVoltageOver(plant: Pick<Plant, 'supply' | 'upstream'>, load: LoadSeries): BusVoltage | null {
  const { supply, upstream } = plant;
  if (!supply) return null;
  const impedance = supplyImpedance(supply);
  const { atBus } = upstream ? upstreamLosses(upstream) : noUpstream;
  const hours = load.stepMinutes / 60;
  const { low, high } = supply.allowedPu ?? { low: -Infinity, high: Infinity };
  const found: BusVoltage = { leastPu: Infinity, greatestPu: -Infinity, hoursBelow: 0, hoursAbove: 0 };
  load.kwh.forEach((kwh, i) => {
    const leading = load.kvarhLeading[i]!;
    const kvarh = load.kvarhLagging[i]! - (Number.isNaN(leading) ? 0 : leading);
    const voltagePu = busVoltagePu(impedance, atBus({ kw: kwh / hours, kvar: kvarh / hours }));
    if (Number.isNaN(voltagePu)) return;
    found.leastPu = Math.min(found.leastPu, voltagePu);
    found.greatestPu = Math.max(found.greatestPu, voltagePu);
    if (voltagePu < low) found.hoursBelow += hours;
    if (voltagePu > high) found.hoursAbove += hours;
  });
  return found.leastPu === Infinity ? null : found;
}
