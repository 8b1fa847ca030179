import { PriceError } from '../errors';
import type { CellKind, DemandWindow } from '../model';
import type { PeriodCalendar } from './period-calendar';

/** Cells of one kind, in one window, in one period, with room for their energies. Nothing is made anew while pricing. */
export interface CellPlan {
  /** Borders in `members`: cell c holds members starts[c] to ends[c] - 1. int32[cells] */
  starts: Int32Array;
  ends: Int32Array;
  /** Numbers of the intervals held, cell by cell; null: `base` + position. */
  members: Int32Array | null;
  base: number;
  /** Every cell is one interval: the series itself holds their energies. */
  isSingle: boolean;
  /** Whether some measure reads the cells' reactive energy. */
  needsReactive: boolean;
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
  /** 1: an interval of the cell is missing. uint8[cells] */
  isBad: Uint8Array;
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

interface Draft {
  from: number;
  to: number;
}

/**
 * Lays out cells.
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
  const { stepMinutes } = ground;
  const isLong =
    demandWindow !== undefined &&
    (stepMinutes < demandWindow.minutes || demandWindow.everyMinutes !== undefined) &&
    stepMinutes <= demandWindow.minutes;
  const isDemand = kind === 'demand window' && isLong;
  if (isDemand)
    return finishCells(demandCells(ground, demandWindow), ground, inside, (draft) => isWhole(draft, inside));
  if (kind === 'interval' || kind === 'demand window')
    return finishCells(blocks(ground, 0), ground, inside, () => true);
  return finishCells(blocks(ground, kind === 'hour' ? 60 : 1440), ground, inside, () => true);
}

function isWhole({ from, to }: Draft, inside: Uint8Array | null): boolean {
  if (inside) for (let position = from; position < to; position++) if (inside[position] !== 1) return false;
  return true;
}

/** Runs of positions with the same block of the local clock; length 0 makes every position its own. */
function blocks({ calendar }: CellGround, minutes: number): Draft[] {
  const { count, day, clock, turn } = calendar;
  const drafts: Draft[] = [];
  let from = 0;
  const blockOf = (position: number): number => (minutes === 0 ? position : Math.floor(clock[position]! / minutes));
  for (let position = 1; position <= count; position++) {
    const isSame =
      position < count &&
      blockOf(position) === blockOf(from) &&
      day[position] === day[from] &&
      (minutes === 1440 || turn[position] === turn[from]);
    if (isSame) continue;
    drafts.push({ from, to: position });
    from = position;
  }
  return drafts;
}

function demandCells(ground: CellGround, { minutes, everyMinutes }: DemandWindow): Draft[] {
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
  if (everyMinutes === undefined) return blocks(ground, minutes).filter(({ from, to }) => to - from === size);
  const drafts: Draft[] = [];
  for (let from = 0; from + size <= calendar.count; from++) {
    if (calendar.clock[from]! % everyMinutes < stepMinutes) drafts.push({ from, to: from + size });
  }
  return drafts;
}

function finishCells(
  drafts: Draft[],
  ground: CellGround,
  inside: Uint8Array | null,
  isKept: (draft: Draft) => boolean,
): CellPlan {
  const { calendar, seriesCount, pieceEnds } = ground;
  const members: number[] = [];
  const starts: number[] = [];
  const ends: number[] = [];
  const broken: number[] = [];
  const days: number[] = [];
  const pieceStarts = [0];
  for (const draft of drafts) {
    if (!isKept(draft)) continue;
    const start = members.length;
    let isBroken = false;
    let isHeld = false;
    for (let position = draft.from; position < draft.to; position++) {
      if (inside && inside[position] !== 1) continue;
      isHeld = true;
      const interval = calendar.first + position;
      if (interval >= 0 && interval < seriesCount) members.push(interval);
      else isBroken = true;
    }
    if (!isHeld) continue;
    while (draft.from >= pieceEnds[pieceStarts.length - 1]!) pieceStarts.push(starts.length);
    starts.push(start);
    ends.push(members.length);
    broken.push(isBroken ? 1 : 0);
    days.push(calendar.day[draft.from]!);
  }
  while (pieceStarts.length <= pieceEnds.length) pieceStarts.push(starts.length);
  return withRoom({ starts, ends, members, broken, days, pieceStarts });
}

function withRoom(cells: {
  starts: number[];
  ends: number[];
  members: number[];
  broken: number[];
  days: number[];
  pieceStarts: number[];
}): CellPlan {
  const { starts, ends, members } = cells;
  const base = members[0] ?? 0;
  const isContiguous = members.every((member, i) => member === base + i);
  const isSingle = starts.every((start, c) => start === c && ends[c] === c + 1);
  const room = isSingle ? 0 : starts.length;
  return {
    starts: Int32Array.from(starts),
    ends: Int32Array.from(ends),
    members: isContiguous ? null : Int32Array.from(members),
    base,
    isSingle,
    needsReactive: false,
    broken: Uint8Array.from(cells.broken),
    day: Int32Array.from(cells.days),
    pieceStarts: Int32Array.from(cells.pieceStarts),
    kwh: new Float64Array(room),
    kvarhLagging: new Float64Array(room),
    kvarhLeading: new Float64Array(room),
    hours: new Float64Array(room),
    isBad: new Uint8Array(room),
  };
}
