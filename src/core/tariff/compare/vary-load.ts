import type { LoadSeries } from '../../load';

/** The load with a share of its lagging kvarh taken away in every interval; a negative share adds. [unitless] */
export function withoutLagging(load: LoadSeries, share: number): LoadSeries {
  return { ...load, kvarhLagging: load.kvarhLagging.map((kvarh) => kvarh * (1 - share)) };
}

/** The load with every interval's energies multiplied; its power factor stays. [unitless] */
export function scaledLoad(load: LoadSeries, factor: number): LoadSeries {
  const scaled = (channel: Float64Array) => channel.map((energy) => energy * factor);
  return {
    ...load,
    kwh: scaled(load.kwh),
    kvarhLagging: scaled(load.kvarhLagging),
    kvarhLeading: scaled(load.kvarhLeading),
  };
}

/** Energies of a series, missing intervals left out. [kWh], [kvarh] */
export function energiesOf(load: LoadSeries, first = 0, end = load.kwh.length): { kwh: number; kvarhLagging: number } {
  const sums = { kwh: 0, kvarhLagging: 0 };
  for (let i = Math.max(0, first); i < Math.min(end, load.kwh.length); i++) {
    if (load.quality[i] === 2) continue;
    sums.kwh += load.kwh[i]!;
    const lagging = load.kvarhLagging[i]!;
    if (!Number.isNaN(lagging)) sums.kvarhLagging += lagging;
  }
  return sums;
}

/**
 * Average lagging power factor of energies: pf = kWh / sqrt(kWh^2 + kvarh^2), the definition schedules with an average power factor use.
 *
 * @returns 1 where there is no energy at all. [unitless], (0, 1]
 */
export function averagePowerFactor({ kwh, kvarhLagging }: { kwh: number; kvarhLagging: number }): number {
  return kwh === 0 && kvarhLagging === 0 ? 1 : Math.abs(kwh) / Math.hypot(kwh, kvarhLagging);
}

/**
 * Share of the lagging kvarh that must go for an average power factor; negative where kvarh must be added.
 *
 * Derivation: kvarh (1 - share) = kWh tan(arccos pf).
 *
 * @returns null where there is no lagging kvarh to take away
 */
export function shareToReach(energies: { kwh: number; kvarhLagging: number }, powerFactor: number): number | null {
  if (energies.kvarhLagging <= 0) return null;
  return 1 - (energies.kwh * Math.tan(Math.acos(powerFactor))) / energies.kvarhLagging;
}
