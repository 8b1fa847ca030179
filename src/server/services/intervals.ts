import { addDays, addMonths, localDateOf, localDateStartMs, type LoadSeries } from '../../core/load';
import type {
  DayReading,
  IntervalsStation,
  KeptFile,
  MetersOfYear,
  MonthOfLoad,
  PeakOfYear,
  ReadingGap,
} from '../../schemas/intervals';
import { Intake } from '../models/Intake';
import { User } from '../models/User';
import { presentIntakeRow } from '../presenters/intake';
import type { OpenEngagement } from './engagements';
import { listFills } from './gap-fills';
import { daysOf } from './load-days';
import { loadFindings } from './load-findings';
import { meteredLoad } from './metered-load';
import { metersOf, presentMeter } from './meters';
import { keptSpans, laidSeries, loadSeries } from './readings';

const minuteMs = 60_000;
const missing = 2;
const longestGapList = 200;

/** The engagement's year as instants of the site's time. */
function yearOf({ engagement, site }: OpenEngagement): { fromMs: number; toMs: number } {
  return {
    fromMs: localDateStartMs(engagement.yearFrom, site.timeZone),
    toMs: localDateStartMs(engagement.yearTo, site.timeZone),
  };
}

/** The files of an engagement on their way in or kept, newest first; those given up are left out. */
export async function listIntakes(opened: OpenEngagement, kind: 'intervals' | 'bills', meterId?: number) {
  const rows = await Intake.findAll({
    where: {
      ...(meterId === undefined ? {} : { meterId }),
      engagementId: opened.engagement.id,
      kind,
      state: ['reading', 'read', 'refused', 'kept', 'undone'],
    },
    attributes: { exclude: ['preview', 'report', 'columnMap'] },
    order: [['id', 'DESC']],
  });
  const people = await User.findAll({ where: { id: rows.flatMap((row) => row.broughtById ?? []) } });
  return rows.map((row) => presentIntakeRow(row, people.find((person) => person.id === row.broughtById)?.name ?? null));
}

/** Everything the station Intervals shows of a meter besides the pictures. */
export async function intervalsStation(opened: OpenEngagement, meter = opened.meter): Promise<IntervalsStation> {
  const { fromMs, toMs } = yearOf(opened);
  const { timeZone } = opened.site;
  const [files, spans] = await Promise.all([
    listIntakes(opened, 'intervals', meter.id),
    keptSpans(meter.id, fromMs, toMs),
  ]);
  const kept = files.filter((file) => file.state === 'kept');
  const empty = { meter: presentMeter(meter), files, kept: [], picture: null, timeZone, fromMs, toMs, year: null };
  if (spans.length === 0) return empty;
  const { load, sources } = await laidSeries(meter.id, fromMs, toMs);
  const gaps = gapsOf(load);
  const allSpans = await keptSpans(meter.id, -8.64e15, 8.64e15);
  return {
    ...empty,
    kept: kept.map((file) => spanOf(file.id, file.fileName, allSpans)),
    picture: daysOf(load, timeZone),
    year: {
      stepMinutes: load.stepMinutes,
      ...countsOf(load),
      peak: peakOf(load, timeZone, (at) => kept.find((file) => file.id === sources[at])?.id ?? null),
      gaps: gaps.slice(0, longestGapList),
      gapCount: gaps.length,
      fills: await listFills(meter.id, fromMs, toMs),
      findings: await loadFindings(opened, load),
      months: monthsOf(load, timeZone),
    },
  };
}

/** What is kept of each meter of the year, and of all added up. */
export async function metersOfYear(opened: OpenEngagement): Promise<MetersOfYear> {
  const { fromMs, toMs } = yearOf(opened);
  const { meters, others } = await metersOf(opened);
  const figures = await Promise.all(
    meters.map(async ({ id, label }) => {
      const any = (await keptSpans(id, fromMs, toMs)).length > 0;
      return { id, label, ...figuresOf(any ? await loadSeries(id, fromMs, toMs) : null) };
    }),
  );
  const isWhole = meters.length > 1 && figures.every(({ intervals }) => intervals > 0);
  const together = isWhole ? await meteredLoad(opened, fromMs, toMs) : null;
  return { meters: figures, together: together && figuresOf(together.load), others };
}

function figuresOf(load: LoadSeries | null): Omit<MetersOfYear['meters'][number], 'id' | 'label'> {
  if (!load) return { intervals: 0, present: 0, kwh: null, kvarhLagging: null, maxKw: null };
  const { intervals, present } = countsOf(load);
  const peak = peakIndex(load);
  const maxKw = peak === null ? null : meanOf(load.kwh, peak, load.stepMinutes);
  return { intervals, present, kwh: sumOf(load.kwh), kvarhLagging: sumOf(load.kvarhLagging), maxKw };
}

function spanOf(intakeId: number, fileName: string, spans: Awaited<ReturnType<typeof keptSpans>>): KeptFile {
  const own = spans.filter((span) => span.intakeId === intakeId);
  return {
    intakeId,
    fileName,
    fromMs: Math.min(...own.map((span) => span.startMs)),
    toMs: Math.max(...own.map((span) => span.endMs)),
    stepMinutes: own[0]?.stepMinutes ?? 0,
    intervals: own.reduce((sum, span) => sum + span.count, 0),
    missing: own.reduce((sum, span) => sum + span.missing, 0),
  };
}

function countsOf(load: LoadSeries) {
  let present = 0;
  let estimated = 0;
  for (const mark of load.quality) {
    if (mark !== missing) present++;
    if (mark === 1) estimated++;
  }
  return { intervals: load.quality.length, present, estimated };
}

const startOf = (load: LoadSeries, index: number) => load.startMs + index * load.stepMinutes * minuteMs;

/** Position of the highest reading; null where there is none. */
function peakIndex(load: LoadSeries): number | null {
  let at: number | null = null;
  load.kwh.forEach((kwh, index) => {
    if (!Number.isNaN(kwh) && (at === null || kwh > (load.kwh[at] ?? 0))) at = index;
  });
  return at;
}

const meanOf = (values: Float64Array, index: number, stepMinutes: number) => {
  const energy = values[index] ?? NaN;
  return Number.isNaN(energy) ? null : energy * (60 / stepMinutes);
};

/** The interval of the highest mean kW with the readings of its day. */
function peakOf(load: LoadSeries, timeZone: string, fileOf: (at: number) => number | null): PeakOfYear | null {
  const at = peakIndex(load);
  if (at === null) return null;
  const { stepMinutes } = load;
  const ms = startOf(load, at);
  const date = localDateOf(ms, timeZone);
  const first = Math.round((localDateStartMs(date, timeZone) - load.startMs) / (stepMinutes * minuteMs));
  const end = Math.round((localDateStartMs(addDays(date, 1), timeZone) - load.startMs) / (stepMinutes * minuteMs));
  const day: DayReading[] = [];
  for (let index = Math.max(0, first); index < Math.min(end, load.kwh.length); index++) {
    day.push({
      minute: (index - first) * stepMinutes,
      kw: meanOf(load.kwh, index, stepMinutes),
      kvarLagging: meanOf(load.kvarhLagging, index, stepMinutes),
      kvarLeading: meanOf(load.kvarhLeading, index, stepMinutes),
    });
  }
  const kw = meanOf(load.kwh, at, stepMinutes) ?? 0;
  const kvarLagging = meanOf(load.kvarhLagging, at, stepMinutes);
  return { ms, intakeId: fileOf(at), kw, date, minute: (at - first) * stepMinutes, kvarLagging, day };
}

function gapsOf(load: LoadSeries): ReadingGap[] {
  const gaps: ReadingGap[] = [];
  for (let index = 0; index < load.quality.length; index++) {
    if (load.quality[index] !== missing) continue;
    let end = index;
    while (end < load.quality.length && load.quality[end] === missing) end++;
    gaps.push({ fromMs: startOf(load, index), toMs: startOf(load, end), intervals: end - index });
    index = end;
  }
  return gaps;
}

/** Sum of present values of a channel; null where the meter's files do not carry it. */
function sumOf(values: Float64Array): number | null {
  let sum = 0;
  let any = false;
  for (const value of values) {
    if (Number.isNaN(value)) continue;
    sum += value;
    any = true;
  }
  return any ? sum : null;
}

function monthsOf(load: LoadSeries, timeZone: string): MonthOfLoad[] {
  const months: MonthOfLoad[] = [];
  const stepMs = load.stepMinutes * minuteMs;
  const endMs = startOf(load, load.kwh.length);
  for (let from = localDateOf(load.startMs, timeZone); ;) {
    const to = addMonths(`${from.slice(0, 7)}-01`, 1);
    const first = Math.max(0, Math.round((localDateStartMs(from, timeZone) - load.startMs) / stepMs));
    const end = Math.min(load.kwh.length, Math.round((localDateStartMs(to, timeZone) - load.startMs) / stepMs));
    months.push(monthOf(load, from, first, end));
    if (localDateStartMs(to, timeZone) >= endMs) return months;
    from = to;
  }
}

function monthOf(load: LoadSeries, from: string, first: number, end: number): MonthOfLoad {
  const part: LoadSeries = {
    ...load,
    startMs: startOf(load, first),
    kwh: load.kwh.subarray(first, end),
    kvarhLagging: load.kvarhLagging.subarray(first, end),
    kvarhLeading: load.kvarhLeading.subarray(first, end),
    quality: load.quality.subarray(first, end),
  };
  const peak = peakIndex(part);
  return {
    from,
    ...countsOf(part),
    kwh: sumOf(part.kwh),
    kvarhLagging: sumOf(part.kvarhLagging),
    kvarhLeading: sumOf(part.kvarhLeading),
    maxKw: peak === null ? null : meanOf(part.kwh, peak, load.stepMinutes),
    maxKwMs: peak === null ? null : startOf(part, peak),
  };
}
