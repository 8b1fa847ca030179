import { assertLoadSeries, type LoadSeries } from '../../load';
import type { Schedule } from '../model';
import { withCarriedChannels } from '../price/interval-source';

/** Energies of every interval. [kWh or kvarh per interval], float64[intervals] each */
export interface Registers {
  kwh: Float64Array;
  kvarhLagging: Float64Array;
  kvarhLeading: Float64Array;
}

/** All loads whose energies lie, register by register and interval by interval, from `low` to `high`. */
export interface LoadBox {
  startMs: number;
  stepMinutes: number;
  low: Registers;
  high: Registers;
  /** As of a load series: 2 where an interval is missing in every one of these loads. */
  quality: Uint8Array;
}

const registers = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

/** The two corners of a box as series, channels that are not carried set aside as pricing does. */
export interface BoxCorners {
  low: LoadSeries;
  high: LoadSeries;
}

/**
 * The lowest and the highest corner of a box.
 *
 * @throws {RangeError} naming register and interval where a lower end lies above its upper end
 * @throws {PriceError} if a quantity measures a channel that the box does not carry
 */
export function cornersOf(schedule: Schedule, box: LoadBox): BoxCorners {
  const { startMs, stepMinutes, quality } = box;
  const corner = (energies: Registers): LoadSeries => {
    const load = { startMs, stepMinutes, quality, ...energies };
    assertLoadSeries(load);
    return withCarriedChannels(schedule, load).load;
  };
  for (const register of registers) {
    const wrong = box.low[register].findIndex(
      (low, i) =>
        quality[i] !== 2 && Number.isNaN(low) === Number.isNaN(box.high[register][i]!) && low > box.high[register][i]!,
    );
    if (wrong >= 0)
      throw new RangeError(
        `low.${register}[${wrong}] must be at most high.${register}[${wrong}], got ${box.low[register][wrong]} and ${box.high[register][wrong]}`,
      );
  }
  return { low: corner(box.low), high: corner(box.high) };
}

/** The box of one load alone. */
export function boxOfLoad({ startMs, stepMinutes, quality, kwh, kvarhLagging, kvarhLeading }: LoadSeries): LoadBox {
  const energies = { kwh, kvarhLagging, kvarhLeading };
  return { startMs, stepMinutes, quality, low: energies, high: energies };
}
