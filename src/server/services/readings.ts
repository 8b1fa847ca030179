import { Op } from 'sequelize';
import { layersThatShow, overlayLoads, type LaidLoad, type LoadLayer, type LoadSeries } from '../../core/load';
import { conflict, notFound } from '../errors';
import { ReadingBlock } from '../models/ReadingBlock';
import { keptLayers } from './reading-blocks';

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

/** The same with the file each interval comes from. */
export async function laidSeries(meterId: number, fromMs: number, toMs: number): Promise<LaidLoad> {
  return layOnto(await keptLayers(meterId, { fromMs, toMs }), fromMs, toMs);
}

/** How much of a span has a reading, 0 to 1; from the quality marks alone. */
export async function presentFraction(meterId: number, fromMs: number, toMs: number): Promise<number> {
  const { load } = layOnto(await keptLayers(meterId, { fromMs, toMs }, ['quality']), fromMs, toMs);
  return load.quality.filter((mark) => mark !== 2).length / load.quality.length;
}

function layOnto(layers: LoadLayer[], fromMs: number, toMs: number): LaidLoad {
  if (layers.length === 0) throw notFound();
  const shown = layersThatShow(layers);
  const odd = shown.layers.find(({ load }) => shown.stepMinutes % load.stepMinutes !== 0);
  if (odd) {
    throw conflict(
      `The kept files have intervals of ${odd.load.stepMinutes} and of ${shown.stepMinutes} minutes, and neither is a multiple of the other. Undo one of them in the station Intervals.`,
    );
  }
  const count = Math.round((toMs - fromMs) / (shown.stepMinutes * minuteMs));
  return overlayLoads(shown.layers, { startMs: fromMs, stepMinutes: shown.stepMinutes, count });
}
