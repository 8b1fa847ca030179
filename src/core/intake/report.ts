import { quality as grades, type LoadSeries } from '../load';
import type { IntakeGap, IntakeReport } from './types';

/** The report of a load. */
export function reportOf(
  load: LoadSeries,
  found: Pick<IntakeReport, 'format' | 'rowsRead' | 'duplicates' | 'notes'>,
): IntakeReport {
  const hours = load.stepMinutes / 60;
  const stepMs = load.stepMinutes * 60_000;
  let missing = 0;
  let estimated = 0;
  let peakAt = -1;
  const gaps: IntakeGap[] = [];
  for (let slot = 0; slot < load.kwh.length; slot += 1) {
    const grade = load.quality[slot];
    if (grade === grades.estimated) estimated += 1;
    if (grade === grades.missing) {
      missing += 1;
      const fromMs = load.startMs + slot * stepMs;
      const open = gaps.at(-1);
      if (open?.toMs === fromMs) {
        open.toMs += stepMs;
        open.intervals += 1;
      } else gaps.push({ fromMs, toMs: fromMs + stepMs, intervals: 1 });
    } else if ((load.kwh[slot] ?? Number.NaN) > (peakAt < 0 ? -1 : (load.kwh[peakAt] ?? 0))) peakAt = slot;
  }
  const maxKw = peakAt < 0 ? Number.NaN : (load.kwh[peakAt] ?? 0) / hours;
  return {
    ...found,
    intervals: load.kwh.length,
    missing,
    estimated,
    firstMs: load.startMs,
    lastMs: load.startMs + (load.kwh.length - 1) * stepMs,
    totalKwh: total(load.kwh),
    totalKvarhLagging: total(load.kvarhLagging),
    totalKvarhLeading: total(load.kvarhLeading),
    maxKw,
    gaps,
    stepMinutes: load.stepMinutes,
    ...(peakAt < 0 ? {} : { peak: { ms: load.startMs + peakAt * stepMs, kw: maxKw } }),
  };
}

/** Sum of the figures that are there; NaN if none is. */
function total(figures: Float64Array): number {
  let sum = 0;
  let count = 0;
  for (const figure of figures) {
    if (Number.isNaN(figure)) continue;
    sum += figure;
    count += 1;
  }
  return count === 0 ? Number.NaN : sum;
}
