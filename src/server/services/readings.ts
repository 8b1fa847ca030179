import { Op } from 'sequelize';
import type { LoadSeries } from '../../core/load';
import { conflict, notFound } from '../errors';
import { ReadingBlock, type ReadingChannel } from '../models/ReadingBlock';

const minuteMs = 60_000;
const energyChannels = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

interface Slice {
  month: string;
  first: number;
  count: number;
}

/** Cuts a series at the UTC months. */
function slices(load: LoadSeries): Slice[] {
  const stepMs = load.stepMinutes * minuteMs;
  const parts: Slice[] = [];
  let first = 0;
  while (first < load.kwh.length) {
    const begins = new Date(load.startMs + first * stepMs);
    const nextMonth = Date.UTC(begins.getUTCFullYear(), begins.getUTCMonth() + 1, 1);
    const end = Math.min(load.kwh.length, Math.ceil((nextMonth - load.startMs) / stepMs));
    parts.push({ month: begins.toISOString().slice(0, 7), first, count: end - first });
    first = end;
  }
  return parts;
}

function bytesOf(channel: ReadingChannel, load: LoadSeries, { first, count }: Slice): Buffer {
  if (channel === 'quality') return Buffer.from(load.quality.slice(first, first + count));
  const values = load[channel].subarray(first, first + count);
  const buffer = Buffer.alloc(count * 8);
  values.forEach((value, index) => buffer.writeDoubleLE(value, index * 8));
  return buffer;
}

function totalOf(channel: ReadingChannel, load: LoadSeries, { first, count }: Slice): number | null {
  if (channel === 'quality') return null;
  let sum = 0;
  for (const value of load[channel].subarray(first, first + count)) if (!Number.isNaN(value)) sum += value;
  return sum;
}

/** Keeps a series of a meter, a block per channel and month. Call inside inTx. */
export async function keepSeries(meterId: number, intakeId: number, load: LoadSeries): Promise<void> {
  for (const slice of slices(load)) {
    const missing = load.quality.subarray(slice.first, slice.first + slice.count).filter((mark) => mark === 2).length;
    for (const channel of [...energyChannels, 'quality'] as const) {
      await ReadingBlock.create({
        meterId,
        intakeId,
        channel,
        month: slice.month,
        startMs: load.startMs + slice.first * load.stepMinutes * minuteMs,
        stepMinutes: load.stepMinutes,
        count: slice.count,
        missing,
        total: totalOf(channel, load, slice),
        values: bytesOf(channel, load, slice),
      });
    }
  }
}

/** What is kept for a meter between two instants, without the values. */
export async function keptSpans(meterId: number, fromMs: number, toMs: number) {
  const blocks = await ReadingBlock.findAll({
    where: { meterId, channel: 'quality', startMs: { [Op.lt]: toMs } },
    attributes: ['intakeId', 'startMs', 'stepMinutes', 'count', 'missing'],
    order: ['startMs'],
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
 * Reads a meter's kept series over [fromMs, toMs). Intervals nobody brought in are missing (NaN, quality 2).
 *
 * @throws {ServiceError} 404 where nothing is kept in the span, 409 where kept files differ in resolution
 */
export async function loadSeries(meterId: number, fromMs: number, toMs: number): Promise<LoadSeries> {
  const blocks = (
    await ReadingBlock.findAll({ where: { meterId, startMs: { [Op.lt]: toMs } }, order: ['startMs'] })
  ).filter((block) => Number(block.startMs) + block.count * block.stepMinutes * minuteMs > fromMs);
  const [first] = blocks;
  if (!first) throw notFound();
  if (blocks.some((block) => block.stepMinutes !== first.stepMinutes)) {
    throw conflict('The kept files have intervals of different length. Undo one of them in the station Intervals.');
  }
  const count = Math.round((toMs - fromMs) / (first.stepMinutes * minuteMs));
  const load: LoadSeries = {
    startMs: fromMs,
    stepMinutes: first.stepMinutes,
    kwh: new Float64Array(count).fill(NaN),
    kvarhLagging: new Float64Array(count).fill(NaN),
    kvarhLeading: new Float64Array(count).fill(NaN),
    quality: new Uint8Array(count).fill(2),
  };
  for (const block of blocks) lay(block, load);
  return load;
}

/** Lays a block into its place; a copy is made first, since a buffer may begin at any byte. */
function lay(block: ReadingBlock, load: LoadSeries): void {
  const { values } = block;
  const bytes = values.buffer.slice(values.byteOffset, values.byteOffset + values.byteLength);
  const source = block.channel === 'quality' ? new Uint8Array(bytes) : new Float64Array(bytes);
  const target = load[block.channel];
  const offset = Math.round((Number(block.startMs) - load.startMs) / (block.stepMinutes * minuteMs));
  const from = Math.max(0, -offset);
  const to = Math.min(source.length, target.length - offset);
  if (to > from) target.set(source.subarray(from, to), offset + from);
}
