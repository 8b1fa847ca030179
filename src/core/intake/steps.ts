import { quality as grades } from '../load';
import type { PlacedStrand } from './series';
import type { StrandChannel } from './strand';
import type { IntakeNote } from './types';

/**
 * Brings strands of different lengths of interval to the longest one that all divide: energies are added, powers and
 * factors averaged. An interval of which a part is missing is missing.
 */
export function joinSteps(placed: readonly PlacedStrand[], notes: IntakeNote[]): readonly PlacedStrand[] {
  const steps = [...new Set(placed.map(({ timeline }) => timeline.stepMinutes))].sort((a, b) => a - b);
  const longest = steps.at(-1) ?? Number.NaN;
  if (steps.length < 2 || steps.some((step) => longest % step !== 0)) return placed;
  notes.push({
    code: 'steps-joined',
    message: `The file holds readings of ${steps.join(' and ')} minutes; all are brought to ${longest} minutes.`,
  });
  return placed.map((one) => (one.timeline.stepMinutes === longest ? one : lengthened(one, longest)));
}

interface Sum {
  row: number;
  parts: number;
  mark: number;
  /** One per channel. */
  figures: number[];
}

function lengthened({ strand, timeline }: PlacedStrand, stepMinutes: number): PlacedStrand {
  const parts = stepMinutes / timeline.stepMinutes;
  const sums = new Map<number, Sum>();
  const seen = new Set<number>();
  timeline.utc.forEach((minute, at) => {
    if (Number.isNaN(minute) || seen.has(minute)) return;
    seen.add(minute);
    const begin = Math.floor(minute / stepMinutes) * stepMinutes;
    const sum = sums.get(begin) ?? {
      row: strand.rows[at] ?? 0,
      parts: 0,
      mark: grades.measured,
      figures: strand.channels.map(() => 0),
    };
    sum.parts += 1;
    sum.mark = Math.max(sum.mark, strand.quality?.[at] ?? grades.measured);
    strand.channels.forEach(
      (channel, index) => (sum.figures[index] = (sum.figures[index] ?? 0) + shareOf(channel, at, parts)),
    );
    sums.set(begin, sum);
  });
  const whole = [...sums].sort(([a], [b]) => a - b);
  const utc = Float64Array.from(whole, ([begin]) => begin);
  return {
    strand: {
      ...strand,
      walls: utc,
      offsets: null,
      spans: null,
      days: null,
      rows: Uint32Array.from(whole, ([, sum]) => sum.row),
      channels: strand.channels.map((channel, index) => ({
        ...channel,
        values: Float64Array.from(whole, ([, sum]) =>
          sum.parts === parts ? (sum.figures[index] ?? Number.NaN) : Number.NaN,
        ),
      })),
      quality: Uint8Array.from(whole, ([, sum]) => sum.mark),
      isTurned: false,
    },
    timeline: { ...timeline, stepMinutes, utc },
  };
}

/** What a part gives to the whole: its energy, or its share of the average. */
function shareOf(channel: StrandChannel, at: number, parts: number): number {
  const figure = channel.values[at] ?? Number.NaN;
  const isRatio = channel.role === 'power-factor' || channel.role === 'sense';
  return channel.measure === 'energy' && !isRatio ? figure : figure / parts;
}
