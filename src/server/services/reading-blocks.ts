import { Op } from 'sequelize';
import { emptyLoad, type LoadGrid, type LoadLayer, type LoadSeries } from '../../core/load';
import type { OverlapChoice } from '../../schemas/intake';
import { ReadingBlock, type ReadingChannel } from '../models/ReadingBlock';

const minuteMs = 60_000;
const energyChannels = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;
const allChannels = [...energyChannels, 'quality'] as const;

interface Slice {
  month: string;
  first: number;
  count: number;
}

/** Cuts a grid at the UTC months. */
export function monthSlices({ startMs, stepMinutes, count }: LoadGrid): Slice[] {
  const stepMs = stepMinutes * minuteMs;
  const parts: Slice[] = [];
  let first = 0;
  while (first < count) {
    const begins = new Date(startMs + first * stepMs);
    const nextMonth = Date.UTC(begins.getUTCFullYear(), begins.getUTCMonth() + 1, 1);
    const end = Math.min(count, Math.ceil((nextMonth - startMs) / stepMs));
    parts.push({ month: begins.toISOString().slice(0, 7), first, count: end - first });
    first = end;
  }
  return parts;
}

/** Doubles as bytes, the lowest first on every machine. */
export function bytesOfDoubles(values: Float64Array): Buffer {
  const buffer = Buffer.alloc(values.length * 8);
  values.forEach((value, index) => buffer.writeDoubleLE(value, index * 8));
  return buffer;
}

/** The same back; a copy is made first, since a buffer may begin at any byte. */
export const doublesOfBytes = (bytes: Buffer): Float64Array =>
  new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));

function bytesOf(channel: ReadingChannel, load: LoadSeries, { first, count }: Slice): Buffer {
  if (channel === 'quality') return Buffer.from(load.quality.slice(first, first + count));
  return bytesOfDoubles(load[channel].subarray(first, first + count));
}

function totalOf(channel: ReadingChannel, load: LoadSeries, { first, count }: Slice): number | null {
  if (channel === 'quality') return null;
  let sum = 0;
  for (const value of load[channel].subarray(first, first + count)) if (!Number.isNaN(value)) sum += value;
  return sum;
}

/** Above all that is kept of a meter, or beneath all of it. */
async function rankOf(meterId: number, overlap: OverlapChoice): Promise<number> {
  const order = overlap === 'keep-new' ? 'DESC' : 'ASC';
  const outermost = await ReadingBlock.findOne({ where: { meterId }, attributes: ['rank'], order: [['rank', order]] });
  if (!outermost) return 0;
  return outermost.rank + (overlap === 'keep-new' ? 1 : -1);
}

/**
 * Keeps a series of a meter, a block per channel and month. Call inside inTx.
 *
 * @param overlap  Whether its readings lie above those kept before or beneath them; nothing kept before is touched
 */
export async function keepSeries(
  meterId: number,
  intakeId: number,
  load: LoadSeries,
  overlap: OverlapChoice = 'keep-new',
): Promise<void> {
  const rank = await rankOf(meterId, overlap);
  for (const slice of monthSlices({ ...load, count: load.kwh.length })) {
    const missing = load.quality.subarray(slice.first, slice.first + slice.count).filter((mark) => mark === 2).length;
    for (const channel of allChannels) {
      await ReadingBlock.create({
        meterId,
        intakeId,
        rank,
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

/** What each file brought to a meter between two instants; `channels` beside the quality, all unless said. */
export async function keptLayers(
  meterId: number,
  { fromMs, toMs }: { fromMs: number; toMs: number },
  channels: readonly ReadingChannel[] = allChannels,
): Promise<LoadLayer[]> {
  const where = { meterId, channel: [...new Set([...channels, 'quality'])], startMs: { [Op.lt]: toMs } };
  const blocks = (await ReadingBlock.findAll({ where, order: ['startMs'] })).filter((block) => endOf(block) > fromMs);
  const byFile = new Map<number, ReadingBlock[]>();
  for (const block of blocks) byFile.set(block.intakeId, [...(byFile.get(block.intakeId) ?? []), block]);
  return [...byFile].map(([source, own]) => ({ source, rank: own[0]!.rank, load: joined(own) }));
}

const endOf = (block: ReadingBlock) => Number(block.startMs) + block.count * block.stepMinutes * minuteMs;

/** The blocks of one file as one series. */
function joined(blocks: ReadingBlock[]): LoadSeries {
  const { stepMinutes } = blocks[0]!;
  const startMs = Number(blocks[0]!.startMs);
  const count = Math.round((Math.max(...blocks.map(endOf)) - startMs) / (stepMinutes * minuteMs));
  const load = emptyLoad({ startMs, stepMinutes, count });
  for (const { channel, startMs: begins, values } of blocks) {
    const at = Math.round((Number(begins) - startMs) / (stepMinutes * minuteMs));
    if (channel === 'quality') load.quality.set(values, at);
    else load[channel].set(doublesOfBytes(values), at);
  }
  return load;
}
