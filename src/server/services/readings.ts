import { Op } from 'sequelize';
import {
  layersThatShow,
  overlayLoads,
  quality as grades,
  type LaidLoad,
  type LoadLayer,
  type LoadSeries,
} from '../../core/load';
import { conflict, notFound } from '../errors';
import { GapFill } from '../models/GapFill';
import { ReadingBlock } from '../models/ReadingBlock';
import { doublesOfBytes, keptLayers } from './reading-blocks';

const minuteMs = 60_000;

/** What each file brought to a meter between two instants, without the values. */
export async function keptSpans(meterId: number, fromMs: number, toMs: number) {
  const blocks = await ReadingBlock.findAll({
    where: { meterId, channel: 'quality', startMs: { [Op.lt]: toMs } },
    attributes: ['intakeId', 'startMs', 'stepMinutes', 'count', 'missing'],
    order: ['startMs', 'rank'],
  });
  return blocks
    .map((block) => ({
      intakeId: block.intakeId,
      startMs: Number(block.startMs),
      endMs: Number(block.startMs) + block.count * block.stepMinutes * minuteMs,
      stepMinutes: block.stepMinutes,
      count: block.count,
      missing: block.missing,
    }))
    .filter((span) => span.endMs > fromMs);
}

/**
 * Reads a meter's kept series over [fromMs, toMs). Where files overlap the one that was chosen shows; files of different
 * length of interval are read in the longest. Intervals nobody brought in are missing (NaN, quality 2).
 *
 * @throws {ServiceError} 404 where nothing is kept in the span, 409 where the lengths do not fit together
 */
export async function loadSeries(meterId: number, fromMs: number, toMs: number): Promise<LoadSeries> {
  return (await laidSeries(meterId, fromMs, toMs)).load;
}

/** The same with the file each interval comes from; of an estimated gap less than nought. */
export async function laidSeries(
  meterId: number,
  fromMs: number,
  toMs: number,
  { fills = 'laid in' }: { fills?: 'laid in' | 'left out' } = {},
): Promise<LaidLoad> {
  const kept = await keptLayers(meterId, { fromMs, toMs });
  const estimated = fills === 'laid in' ? await filledLayers(meterId, fromMs, toMs) : [];
  return layOnto(kept, estimated, { fromMs, toMs });
}

/** The estimated gaps of a meter: they show only where no file has a reading. */
async function filledLayers(meterId: number, fromMs: number, toMs: number): Promise<LoadLayer[]> {
  const where = { meterId, intervals: { [Op.gt]: 0 }, fromMs: { [Op.lt]: toMs }, toMs: { [Op.gt]: fromMs } };
  return (await GapFill.findAll({ where })).map((fill) => {
    const values = doublesOfBytes(fill.values);
    const count = values.length / 3;
    const kwh = values.subarray(0, count);
    const load: LoadSeries = {
      startMs: Number(fill.fromMs),
      stepMinutes: fill.stepMinutes,
      kwh,
      kvarhLagging: values.subarray(count, 2 * count),
      kvarhLeading: values.subarray(2 * count),
      quality: new Uint8Array(count),
    };
    const isBlank = (index: number) =>
      [load.kwh, load.kvarhLagging, load.kvarhLeading].every((one) => isNaN(one[index]!));
    load.quality.forEach((_, index) => (load.quality[index] = isBlank(index) ? grades.missing : grades.estimated));
    return { load, rank: -Infinity, source: -fill.id };
  });
}

/** How much of a span has a reading, 0 to 1; from the quality marks alone. */
export async function presentFraction(meterId: number, fromMs: number, toMs: number): Promise<number> {
  const kept = await keptLayers(meterId, { fromMs, toMs }, ['quality']);
  const { load } = layOnto(kept, await filledLayers(meterId, fromMs, toMs), { fromMs, toMs });
  return load.quality.filter((mark) => mark !== grades.missing).length / load.quality.length;
}

function layOnto(
  layers: LoadLayer[],
  estimated: LoadLayer[],
  { fromMs, toMs }: { fromMs: number; toMs: number },
): LaidLoad {
  if (layers.length === 0) throw notFound();
  const shown = layersThatShow(layers);
  const odd = shown.layers.find(({ load }) => shown.stepMinutes % load.stepMinutes !== 0);
  if (odd) {
    throw conflict(
      `The kept files have intervals of ${odd.load.stepMinutes} and of ${shown.stepMinutes} minutes, and neither is a multiple of the other. Undo one of them in the station Intervals.`,
    );
  }
  const count = Math.round((toMs - fromMs) / (shown.stepMinutes * minuteMs));
  // An estimate is worked out in the step it is read in; where files of another step came since, it was worked out again.
  const fitting = estimated.filter(({ load }) => shown.stepMinutes % load.stepMinutes === 0);
  return overlayLoads([...shown.layers, ...fitting], { startMs: fromMs, stepMinutes: shown.stepMinutes, count });
}
