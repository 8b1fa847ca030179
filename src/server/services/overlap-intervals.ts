import {
  aggregateLoad,
  compareLoads,
  endOfLoad,
  overlayLoads,
  type LoadLayer,
  type LoadSeries,
  type LoadsBeside,
} from '../../core/load';
import type { IntervalsBeside, IntervalsOverlap } from '../../schemas/overlap';
import { conflict } from '../errors';
import { Intake } from '../models/Intake';
import type { Meter } from '../models/Meter';
import { meterOf, type OpenIntake } from './intake-guard';
import { readIntervalFile, type HowToRead } from './intake-read';
import { keptLayers } from './reading-blocks';
import { keptSpans } from './readings';

const minuteMs = 60_000;

/** What is kept under the span of a file, and what the file brings. */
export async function intervalsOverlap(open: OpenIntake, how: HowToRead): Promise<IntervalsOverlap> {
  const { load } = await readIntervalFile(open.intake, how);
  await assertSteps(meterOf(open), load);
  return intervalsBeside(open, load);
}

/**
 * Whether the length of a file's intervals goes with those kept at the meter: one must be a multiple of the other, and
 * their intervals must begin together, or nothing could be read across them.
 *
 * @throws {ServiceError} 409 with the lengths and what to do
 */
export async function assertSteps(meter: Meter, load: LoadSeries): Promise<void> {
  for (const span of await keptSpans(meter.id, -8.64e15, 8.64e15)) {
    const [fine, coarse] = [span.stepMinutes, load.stepMinutes].sort((a, b) => a - b) as [number, number];
    const apartMs = Math.abs(span.startMs - load.startMs);
    if (coarse % fine === 0 && apartMs % (fine * minuteMs) === 0) continue;
    const why =
      coarse % fine === 0
        ? `begin ${Math.round((apartMs % (fine * minuteMs)) / minuteMs)} minutes apart from them`
        : `are ${load.stepMinutes} minutes long, and neither length is a multiple of the other`;
    throw conflict(
      `The kept readings of ${meter.label} are ${span.stepMinutes}-minute intervals; those of this file ${why}. Ask for both in one length, or undo the other file first.`,
      { intakeId: span.intakeId },
    );
  }
}

/** The readings of a file beside those kept, month by month of the site's time. */
export async function intervalsBeside(open: OpenIntake, load: LoadSeries): Promise<IntervalsOverlap> {
  const { intake, opened } = open;
  const meter = meterOf(open);
  const layers = (await keptLayers(meter.id, { fromMs: load.startMs, toMs: endOfLoad(load) })).filter(
    ({ source }) => source !== intake.id,
  );
  const files = await Intake.findAll({ where: { id: layers.map(({ source }) => source) } });
  const foreign = files.some((file) => file.engagementId !== opened.engagement.id);
  const { months, compared } = besideLayers(load, layers, opened.site.timeZone);
  return {
    kind: 'intervals',
    asks: months.some((month) => month.inCommon > 0),
    span: spanInCommon(load, layers),
    files: files.map((file) =>
      file.engagementId === opened.engagement.id
        ? { intakeId: file.id, fileName: file.fileName }
        : { intakeId: null, fileName: null },
    ),
    stepMinutes: {
      kept: [...new Set(layers.map((layer) => layer.load.stepMinutes))].sort((a, b) => a - b),
      comes: load.stepMinutes,
      compared,
    },
    months: months.map(presentBeside),
    total: months.length > 0 ? totalOf(months.map(presentBeside)) : null,
    keepNewRefused: foreign
      ? `Readings under this file came with another engagement of ${meter.label}, which is priced on them. Keep only what is not kept already, or undo them there first.`
      : null,
  };
}

function spanInCommon(load: LoadSeries, layers: LoadLayer[]): IntervalsOverlap['span'] {
  if (layers.length === 0) return null;
  const fromMs = Math.max(load.startMs, Math.min(...layers.map((layer) => layer.load.startMs)));
  const toMs = Math.min(endOfLoad(load), Math.max(...layers.map((layer) => endOfLoad(layer.load))));
  return { fromMs, toMs };
}

/** Both in the longest of their intervals, over the span of the file. */
function besideLayers(load: LoadSeries, layers: LoadLayer[], timeZone: string) {
  const compared = Math.max(load.stepMinutes, ...layers.map((layer) => layer.load.stepMinutes));
  const stepMs = compared * minuteMs;
  // The longer intervals are those of whoever has them; a shorter series is summed up to their beginnings.
  const longest = [load, ...layers.map((layer) => layer.load)].find((one) => one.stepMinutes === compared)!;
  const behindMs = (((load.startMs - longest.startMs) % stepMs) + stepMs) % stepMs;
  const startMs = load.startMs - behindMs;
  const grid = { startMs, stepMinutes: compared, count: Math.ceil((endOfLoad(load) - startMs) / stepMs) };
  const comes = aggregateLoad(load, grid);
  return { months: compareLoads(overlayLoads(layers, grid).load, comes, timeZone), compared };
}

const presentBeside = ({ firstKwh, secondKwh, onlyFirst, onlySecond, ...rest }: LoadsBeside): IntervalsBeside => ({
  ...rest,
  keptKwh: firstKwh,
  comesKwh: secondKwh,
  onlyKept: onlyFirst,
  onlyComes: onlySecond,
});

function totalOf(months: IntervalsBeside[]): IntervalsBeside {
  const sum = (pick: (month: IntervalsBeside) => number) => months.reduce((total, month) => total + pick(month), 0);
  const sumKnown = (key: 'keptKwh' | 'comesKwh') =>
    months.some((month) => month[key] !== null) ? sum((month) => month[key] ?? 0) : null;
  const size = (month: IntervalsBeside) => Math.abs(month.greatest?.difference ?? 0);
  const widest = months.reduce((top, month) => (size(month) > size(top) ? month : top), months[0]!);
  return {
    from: null,
    inCommon: sum((month) => month.inCommon),
    equal: sum((month) => month.equal),
    keptKwh: sumKnown('keptKwh'),
    comesKwh: sumKnown('comesKwh'),
    greatest: widest.greatest,
    onlyKept: sum((month) => month.onlyKept),
    onlyComes: sum((month) => month.onlyComes),
  };
}
