import type { LoadSeries } from '@/core/load';

/** A series of given energies; null is missing. Lagging is half the active energy unless said, leading is not carried. */
export function loadOf(
  kwh: (number | null)[],
  given: Partial<Pick<LoadSeries, 'startMs' | 'stepMinutes' | 'kvarhLagging' | 'kvarhLeading'>> = {},
): LoadSeries {
  const energies = Float64Array.from(kwh, (one) => one ?? NaN);
  return {
    startMs: Date.UTC(2026, 0, 1),
    stepMinutes: 15,
    kwh: energies,
    kvarhLagging: energies.map((one) => one / 2),
    kvarhLeading: new Float64Array(kwh.length).fill(NaN),
    quality: Uint8Array.from(kwh, (one) => (one === null ? 2 : 0)),
    ...given,
  };
}
