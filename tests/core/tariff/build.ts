import { localDateStartMs, zoneOffsetMs, type LoadSeries } from '@/core/load';
import { readSchedule, ScheduleError, type PricedBill, type Schedule, type ScheduleProblem } from '@/core/tariff';

/** Powers at a local time: active [kW], reactive drawn and delivered [kvar]. */
export type Powers = readonly [kw: number, kvarLagging: number, kvarLeading: number];

/** A series from local midnight to local midnight, its powers told by local time (year, month ... of the date's UTC parts). */
export function buildSeries(input: {
  from: string;
  to: string;
  timeZone: string;
  stepMinutes: number;
  powers: (local: Date, index: number) => Powers;
}): LoadSeries {
  const { timeZone, stepMinutes } = input;
  const startMs = localDateStartMs(input.from, timeZone);
  const count = (localDateStartMs(input.to, timeZone) - startMs) / (stepMinutes * 60_000);
  const load: LoadSeries = {
    startMs,
    stepMinutes,
    kwh: new Float64Array(count),
    kvarhLagging: new Float64Array(count),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
  for (let i = 0; i < count; i++) {
    const ms = startMs + i * stepMinutes * 60_000;
    const [kw, lagging, leading] = input.powers(new Date(ms + zoneOffsetMs(ms, timeZone)), i);
    load.kwh[i] = (kw * stepMinutes) / 60;
    load.kvarhLagging[i] = (lagging * stepMinutes) / 60;
    load.kvarhLeading[i] = (leading * stepMinutes) / 60;
  }
  return load;
}

/** A schedule with the usual head above the given text. */
export function buildSchedule(body: string, head: Record<string, string> = {}): Schedule {
  const all = {
    schedule: 'example',
    currency: 'EUR',
    timeZone: 'Europe/Lisbon',
    inForce: '2020-01-01',
    straddle: 'days',
    demandWindow: '15 min',
    ...head,
  };
  const lines = Object.entries(all).flatMap(([key, value]) => (value === '' ? [] : [`${key}: ${value}`]));
  return readSchedule(`${lines.join('\n')}\n${body}\n`);
}

/** The problems of a text that cannot be read; none if it can. */
export function problemsOf(work: () => unknown): ScheduleProblem[] {
  try {
    work();
    return [];
  } catch (error) {
    if (error instanceof ScheduleError) return error.problems;
    throw error;
  }
}

/** Amounts of a bill by line. */
export function amountsOf(bill: PricedBill | undefined): Record<string, number> {
  return Object.fromEntries((bill?.lines ?? []).map(({ id, amount }) => [id, amount]));
}

/** Values of a bill by quantity. */
export function valuesOf(bill: PricedBill | undefined): Record<string, number> {
  return Object.fromEntries(Object.entries(bill?.quantities ?? {}).map(([name, { value }]) => [name, value]));
}
