import { readFileSync } from 'node:fs';
import path from 'node:path';
import { localDateStartMs, zoneOffsetMs, type LoadSeries } from '../../src/core/load';
import { compilePricing, readSchedule, type PriceOptions, type Schedule } from '../../src/core/tariff';
import type { Measured } from './run';

const atMost = 10;
const schedules = ['tariffs/ostrander-lp4', 'tariffs/millrace-kva', 'tariffs/tidewater-kvarh', 'tests/bench/heavy'];

/**
 * Prices a generated year (35,040 intervals of 15 minutes, 12 bills) and compares with a bare pass: one loop over four arrays of
 * 35,040 numbers, sum and maximum of each. Median of 50 calls after warm-ups.
 */
export function benchPricing(): Measured[] {
  const rows = schedules.flatMap((file) => {
    const id = path.basename(file);
    const schedule = readSchedule(readFileSync(`${file}.yaml`, 'utf8'));
    const load = generatedYear(schedule.timeZone);
    const options: PriceOptions = { periods: calendarMonths() };
    const { startMs, stepMinutes } = load;
    const count = load.kwh.length;
    const pricing = compilePricing(schedule, { startMs, stepMinutes, count }, options);
    return [
      measure(`${id}: totals of a year`, load, () => pricing.totals(load)[0]!),
      measure(`${id}: totals after a kvar change`, load, () => pricing.totals(load, { isActiveUnchanged: true })[0]!),
    ].map((row) => ({ ...row, layOutMs: layOutMs(schedule, load, options) }));
  });
  // Where a busy machine compiles the bare pass late, the fastest median of the process counts for all rows.
  const bareMs = Math.min(...rows.map((row) => row.bareMs));
  return rows.map(({ name, pricedMs, layOutMs: ms }) => ({
    name,
    ratio: pricedMs / bareMs,
    atMost,
    figures: `${pricedMs.toFixed(3)} ms, bare pass ${bareMs.toFixed(3)} ms; laid out in ${ms.toFixed(1)} ms`,
  }));
}

function measure(
  name: string,
  load: LoadSeries,
  work: () => number,
): { name: string; bareMs: number; pricedMs: number } {
  return { name, bareMs: medianMs(() => barePass(load)), pricedMs: medianMs(work) };
}

/** Median time of 50 calls after at least 10 warm-ups and 0.4 s, in which a busy machine finds time to compile. [ms] */
export function medianMs(work: () => number): number {
  let kept = 0;
  const times: number[] = [];
  const beginMs = performance.now();
  for (let round = 0; round < 10 || performance.now() - beginMs < 400; round++) kept += work();
  while (times.length < 50) {
    const startMs = performance.now();
    kept += work();
    times.push(performance.now() - startMs);
  }
  if (!Number.isFinite(kept)) throw new RangeError('the bench must add up finite numbers');
  return times.sort((a, b) => a - b)[25]!;
}

function layOutMs(schedule: Schedule, load: LoadSeries, options: PriceOptions): number {
  const start = performance.now();
  compilePricing(schedule, { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length }, options);
  return performance.now() - start;
}

const fourth = new Float64Array(35_040).map((_, i) => Math.sin(i));

/** One loop over four arrays: sum and maximum of each. Written so that every variable is a double from the start. */
function barePass({ kwh, kvarhLagging, kvarhLeading }: LoadSeries): number {
  let sumA = 0.5;
  let sumB = 0.5;
  let sumC = 0.5;
  let sumD = 0.5;
  let highA = -Infinity;
  let highB = -Infinity;
  let highC = -Infinity;
  let highD = -Infinity;
  const count = kwh.length;
  for (let i = 0; i < count; i++) {
    const a = kwh[i]!;
    const b = kvarhLagging[i]!;
    const c = kvarhLeading[i]!;
    const d = fourth[i]!;
    sumA += a;
    sumB += b;
    sumC += c;
    sumD += d;
    highA = Math.max(highA, a);
    highB = Math.max(highB, b);
    highC = Math.max(highC, c);
    highD = Math.max(highD, d);
  }
  return sumA + sumB + sumC + sumD + highA + highB + highC + highD;
}

/** The twelve calendar months from November 2025 on. */
export function calendarMonths(): PriceOptions['periods'] {
  const first = (month: number): string =>
    `${2025 + Math.floor(month / 12)}-${String((month % 12) + 1).padStart(2, '0')}-01`;
  return Array.from({ length: 12 }, (_, i) => ({ from: first(10 + i), to: first(11 + i) }));
}

/** A plant of three shifts on weekdays and a base load at night and weekends; leading when little runs. Seeded noise. */
export function generatedYear(timeZone: string): LoadSeries {
  const startMs = localDateStartMs('2025-11-01', timeZone);
  const count = 35_040;
  let seed = 12_345;
  const noise = (): number => {
    seed = (seed * 1_103_515_245 + 12_345) % 2_147_483_648;
    return seed / 2_147_483_648;
  };
  const offsetMs = zoneOffsetMs(startMs, timeZone);
  const load: LoadSeries = {
    startMs,
    stepMinutes: 15,
    kwh: new Float64Array(count),
    kvarhLagging: new Float64Array(count),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
  for (let i = 0; i < count; i++) {
    const local = new Date(startMs + offsetMs + i * 900_000);
    const isShift = local.getUTCDay() % 6 !== 0 && local.getUTCHours() >= 6 && local.getUTCHours() < 22;
    const kw = (isShift ? 1900 : 700) * (0.9 + 0.2 * noise());
    const kvar = isShift ? kw * (0.55 + 0.2 * noise()) : kw * (0.25 * noise() - 0.1);
    load.kwh[i] = kw / 4;
    load.kvarhLagging[i] = Math.max(0, kvar) / 4;
    load.kvarhLeading[i] = Math.max(0, -kvar) / 4;
  }
  return load;
}
