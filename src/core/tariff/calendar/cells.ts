import { PriceError } from '../errors';
import type { CellKind, DemandWindow } from '../model';
import type { PeriodCalendar } from './period-calendar';

/**
 * Cells of one kind, in one window, in one period, with room for their energies. Nothing is made anew while pricing.
 *
 * A cell is one run of successive intervals, or several where a window cuts it.
 */
export interface CellPlan {
  /** Number of cells. */
  count: number;
  /** First interval of each run, and the one behind its last. int32[runs] */
  runFirst: Int32Array;
  runEnd: Int32Array;
  /** First run of each cell, and the number of runs; null: cell c is run c. int32[cells + 1] */
  runStarts: Int32Array | null;
  /** Every cell is one interval: the series itself holds their energies. */
  isSingle: boolean;
  /** Whether some measure reads the cells' reactive energy. */
  needsLagging: boolean;
  needsLeading: boolean;
  /** 1: an interval of the cell lies outside the series. uint8[cells] */
  broken: Uint8Array;
  /** Day of the period each cell begins on. int32[cells] */
  day: Int32Array;
  /** First cell of each piece, and the number of cells. int32[pieces + 1] */
  pieceStarts: Int32Array;
  /** Energies and hours of the cells; empty where `isSingle`. float64[cells] */
  kwh: Float64Array;
  kvarhLagging: Float64Array;
  kvarhLeading: Float64Array;
  hours: Float64Array;
  /** 0: nothing of the cell was metered; 1: something is missing of it; 2: it is whole. uint8[cells] */
  standing: Uint8Array;
  /** Hours and standing are those of a series without gaps in the period. */
  isWhole: boolean;
  /** Hours of every cell; NaN where they differ. */
  evenHours: number;
}

/** What cells are laid over. */
export interface CellGround {
  calendar: PeriodCalendar;
  stepMinutes: number;
  /** Intervals of the series. */
  seriesCount: number;
  /** Position behind the last of each piece. */
  pieceEnds: number[];
}

/** Takes positions from and to (behind the last) of what may become a cell. */
type Visit = (from: number, to: number) => void;

/**
 * Lays out cells; one with no interval inside the series is none.
 *
 * An hour or a day holds the intervals inside the window; a demand window counts only if it lies wholly inside window and period.
 *
 * @param inside  uint8[positions], 1 inside the window; null: no window
 * @throws {PriceError} if a demand window is no multiple of the series' step
 */
export function layCells(
  kind: CellKind,
  ground: CellGround,
  inside: Uint8Array | null,
  demandWindow: DemandWindow | undefined,
): CellPlan {
  const builder = new CellBuilder(ground, inside);
  const { stepMinutes } = ground;
  const isLong =
    demandWindow !== undefined &&
    (stepMinutes < demandWindow.minutes || demandWindow.everyMinutes !== undefined) &&
    stepMinutes <= demandWindow.minutes;
  if (kind === 'demand window' && isLong) {
    visitDemandWindows(ground, demandWindow, (from, to) => {
      if (isWhole(from, to, inside)) builder.add(from, to);
    });
  } else {
    const minutes = kind === 'hour' ? 60 : kind === 'day' ? 1440 : 0;
    visitBlocks(ground, minutes, (from, to) => builder.add(from, to));
  }
  return builder.finish();
}

function isWhole(from: number, to: number, inside: Uint8Array | null): boolean {
  if (inside) for (let position = from; position < to; position++) if (inside[position] !== 1) return false;
  return true;
}

/** Runs of positions with the same block of the local clock; length 0 makes every position its own. */
function visitBlocks({ calendar }: CellGround, minutes: number, visit: Visit): void {
  const { count, day, clock, turn } = calendar;
  let from = 0;
  const blockOf = (position: number): number => (minutes === 0 ? position : Math.floor(clock[position]! / minutes));
  for (let position = 1; position <= count; position++) {
    const isSame =
      position < count &&
      blockOf(position) === blockOf(from) &&
      day[position] === day[from] &&
      (minutes === 1440 || turn[position] === turn[from]);
    if (isSame) continue;
    visit(from, position);
    from = position;
  }
}

function visitDemandWindows(ground: CellGround, { minutes, everyMinutes }: DemandWindow, visit: Visit): void {
  const { calendar, stepMinutes } = ground;
  for (const length of [minutes, everyMinutes ?? minutes]) {
    if (length % stepMinutes === 0) continue;
    throw new PriceError(
      `demandWindow: ${length} minutes are no multiple of the series' step of ${stepMinutes} minutes. Use a series of a shorter step.`,
      {
        name: 'demandWindow',
      },
    );
  }
  const size = minutes / stepMinutes;
  if (everyMinutes === undefined) {
    visitBlocks(ground, minutes, (from, to) => {
      if (to - from === size) visit(from, to);
    });
    return;
  }
  for (let from = 0; from + size <= calendar.count; from++) {
    if (calendar.clock[from]! % everyMinutes < stepMinutes) visit(from, from + size);
  }
}

class CellBuilder {
  private readonly runFirst: number[] = [];
  private readonly runEnd: number[] = [];
  private readonly runStarts: number[] = [];
  private readonly broken: number[] = [];
  private readonly days: number[] = [];
  private readonly pieceStarts = [0];

  constructor(
    private readonly ground: CellGround,
    private readonly inside: Uint8Array | null,
  ) {}

  add(from: number, to: number): void {
    const { calendar, seriesCount, pieceEnds } = this.ground;
    const firstRun = this.runFirst.length;
    let isBroken = false;
    for (let position = from; position < to; position++) {
      if (this.inside && this.inside[position] !== 1) continue;
      const interval = calendar.first + position;
      if (interval < 0 || interval >= seriesCount) isBroken = true;
      else if (this.runFirst.length > firstRun && this.runEnd[this.runEnd.length - 1] === interval)
        this.runEnd[this.runEnd.length - 1] = interval + 1;
      else {
        this.runFirst.push(interval);
        this.runEnd.push(interval + 1);
      }
    }
    if (this.runFirst.length === firstRun) return;
    while (from >= pieceEnds[this.pieceStarts.length - 1]!) this.pieceStarts.push(this.runStarts.length);
    this.runStarts.push(firstRun);
    this.broken.push(isBroken ? 1 : 0);
    this.days.push(calendar.day[from]!);
  }

  finish(): CellPlan {
    const { runFirst, runEnd, runStarts, pieceStarts } = this;
    const count = runStarts.length;
    while (pieceStarts.length <= this.ground.pieceEnds.length) pieceStarts.push(count);
    const isSimple = runFirst.length === count;
    const isSingle = isSimple && runFirst.every((first, run) => runEnd[run] === first + 1);
    const room = isSingle ? 0 : count;
    return {
      count,
      runFirst: Int32Array.from(runFirst),
      runEnd: Int32Array.from(runEnd),
      runStarts: isSimple ? null : Int32Array.from([...runStarts, runFirst.length]),
      isSingle,
      needsLagging: false,
      needsLeading: false,
      broken: Uint8Array.from(this.broken),
      day: Int32Array.from(this.days),
      pieceStarts: Int32Array.from(pieceStarts),
      kwh: new Float64Array(room),
      kvarhLagging: new Float64Array(room),
      kvarhLeading: new Float64Array(room),
      hours: new Float64Array(room),
      standing: new Uint8Array(room),
      isWhole: false,
      evenHours: NaN,
    };
  }
}

/** Number of the first interval of a cell. */
export function firstIntervalOf({ runStarts, runFirst }: CellPlan, cell: number): number {
  return runFirst[runStarts === null ? cell : runStarts[cell]!]!;
}

/** Whether some interval of a cell passes a test. */
export function someInterval(plan: CellPlan, cell: number, test: (interval: number) => boolean): boolean {
  const { runStarts, runFirst, runEnd } = plan;
  const lastRun = runStarts === null ? cell : runStarts[cell + 1]! - 1;
  for (let run = runStarts === null ? cell : runStarts[cell]!; run <= lastRun; run++) {
    for (let i = runFirst[run]!; i < runEnd[run]!; i++) if (test(i)) return true;
  }
  return false;
}
