/** What a carpet shows: kW in ink; kvar in copper where lagging, in verdigris where leading; power factor the poorer the stronger. */
export type CarpetChannel = 'kw' | 'kvar' | 'pf';

/** One day of a carpet: a character per interval, 0 to 6 for the step of ink, `a` to `g` for the same where leading, `-` for missing. */
export interface CarpetDay {
  /** Local date YYYY-MM-DD. */
  date: string;
  steps: string;
  /** Over the readings that are there; null where the whole day is missing. Leading kvar and power factors are below nought. */
  least: number | null;
  mean: number | null;
  greatest: number | null;
  missing: number;
  /** Runs of estimated intervals: first, and how many. Absent where none is. */
  estimated?: [first: number, count: number][];
}

/** A year of readings as plain JSON, a fortieth of the readings' own size. */
export interface CarpetData {
  channel?: CarpetChannel;
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

interface DayReadings {
  date: string;
  readings: ArrayLike<number | null>;
  estimated?: number[];
}

const isPresent = (value: number | null): value is number => value !== null && !Number.isNaN(value);

/** Power factors that part the steps, the poorer the stronger: those that tariffs commonly name. */
const factorThresholds = [0.98, 0.95, 0.9, 0.85, 0.8, 0.7];
const leadingSteps = 'abcdefg';

/** The character of a reading. The sign of kvar and power factor is their sense: below nought leads. */
function stepOf(value: number, channel: CarpetChannel, thresholds: number[]): string {
  const size = Math.abs(value);
  const isBeyond = (threshold: number) => (channel === 'pf' ? size < threshold : size >= threshold);
  const step = thresholds.filter(isBeyond).length;
  return value < 0 && channel !== 'kw' ? leadingSteps[step]! : String(step);
}

/**
 * Packs readings for a carpet.
 *
 * @param days A local date and its readings each, in order of time; a day of a clock change has its own count.
 *   null or NaN is missing.
 */
export function packCarpet(input: {
  channel?: CarpetChannel;
  unit: string;
  stepMinutes: number;
  days: DayReadings[];
  marks?: CarpetMark[];
}): CarpetData {
  const { channel = 'kw', unit, stepMinutes, marks } = input;
  const sizes = input.days.flatMap((day) => Array.from(day.readings).filter(isPresent).map(Math.abs));
  const thresholds = channel === 'pf' ? factorThresholds : carpetThresholds(sizes);
  const days = input.days.map(({ date, readings, estimated }): CarpetDay => {
    const values = Array.from(readings);
    const known = values.filter(isPresent);
    return {
      date,
      steps: values.map((value) => (isPresent(value) ? stepOf(value, channel, thresholds) : '-')).join(''),
      least: known.length ? Math.min(...known) : null,
      mean: known.length ? known.reduce((sum, value) => sum + value, 0) / known.length : null,
      greatest: known.length ? Math.max(...known) : null,
      missing: values.length - known.length,
      ...(estimated && { estimated: runsOf(estimated) }),
    };
  });
  return { channel, unit, stepMinutes, thresholds, days, marks };
}

/** Ascending positions as runs. */
function runsOf(positions: number[]): [number, number][] {
  const runs: [number, number][] = [];
  for (const at of positions) {
    const open = runs.at(-1);
    if (open && open[0] + open[1] === at) open[1]++;
    else runs.push([at, 1]);
  }
  return runs;
}

/** The same readings as kW, and as kvar and power factor where they carry reactive energy. */
export function packCarpets(input: {
  stepMinutes: number;
  days: (DayReadings & { kvar?: ArrayLike<number | null> })[];
  marks?: CarpetMark[];
}): CarpetData[] {
  const kw = packCarpet({ channel: 'kw', unit: 'kW', ...input });
  if (!input.days.some(({ kvar }) => kvar)) return [kw];
  const derive = (of: (kw: number, kvar: number) => number) =>
    input.days.map(({ date, readings, kvar = [], estimated }) => ({
      date,
      estimated,
      readings: Array.from(readings, (one, at) => {
        const other = kvar[at] ?? null;
        return isPresent(one) && isPresent(other) ? of(one, other) : null;
      }),
    }));
  return [
    kw,
    packCarpet({ ...input, channel: 'kvar', unit: 'kvar', days: derive((_, kvar) => kvar) }),
    packCarpet({ ...input, channel: 'pf', unit: 'pf', days: derive(factorOf) }),
  ];
}

/** Displacement power factor with its sense as sign; 1 where nothing flows, since nothing is poor then. */
function factorOf(kw: number, kvar: number): number {
  const apparent = Math.hypot(kw, kvar);
  if (apparent === 0) return 1;
  return (kw / apparent) * (kvar < 0 ? -1 : 1);
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
