/** One day of a carpet: a character per interval, 0 to 6 for the step of ink, `-` for missing. */
export interface CarpetDay {
  /** Local date YYYY-MM-DD. */
  date: string;
  steps: string;
  /** Over the readings that are there; null where the whole day is missing. */
  least: number | null;
  mean: number | null;
  greatest: number | null;
  missing: number;
}

/** A year of readings as plain JSON, a fortieth of the readings' own size. */
export interface CarpetData {
  unit: string;
  stepMinutes: number;
  /** Six values that part the seven steps. */
  thresholds: number[];
  days: CarpetDay[];
  /** Places numbered on the picture and listed beside it. */
  marks?: CarpetMark[];
}

export interface CarpetMark {
  label: string;
  date: string;
  /** Minutes after local midnight. */
  fromMinute: number;
  toMinute: number;
  kind: 'missing' | 'oddity';
}

/** Decimals at which six thresholds differ: none from ten apart, more below. */
export function thresholdDecimals([first = 0, second = 0]: readonly number[]): number {
  const apart = Math.abs(second - first);
  return apart > 0 ? Math.max(0, 1 - Math.floor(Math.log10(apart))) : 0;
}

/** Six round thresholds between the second and ninety-eighth hundredth of the readings. */
function carpetThresholds(readings: number[]): number[] {
  const sorted = [...readings].sort((a, b) => a - b);
  const at = (share: number) => sorted[Math.round(share * (sorted.length - 1))] ?? 0;
  const [low, high] = [at(0.02), at(0.98)];
  const step = (high - low) / 6 || 1;
  const grain = 10 ** (Math.floor(Math.log10(Math.abs(step))) - 1);
  const rounded = (value: number) => Number((Math.round(value / grain) * grain).toPrecision(12));
  return Array.from({ length: 6 }, (_, index) => rounded(low + step * (index + 0.5)));
}

/**
 * Packs readings for a carpet.
 *
 * @param days A local date and its readings each, in order of time; a day of a clock change has its own count.
 *   null or NaN is missing.
 */
export function packCarpet(input: {
  unit: string;
  stepMinutes: number;
  days: { date: string; readings: ArrayLike<number | null> }[];
  marks?: CarpetMark[];
}): CarpetData {
  const present = (value: number | null): value is number => value !== null && !Number.isNaN(value);
  const thresholds = carpetThresholds(input.days.flatMap((day) => Array.from(day.readings).filter(present)));
  const stepOf = (value: number) => thresholds.filter((threshold) => value >= threshold).length;
  const days = input.days.map(({ date, readings }) => {
    const values = Array.from(readings);
    const known = values.filter(present);
    return {
      date,
      steps: values.map((value) => (present(value) ? String(stepOf(value)) : '-')).join(''),
      least: known.length ? Math.min(...known) : null,
      mean: known.length ? known.reduce((sum, value) => sum + value, 0) / known.length : null,
      greatest: known.length ? Math.max(...known) : null,
      missing: values.length - known.length,
    };
  });
  return { unit: input.unit, stepMinutes: input.stepMinutes, thresholds, days, marks: input.marks };
}

/** A run of equal intervals within one day. */
export interface CarpetRun {
  day: number;
  from: number;
  length: number;
}

/** Runs of each step, and of what is missing: some thousand rectangles instead of 35,040. */
export function carpetRuns(days: CarpetDay[]): Map<string, CarpetRun[]> {
  const runs = new Map<string, CarpetRun[]>();
  days.forEach(({ steps }, day) => {
    let from = 0;
    for (let at = 1; at <= steps.length; at += 1) {
      if (steps[at] === steps[from]) continue;
      const step = steps[from]!;
      const known = runs.get(step);
      const run = { day, from, length: at - from };
      if (known) known.push(run);
      else runs.set(step, [run]);
      from = at;
    }
  });
  return runs;
}
