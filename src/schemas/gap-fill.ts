import { z } from 'zod';
import { gapMethods, type GapMethod } from '../core/load';

const instant = z.coerce.number('Give an instant in ms.').int().min(-8.64e15).max(8.64e15);
const stretch = {
  fromMs: instant,
  toMs: instant,
  /** Left out: the engagement's own meter. */
  meterId: z.coerce.number().int().min(1).optional(),
};
const longestDays = 62;

/** Whether a stretch is short enough to be estimated at all: a choice of ours; beyond two months there is no plant to go by. */
export const isStretch = ({ fromMs, toMs }: { fromMs: number; toMs: number }) =>
  toMs > fromMs && toMs - fromMs <= longestDays * 86_400_000;
const wrongStretch = {
  path: ['toMs'],
  message: `The end must lie behind the beginning, at most ${longestDays} days. Longer gaps are left missing.`,
};

/** A stretch of missing readings somebody asks about. */
export const gapStretch = z.object(stretch).refine(isStretch, wrongStretch);
export type GapStretch = z.infer<typeof gapStretch>;

/** A stretch and how it is to be estimated. */
export const gapFillInput = z
  .object({ ...stretch, method: z.enum(gapMethods, 'Choose a way to estimate.') })
  .refine(isStretch, wrongStretch);
export type GapFillInput = z.infer<typeof gapFillInput>;

/** Taking back: the version of the row the person saw. */
export const seenFill = z.object({ version: z.number().int().min(0) });

/** What one way to estimate a gap would add. */
export interface GapPreview {
  method: GapMethod;
  intervals: number;
  /** Missing intervals it cannot estimate. */
  left: number;
  kwh: number | null;
  /** The highest estimated mean power. [kW] */
  highestKw: number | null;
  /** Estimated mean power of the intervals shown; null where it estimates none. [kW] */
  kw: (number | null)[];
}

/** The ways to estimate a gap side by side, and the readings around it. */
export interface GapPreviews {
  fromMs: number;
  toMs: number;
  stepMinutes: number;
  /** Beginning of the first interval shown: the gap's days, at most three. */
  shownFromMs: number;
  /** Measured mean power of the intervals shown; null where missing. [kW] */
  measuredKw: (number | null)[];
  ways: GapPreview[];
}

/** A gap that was estimated. */
export interface GapFillView {
  id: number;
  fromMs: number;
  toMs: number;
  method: GapMethod;
  intervals: number;
  left: number;
  kwh: number | null;
  madeBy: string | null;
  madeAt: string;
  version: number;
}
