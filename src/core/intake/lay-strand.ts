import { quality as grades } from '../load';
import { registerEnergy } from './registers';
import type { GriddedChannels, PlacedStrand } from './series';
import type { Strand, StrandChannel } from './strand';

/** Lays one strand on the grid: its first reading of an interval is kept, rows of others that differ are collected. */
export function layStrand(
  placed: PlacedStrand,
  leastMinute: number,
  gridded: GriddedChannels,
  differing: number[],
): void {
  const { strand, timeline } = placed;
  const { stepMinutes, length } = gridded;
  const isFilled = new Uint8Array(length);
  const marks = new Uint8Array(length);
  const count = strand.rows.length;
  const sources = strand.channels.map((channel) => channel.values);
  const targets = strand.channels.map(() => new Float64Array(length).fill(Number.NaN));
  const factors = strand.channels.map((channel) =>
    channel.measure === 'power' && channel.role !== 'power-factor' ? stepMinutes / 60 : 1,
  );
  for (let turn = 0; turn < count; turn += 1) {
    // A file that runs backwards was turned round; the first reading of the file still wins.
    const at = strand.isTurned ? count - 1 - turn : turn;
    const minute = timeline.utc[at] ?? Number.NaN;
    const slot = (minute - leastMinute) / stepMinutes;
    if (!Number.isInteger(slot) || slot < 0 || slot >= length) continue;
    const mark = strand.quality?.[at] ?? grades.measured;
    if (mark === grades.missing || !hasFigure(sources, at)) continue;
    if (isFilled[slot] === 1) {
      gridded.duplicates += 1;
      if (
        sources.some((source, index) =>
          differs(targets[index]?.[slot], (source[at] ?? Number.NaN) * (factors[index] ?? 1)),
        )
      )
        differing.push(strand.rows[at] ?? 0);
      continue;
    }
    isFilled[slot] = 1;
    marks[slot] = mark;
    for (let index = 0; index < sources.length; index += 1) {
      const target = targets[index];
      if (target) target[slot] = (sources[index]?.[at] ?? Number.NaN) * (factors[index] ?? 1);
    }
  }
  const isEnd = timeline.style.marks === 'end' || timeline.style.marks === 'own-day-end';
  strand.channels.forEach((channel, index) => {
    const figures = targets[index] ?? new Float64Array(length);
    if (channel.measure === 'register') gridded.falls += registerEnergy(figures, isEnd, channel.scale);
    addChannel(gridded, channel, figures);
  });
  keepMarks(strand, marks, gridded.quality, isEnd);
}

/** Estimates count on channels that are kept; an estimated reading of a register stands behind both its intervals. */
function keepMarks({ channels }: Strand, marks: Uint8Array, quality: Uint8Array, isEnd: boolean): void {
  if (channels.every((channel) => channel.role === 'export')) return;
  const hasRegister = channels.some((channel) => channel.measure === 'register');
  for (let slot = 0; slot < marks.length; slot += 1) {
    if (marks[slot] !== grades.estimated) continue;
    quality[slot] = grades.estimated;
    const other = slot + (isEnd ? 1 : -1);
    if (hasRegister && other >= 0 && other < quality.length) quality[other] = grades.estimated;
  }
}

function hasFigure(sources: readonly Float64Array[], at: number): boolean {
  for (let index = 0; index < sources.length; index += 1)
    if (!Number.isNaN(sources[index]?.[at] ?? Number.NaN)) return true;
  return false;
}

function differs(kept: number | undefined, other: number): boolean {
  return (
    (kept !== undefined &&
      !(Number.isNaN(kept) && Number.isNaN(other)) &&
      Math.abs(kept - other) > 1e-9 * Math.max(1, Math.abs(kept))) ||
    Number.isNaN(kept ?? 0) !== Number.isNaN(other)
  );
}

/**
 * Registers of one direction that run together are added. Such as take turns (one meter split by time-of-use period) are
 * laid into each other; where two of those name the same interval the first is kept.
 */
function addChannel(gridded: GriddedChannels, channel: StrandChannel, figures: Float64Array): void {
  const own = gridded.channels.get(channel.role);
  if (!own) return void gridded.channels.set(channel.role, figures);
  let both = 0;
  let added = 0;
  for (let slot = 0; slot < own.length; slot += 1) {
    if (Number.isNaN(figures[slot] ?? Number.NaN)) continue;
    added += 1;
    if (!Number.isNaN(own[slot] ?? Number.NaN)) both += 1;
  }
  const takeTurns = both * 2 < added;
  for (let slot = 0; slot < own.length; slot += 1) {
    const [kept, next] = [own[slot] ?? Number.NaN, figures[slot] ?? Number.NaN];
    own[slot] = !takeTurns ? kept + next : Number.isNaN(kept) ? next : kept;
  }
  if (takeTurns) gridded.duplicates += both;
}
