import { stepLengthsMinutes } from '../load';
import { findStep } from './marks';
import { pickReadings, type Strand, type StrandChannel } from './strand';

const filledAt = ({ values }: StrandChannel): number[] => {
  const filled: number[] = [];
  for (let at = 0; at < values.length; at += 1) if (!Number.isNaN(values[at] ?? Number.NaN)) filled.push(at);
  return filled;
};

function countFilled({ values }: StrandChannel): number {
  let count = 0;
  for (let at = 0; at < values.length; at += 1) if (!Number.isNaN(values[at] ?? Number.NaN)) count += 1;
  return count;
}

/**
 * Channels that stand in every second, third ... row only, evenly, are of longer intervals than the others: each becomes a
 * strand of its own.
 */
export function apartBySteps(strand: Strand): Strand[] {
  if (strand.channels.length < 2) return [strand];
  const counts = strand.channels.map(countFilled);
  const most = Math.max(...counts);
  const sparse = strand.channels.filter(
    (_channel, index) => (counts[index] ?? 0) > 3 && (counts[index] ?? 0) < most * 0.6,
  );
  if (sparse.length === 0) return [strand];
  const fine = findStep(strand.walls).stepMinutes;
  const apart: Strand[] = [];
  for (const channel of sparse) {
    const filled = filledAt(channel);
    const picked = pickReadings(strand, filled, [
      { ...channel, values: Float64Array.from(filled, (at) => channel.values[at] ?? Number.NaN) },
    ]);
    const { stepMinutes, share } = findStep(picked.walls);
    const isStep = stepLengthsMinutes.some((length) => length === stepMinutes) && stepMinutes > fine;
    if (isStep && share > 0.9 && stepMinutes % fine === 0) apart.push(picked);
  }
  const taken = new Set(apart.map((one) => one.channels[0]?.role));
  return [{ ...strand, channels: strand.channels.filter((channel) => !taken.has(channel.role)) }, ...apart];
}
