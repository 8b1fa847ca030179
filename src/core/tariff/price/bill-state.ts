import { place } from '../formula/compile';
import type { Schedule } from '../model';
import type { PeriodPlan, Piece } from './period-plan';

/** Why a value is not known. */
export interface Missing {
  name: string;
  kind: 'printed' | 'given' | 'month' | 'contract' | 'unclear';
  detail: string;
}

/** Values under one piece's text. Arrays are by place of the name, see `Schedule.slots`. */
export interface PieceState {
  piece: Piece;
  index: number;
  values: Float64Array;
  known: Uint8Array;
  /** Beginning of the cell that set a highest or lowest [ms], NaN where none. */
  atMs: Float64Array;
  /** Number of that cell among its kind. */
  atCell: Int32Array;
  /** Sums of a measure in each piece of the period: place x pieces + piece. */
  sums: Float64Array;
  missing: (Missing | undefined)[];
  /** Runs at unity from printed figures only: values with three different numbers for every active quantity nobody knows. */
  samples?: Float64Array[];
}

/** A bill being worked out. */
export interface BillState {
  plan: PeriodPlan;
  pieces: PieceState[];
  /** Rounded amounts by line, and their parts: line x pieces + piece. */
  amounts: Float64Array;
  parts: Float64Array;
  /** Places whose value the bill prints. */
  printed: Uint8Array;
  total: number;
  /** Notes in words; null where nobody reads them. */
  notes: Set<string> | null;
}

/** Number of values formulas read. */
export function sizeOf(schedule: Schedule): number {
  return place.names + schedule.slots.size;
}

/** Makes the arrays of a bill. */
export function createBill(schedule: Schedule, plan: PeriodPlan, wantsNotes: boolean): BillState {
  const size = sizeOf(schedule);
  const count = plan.pieces.length;
  const lines = schedule.lineOrder.length;
  return {
    plan,
    pieces: plan.pieces.map((piece, index) => ({
      piece,
      index,
      values: new Float64Array(size),
      known: new Uint8Array(size),
      atMs: new Float64Array(size).fill(NaN),
      atCell: new Int32Array(size).fill(-1),
      sums: new Float64Array(size * count),
      missing: [],
    })),
    amounts: new Float64Array(lines),
    parts: new Float64Array(lines * count),
    printed: new Uint8Array(size),
    total: 0,
    notes: wantsNotes ? new Set() : null,
  };
}
