import type { LoadSeries } from '../load';
import type { FieldControl } from '../machine';
import { movedBills } from './bill-reach';
import type { BillReach } from './bill-reach';
import { searchAxes } from './search-axes';
import type { SearchAxis, SearchMotor } from './search-axes';
import { createCandidates } from './search-candidates';
import type { Candidates, SearchedBank } from './search-candidates';
import { partsOf, searchParts } from './search-parts';
import type { PartCost, SearchPart, SearchProgress, SearchTable } from './search-parts';
import { cheapestPath, exchangesOf, ladderOf, stepLadder } from './search-paths';
import type { At, WalkGround } from './search-walk';
import type { FixedSetup } from './simulator';
import type { Plant, Spans } from './types';

/** What a search is made over. */
export interface SearchInput {
  /** Load, motors with what is searched at them, and what lies between meter and bus. */
  plant: Plant & { motors: SearchMotor[] };
  /** Spans with settings of their own; banks and replacements that every candidate but standing has. */
  fixed?: FixedSetup;
  /** A bank whose number of steps is searched too, none included. */
  bank?: SearchedBank;
  /**
   * Bill totals of a load series, period by period. `changed`: positions of the only bills whose intervals may differ from the
   * previous call; absent: any may. [currency]
   */
  totals: (load: LoadSeries, changed?: ReadonlySet<number>) => Float64Array;
  /** Which bills the settings of each span move. Absent: every setting may move every bill. */
  bills?: BillReach;
  /** Called after every candidate; returning false ends the search with the best so far. */
  onProgress?: (progress: SearchProgress) => boolean | void;
  /** Price every combination when there are no more than this; 2000 when absent. */
  exhaustiveUpTo?: number;
}

/** One point of the cost along an axis, the others at their best. */
export interface CostPoint {
  control: FieldControl;
  cost: number;
  /** It keeps every limit. */
  admissible: boolean;
}

/** What was searched on one axis. */
export interface SearchedAxis extends SearchAxis {
  /** Place of the best among the settings. */
  place: number;
  chosen: FieldControl;
  /** Cost of the year along the axis; empty when cancelled. */
  curve: CostPoint[];
}

export interface SearchResult {
  /** Best controls per motor, one a span or one for all; the standing field where leaving it alone is best. */
  controls: FieldControl[][];
  /** Steps of the searched bank; 0 without one. */
  bankSteps: number;
  /** Bills of the year at the best, the searched bank's own yearly cost beside them. [currency] */
  cost: number;
  bankCost: number;
  standingCost: number;
  /** Bill totals, period by period, at the best setting and standing. */
  totals: Float64Array;
  standingTotals: Float64Array;
  /** True when nothing is cheaper than leaving all as it stands. */
  leaveAlone: boolean;
  axes: SearchedAxis[];
  /** Cost by number of steps of the searched bank, the motors at their best settings with the chosen number. */
  bankCurve: { steps: number; cost: number }[];
  priced: number;
  /** Every combination of settings was priced: the result is the best there is at these steps. */
  exhaustive: boolean;
  cancelled: boolean;
  notes: string[];
}

/** Differences of cost below this are none. [currency] */
const SAME_COST = 0.005;

/** Settings of equal cost whose losses are compared, at most. */
const MOST_TIES = 500;

/**
 * Finds the settings that make the year's bills least, over what an operator can set in each span of the year.
 *
 * No slope of the cost is used (see `walk`). Spans whose bills are apart are searched side by side; so each year priced answers for
 * all of them, exactly. The same input gives the same result. Settings keep every limit at every load a motor runs at; leaving all
 * alone is a candidate and wins a tie; of other settings of one cost those with the fewest moves, of these the one that loses least.
 *
 * @returns Best setting with its cost, cost curves, bounds and notes.
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when a standing field does not hold its load
 */
export function searchSettings(input: SearchInput): SearchResult {
  const { plant, fixed = {}, bank, onProgress, exhaustiveUpTo = 2000 } = input;
  const spans = fixed.spans?.count ?? 1;
  const { axes, notes } = searchAxes(plant.motors, spans);
  const candidates = createCandidates({ ...input, fixed, axes, spans });
  const { lengths, standing } = candidates;
  const bills = candidates.standingTotals.length + (bank ? 1 : 0);
  const parts = partsOf(reachOf(input, axes, bills, lengths.length), bills);
  const grounds = parts.map((part) =>
    groundOf(part, { axes, lengths, standing, motors: plant.motors, spans: fixed.spans, bank, exhaustiveUpTo }),
  );
  const table = searchParts({ parts, grounds, standing, price: candidates.price, onProgress });
  const winner = pickWinner(table, candidates, axes);
  const totals = candidates.price(winner).slice(0, candidates.standingTotals.length);
  const bankCost = candidates.bankCost(winner);
  const curveOf = (axis: number) => (table.cancelled ? [] : costsAlong(candidates, table, winner, axis));
  return {
    controls: candidates.controlsOf(winner),
    bankSteps: candidates.stepsOf(winner),
    cost: sum(totals) + bankCost,
    bankCost,
    standingCost: sum(candidates.standingTotals),
    totals,
    standingTotals: candidates.standingTotals,
    leaveAlone: winner.every((k, axis) => k === standing[axis]),
    axes: axes.map((axis, a) => ({
      ...axis,
      place: winner[a]!,
      chosen: axis.settings[winner[a]!]!,
      curve: curveOf(a).map((cost, k) => ({
        control: axis.settings[k]!,
        cost,
        admissible: k !== axis.standing || axis.standingAdmissible,
      })),
    })),
    bankCurve: bank ? curveOf(axes.length).map((cost, steps) => ({ steps, cost })) : [],
    priced: table.priced,
    exhaustive: table.parts.every(({ exhaustive }) => exhaustive),
    cancelled: table.cancelled,
    notes: [...notes, ...candidates.notes],
  };
}

/** Bills that each axis may move; a searched bank moves all, its own cost the last. */
function reachOf(input: SearchInput, axes: SearchAxis[], bills: number, count: number): number[][] {
  const all = Array.from({ length: bills }, (_, bill) => bill);
  const billsOfSpan = input.bills && movedBills(input.bills, input.bank ? bills - 1 : bills);
  return Array.from({ length: count }, (_, a) => {
    const axis = axes[a];
    return axis ? (billsOfSpan?.[axis.span] ?? all) : all;
  });
}

interface GroundInput {
  axes: SearchAxis[];
  lengths: number[];
  standing: At;
  motors: readonly SearchMotor[];
  spans?: Spans;
  bank?: SearchedBank;
  exhaustiveUpTo: number;
}

function groundOf({ axes: own }: SearchPart, all: GroundInput): WalkGround {
  const { axes, lengths, standing, motors, spans, bank, exhaustiveUpTo } = all;
  const rungs = own.map((axis, k) => {
    const known = axes[axis];
    const ladder = known
      ? ladderOf(known, motors, spans)
      : stepLadder(bank!.mostSteps, bank!.stepKvar, bank!.lossWPerKvar);
    return { axis: k, ladder, span: known?.span ?? null };
  });
  // The bank stands in every span: it is a path of its own and can take over from any motor.
  const groups = [...new Set(rungs.map(({ span }) => span))].map((span) => rungs.filter((one) => one.span === span));
  const banks = rungs.filter(({ span }) => span === null);
  const exchanges = groups.flatMap((group) => exchangesOf(group[0]!.span === null ? group : [...group, ...banks]));
  return {
    lengths: own.map((axis) => lengths[axis]!),
    standing: own.map((axis) => standing[axis]!),
    paths: groups.map((group) => ({
      axes: group.map(({ axis }) => axis),
      points: cheapestPath(group.map(({ ladder }) => ladder)),
    })),
    exchanges,
    exhaustiveUpTo,
  };
}

/** The cheapest admissible setting; within half a cent the fewest settings moved win, then what loses least energy. */
function pickWinner(table: SearchTable, candidates: Candidates, axes: SearchAxis[]): At {
  const winner = [...candidates.standing];
  const isAdmissible = (own: At, part: SearchPart) =>
    own.every((k, p) => {
      const axis = axes[part.axes[p]!];
      return !axis || k !== axis.standing || axis.standingAdmissible;
    });
  for (const { part, priced } of table.parts) {
    const admissible = priced.filter(({ at }) => isAdmissible(at, part));
    if (admissible.length === 0) continue;
    const least = admissible.reduce((cost, one) => Math.min(cost, one.cost), Infinity);
    const ties = admissible.filter(({ cost }) => cost <= least + SAME_COST);
    const moves = ({ at }: PartCost) => at.filter((k, p) => k !== candidates.standing[part.axes[p]!]).length;
    const fewest = Math.min(...ties.map(moves));
    const settled = (own: At) => {
      const all = [...winner];
      part.axes.forEach((axis, p) => (all[axis] = own[p]!));
      return all;
    };
    const few = ties.filter((one) => moves(one) === fewest).slice(0, MOST_TIES);
    const chosen = leastLoss(few, (own) => candidates.energyKwh(settled(own)));
    part.axes.forEach((axis, p) => (winner[axis] = chosen[p]!));
  }
  return winner;
}

function leastLoss(ties: PartCost[], energyKwh: (at: At) => number): At {
  if (ties.length === 1) return ties[0]!.at;
  const energies = ties.map(({ at }) => energyKwh(at));
  return ties[energies.indexOf(Math.min(...energies))]!.at;
}

/** Cost of the year with one axis at each of its settings, the others at the winner's. */
function costsAlong(candidates: Candidates, table: SearchTable, winner: At, axis: number): number[] {
  const own = table.parts.find(({ part }) => part.axes.includes(axis))!;
  const place = own.part.axes.indexOf(axis);
  const known = new Map(own.priced.map(({ at, cost }) => [at.join(), cost]));
  const mine = own.part.axes.map((one) => winner[one]!);
  const winnerTotals = candidates.price(winner);
  const others = sum(winnerTotals) - own.part.bills.reduce((total, bill) => total + winnerTotals[bill]!, 0);
  return Array.from({ length: candidates.lengths[axis]! }, (_, k) => {
    const found = known.get(mine.map((at, p) => (p === place ? k : at)).join());
    if (found !== undefined) return found + others;
    return sum(candidates.price(winner.map((at, a) => (a === axis ? k : at))));
  });
}

function sum(values: Float64Array): number {
  return values.reduce((total, value) => total + value, 0);
}
