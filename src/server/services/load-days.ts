import { addDays, localDateOf, localDateStartMs, quality as grades, type LoadSeries } from '../../core/load';
import type { DayOfLoad, LoadDays } from '../../schemas/intervals';

/** Means by local day, rounded to a tenth: they are drawn, not reckoned with. A day that begins late is padded. */
export function daysOf(load: LoadSeries, timeZone: string): LoadDays {
  const stepMs = load.stepMinutes * 60_000;
  const indexOf = (date: string) => Math.round((localDateStartMs(date, timeZone) - load.startMs) / stepMs);
  const days: DayOfLoad[] = [];
  const kvarOf = reactiveOf(load);
  for (let date = localDateOf(load.startMs, timeZone); indexOf(date) < load.kwh.length; date = addDays(date, 1)) {
    const first = indexOf(date);
    const count = Math.min(load.kwh.length, indexOf(addDays(date, 1))) - first;
    const means = (energyOf: (index: number) => number) =>
      Array.from({ length: count }, (_, offset) => meanPower(load, energyOf(first + offset)));
    const estimated = Array.from({ length: count }, (_, offset) => offset).filter(
      (offset) => load.quality[first + offset] === grades.estimated,
    );
    days.push({
      date,
      readings: means((index) => load.kwh[index] ?? NaN),
      ...(kvarOf && { kvar: means(kvarOf) }),
      ...(estimated.length > 0 && { estimated }),
    });
  }
  return { stepMinutes: load.stepMinutes, days };
}

function meanPower({ stepMinutes }: LoadSeries, energy: number): number | null {
  return Number.isNaN(energy) ? null : Math.round((energy * 600) / stepMinutes) / 10;
}

/** Lagging less leading energy of an interval; null where the series carries no reactive energy at all. */
function reactiveOf({ kvarhLagging, kvarhLeading }: LoadSeries): ((index: number) => number) | null {
  const [lags, leads] = [kvarhLagging, kvarhLeading].map((values) => values.some((value) => !Number.isNaN(value)));
  if (!lags && !leads) return null;
  return (index) => (lags ? (kvarhLagging[index] ?? NaN) : 0) - (leads ? (kvarhLeading[index] ?? NaN) : 0);
}
