import { addDays } from './dates';
import { quality, type LoadSeries } from './series';
import { localDateStartMs } from './zone';

/** The highest mean over windows of one length, laid from local midnight on. */
export interface MeteredPeak {
  windowMinutes: number;
  /** Highest mean active power. [kW] */
  kw: number;
  /** Mean reactive power in that window, absorbed less delivered; null where not metered. [kvar] */
  kvar: number | null;
  /** Highest mean apparent power, in a window of its own; null where kvar is not metered. [kVA] */
  kva: number | null;
}

/** What the readings of a stretch of days say; sums and peaks are over those present. */
export interface Metered {
  expected: number;
  missing: number;
  estimated: number;
  kwh: number;
  /** Reactive energy; null where a reading that is present has none. [kvarh] */
  kvarhLagging: number | null;
  kvarhLeading: number | null;
  /** By length of window, the shortest first; empty where every reading is missing. */
  peaks: MeteredPeak[];
}

const windowsMinutes = [15, 30, 60];
const nothing: Metered = {
  expected: 0,
  missing: 0,
  estimated: 0,
  kwh: 0,
  kvarhLagging: 0,
  kvarhLeading: 0,
  peaks: [],
};

const sumOf = (one: number | null, other: number | null) => (one === null || other === null ? null : one + other);
const highestOf = (one: number | null, other: number | null) =>
  one === null || other === null ? (one ?? other) : Math.max(one, other);

function higher(one: MeteredPeak, other: MeteredPeak | undefined): MeteredPeak {
  if (!other) return one;
  return { ...(other.kw > one.kw ? other : one), kva: highestOf(one.kva, other.kva) };
}

/** Bills print whole units; and a meter read an hour from midnight is off by an hour of about 730. Both are choices of ours. */
const leastKwh = 1;
const leastShare = 0.002;

/** Whether a printed energy is another one than the metered: by more than its last digit and than a reading an hour late makes. */
export function energiesDiffer(printed: number, metered: number): boolean {
  const off = Math.abs(printed - metered);
  return off > leastKwh && off > leastShare * Math.abs(metered);
}

/** Several stretches as one. */
export function meteredOver(parts: readonly Metered[]): Metered {
  return parts.reduce(
    (whole, part) => ({
      expected: whole.expected + part.expected,
      missing: whole.missing + part.missing,
      estimated: whole.estimated + part.estimated,
      kwh: whole.kwh + part.kwh,
      kvarhLagging: sumOf(whole.kvarhLagging, part.kvarhLagging),
      kvarhLeading: sumOf(whole.kvarhLeading, part.kvarhLeading),
      peaks: mergePeaks(whole.peaks, part.peaks),
    }),
    nothing,
  );
}

function mergePeaks(some: MeteredPeak[], others: MeteredPeak[]): MeteredPeak[] {
  const [longer, shorter] = some.length < others.length ? [others, some] : [some, others];
  return longer.map((peak) =>
    higher(
      peak,
      shorter.find(({ windowMinutes }) => windowMinutes === peak.windowMinutes),
    ),
  );
}

/**
 * What the meter says of every local day of a period, in one pass over the readings.
 *
 * Demand windows of 15, 30 and 60 minutes (those that hold whole readings) begin at local midnight; one with a missing
 * reading has no mean.
 *
 * @param load  Readings; days outside of it are missing altogether
 * @param period  Local dates, half-open: [from, to)
 * @returns One entry a day, in order
 */
export function meteredDays(load: LoadSeries, period: { from: string; to: string }, timeZone: string): Metered[] {
  const days: Metered[] = [];
  const stepMs = load.stepMinutes * 60_000;
  const indexOf = (date: string) => Math.round((localDateStartMs(date, timeZone) - load.startMs) / stepMs);
  let first = indexOf(period.from);
  for (let date = period.from; date < period.to; date = addDays(date, 1)) {
    const end = indexOf(addDays(date, 1));
    days.push(meteredDay(load, first, end));
    first = end;
  }
  return days;
}

function meteredDay(load: LoadSeries, first: number, end: number): Metered {
  const day: Metered = { ...nothing, expected: end - first };
  for (let index = first; index < end; index += 1) {
    const kwh = load.kwh[index];
    const mark = load.quality[index];
    if (mark === undefined || mark === quality.missing || kwh === undefined || Number.isNaN(kwh)) {
      day.missing += 1;
      continue;
    }
    if (mark === quality.estimated) day.estimated += 1;
    day.kwh += kwh;
    day.kvarhLagging = added(day.kvarhLagging, load.kvarhLagging[index]);
    day.kvarhLeading = added(day.kvarhLeading, load.kvarhLeading[index]);
  }
  const windows = windowsMinutes.filter((minutes) => minutes % load.stepMinutes === 0);
  day.peaks = windows.flatMap((minutes) => peakOf(load, first, end, minutes) ?? []);
  return day;
}

const added = (sum: number | null, value: number | undefined) =>
  sum === null || value === undefined || Number.isNaN(value) ? null : sum + value;

/** The highest window of a day; null where none is whole. */
function peakOf(load: LoadSeries, first: number, end: number, windowMinutes: number): MeteredPeak | null {
  const perWindow = windowMinutes / load.stepMinutes;
  const hours = windowMinutes / 60;
  let peak: MeteredPeak | null = null;
  for (let start = first; start + perWindow <= end; start += perWindow) {
    if (start < 0) continue;
    let kwh = 0;
    let kvarh = 0;
    for (let index = start; index < start + perWindow; index += 1) {
      kwh += load.kwh[index] ?? NaN;
      // A meter that records one direction alone has nothing in the other.
      kvarh += (load.kvarhLagging[index] ?? NaN) - (load.kvarhLeading[index] || 0);
    }
    if (Number.isNaN(kwh)) continue;
    const kw = kwh / hours;
    const kvar = Number.isNaN(kvarh) ? null : kvarh / hours;
    const window = { windowMinutes, kw, kvar, kva: kvar === null ? null : Math.hypot(kw, kvar) };
    peak = higher(window, peak ?? undefined);
  }
  return peak;
}
