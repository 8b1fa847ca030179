import type { LoadSeries } from '../../load';
import type { CellPlan } from '../calendar/cells';
import type { MeasureDefinition, QuantityEntry, ValueDefinition } from '../model';
import { enterCell, enterInterval } from '../price/cell-block';
import { gatherActive, gatherReactive, type ClassPlan } from '../price/class-loops';
import { firstMissing } from '../price/evaluate-quantities';
import { fillCells } from '../price/fill-cells';
import { hasQuality, type PeriodGround } from '../price/interval-source';
import type { MeasurePlan, Reduction } from '../price/reduction';
import { Contest, type Setters } from './contest';
import type { BoxCorners } from './load-box';
import { anything, hull, plus, point, truthOf, type Range } from './range';
import { channelRanges, rangeFormula, rangeOf, type EvaluateRange } from './range-formula';
import {
  roundedRange,
  setRange,
  type RangeBill,
  type RangeRun,
  type RangeSource,
  type RangeState,
} from './range-state';

/** Energies of the same cells at the low and at the high corner. */
interface CellPair {
  low: CellPlan;
  high: CellPlan;
}

/** A text's gathering in a period, with the energies of both corners. */
export interface BoxReduction {
  reduction: Reduction;
  low: ClassPlan;
  high: ClassPlan;
  cells: Map<CellPlan, CellPair>;
}

/** How a cell is taken up in a run over cells: its number, day, whether it is whole and whether its condition holds. */
type VisitCell = (cell: number, piece: number, isWhole: boolean, truth: 'holds' | 'open') => void;

/** Quantities measured over all loads of a box: sums and highest values by the cells that pricing lays, their ends by the corners. */
export class BoxSource implements RangeSource {
  readonly hasIntervals = true;
  private readonly periods: Map<unknown, BoxReduction>[];
  /** Contests of highest and lowest values, by piece and place, for the values taken at their instant. */
  private readonly contests = new WeakMap<RangeState, Map<number, Contest>>();

  constructor(
    ground: readonly PeriodGround[],
    private readonly corners: BoxCorners,
  ) {
    this.periods = ground.map((period) => {
      const hasMissing = hasQuality(corners.low.quality, 2, period.first, period.end);
      return new Map([...period.reductions].map(([text, reduction]) => [text, gather(reduction, corners, hasMissing)]));
    });
  }

  printed(): undefined {
    return undefined;
  }

  measure(run: RangeRun, bill: RangeBill, state: RangeState, quantity: QuantityEntry, needs: readonly number[]): void {
    const { definition, slot, rounding } = quantity;
    const set = (range: Range): void => setRange(state, slot, roundedRange(range, rounding));
    if (definition.kind === 'value') set(this.valueAt(run, bill, state, definition));
    else if (definition.kind === 'measure') {
      const cause = firstMissing(state.point, needs);
      if (cause) state.point.missing[slot] = cause;
      else set(this.valueOf(bill, state, slot, definition));
    }
  }

  /** How the measures of a bill's piece are gathered. */
  reductionOf(bill: RangeBill, state: RangeState): BoxReduction {
    return this.periods[bill.bill.plan.index]!.get(state.point.piece.text)!;
  }

  private valueOf(bill: RangeBill, state: RangeState, slot: number, definition: MeasureDefinition): Range {
    const box = this.reductionOf(bill, state);
    const plan = box.reduction.measures.get(slot)!;
    if (plan.kind === 'sum') return setSums(state, slot, sumsOfClasses(plan, box));
    const evaluate = rangeFormula(definition.expression);
    if (plan.kind === 'cells' && definition.operation === 'sum') {
      return setSums(state, slot, this.sumsOfCells(box, plan, state, definition, evaluate));
    }
    const contest = new Contest(definition.operation === 'lowest' ? -1 : 1);
    this.contestsOf(state).set(slot, contest);
    if (plan.kind === 'peak') this.enterPeak(contest, box, plan, state);
    else {
      const { day } = plan.cells;
      this.visitCells(box, plan, state, definition, (cell, _, isWhole, truth) => {
        if (isWhole) contest.add(cell, day[cell]!, evaluate(state.values), truth === 'holds');
      });
    }
    return definition.count === 1 ? contest.best() : contest.meanOfBest(definition.count, definition.isDistinctDays);
  }

  private contestsOf(state: RangeState): Map<number, Contest> {
    let found = this.contests.get(state);
    if (!found) this.contests.set(state, (found = new Map()));
    return found;
  }

  private visitCells(
    box: BoxReduction,
    plan: MeasurePlan & { kind: 'cells' },
    state: RangeState,
    { where }: MeasureDefinition,
    visit: VisitCell,
  ): void {
    const pair = box.cells.get(plan.cells)!;
    const { count, pieceStarts } = plan.cells;
    let piece = 0;
    for (let cell = 0; cell < count; cell++) {
      while (cell >= pieceStarts[piece + 1]!) piece++;
      const standing = this.enter(pair, cell, state);
      if (standing === 0) continue;
      const truth = where ? truthOf(rangeOf(where, state.values)) : 'holds';
      if (truth !== 'fails') visit(cell, piece, standing === 2, truth);
    }
  }

  private enter(pair: CellPair, cell: number, { values }: RangeState): number {
    enterCell(pair.high, this.corners.high, cell, values.high);
    return enterCell(pair.low, this.corners.low, cell, values.low);
  }

  private sumsOfCells(
    box: BoxReduction,
    plan: MeasurePlan & { kind: 'cells' },
    state: RangeState,
    definition: MeasureDefinition,
    evaluate: EvaluateRange,
  ): Range[] {
    const pieces = plan.cells.pieceStarts.length - 1;
    const low = new Float64Array(pieces);
    const high = new Float64Array(pieces);
    this.visitCells(box, plan, state, definition, (_, piece, __, truth) => {
      const value = evaluate(state.values);
      low[piece]! += truth === 'holds' ? value.low : Math.min(0, value.low);
      high[piece]! += truth === 'holds' ? value.high : Math.max(0, value.high);
    });
    return Array.from(low, (least, piece) => ({ low: least, high: high[piece]! }));
  }

  private enterPeak(
    contest: Contest,
    { reduction }: BoxReduction,
    plan: MeasurePlan & { kind: 'peak' },
    state: RangeState,
  ): void {
    const { runFirst, runEnd, runClass } = reduction.classes;
    const { quality } = this.corners.low;
    const evaluate = channelRanges[plan.channel];
    for (let run = 0; run < runFirst.length; run++) {
      if (plan.classes[runClass[run]!] !== 1) continue;
      for (let i = runFirst[run]!; i < runEnd[run]!; i++) {
        if (quality[i] === 2) continue;
        this.enterInterval(i, state);
        contest.add(i, 0, evaluate(state.values), true);
      }
    }
  }

  private enterInterval(i: number, { values }: RangeState): void {
    enterInterval(this.corners.low, i, values.low);
    enterInterval(this.corners.high, i, values.high);
  }

  /** A channel at the instant of a highest or lowest: of every cell that may have set it. */
  private valueAt(run: RangeRun, bill: RangeBill, state: RangeState, definition: ValueDefinition): Range {
    const slot = run.run.schedule.slots.get(definition.at)!;
    const contest = this.contestsOf(state).get(slot);
    if (!contest) return point(0);
    if (firstMissing(state.point, definition.expression.slots)) return anything;
    const { cells, mayBeNone }: Setters = contest.setters();
    const { reduction, cells: pairs } = this.reductionOf(bill, state);
    const plan = reduction.measures.get(slot)!;
    const evaluate = rangeFormula(definition.expression);
    let found: Range | undefined = mayBeNone ? point(0) : undefined;
    for (const cell of cells) {
      if (plan.kind === 'cells') this.enter(pairs.get(plan.cells)!, cell, state);
      else this.enterInterval(cell, state);
      const value = evaluate(state.values);
      found = found ? hull(found, value) : value;
    }
    return found ?? point(0);
  }
}

/** Adds the energies of both corners into classes and cells; the cells' hours and gaps are the same. */
function gather(reduction: Reduction, corners: BoxCorners, hasMissing: boolean): BoxReduction {
  const rules = { hasMissing, isActiveKept: false };
  const classesAt = (load: LoadSeries): ClassPlan => {
    const { classes } = reduction;
    const own: ClassPlan = {
      ...classes,
      kwh: classes.kwh.slice(),
      kvarhLagging: classes.kvarhLagging.slice(),
      kvarhLeading: classes.kvarhLeading.slice(),
    };
    gatherActive(own, load, hasMissing);
    gatherReactive(own, load, hasMissing);
    return own;
  };
  const cellsAt = (cells: CellPlan, load: LoadSeries): CellPlan => {
    const own: CellPlan = {
      ...cells,
      kwh: cells.kwh.slice(),
      kvarhLagging: cells.kvarhLagging.slice(),
      kvarhLeading: cells.kvarhLeading.slice(),
      hours: cells.hours.slice(),
      standing: cells.standing.slice(),
      isWhole: false,
    };
    fillCells(own, load, rules);
    return own;
  };
  return {
    reduction,
    low: classesAt(corners.low),
    high: classesAt(corners.high),
    cells: new Map(
      reduction.cells.map((cells) => [cells, { low: cellsAt(cells, corners.low), high: cellsAt(cells, corners.high) }]),
    ),
  };
}

/** Sums of a channel in each piece, added up in the order in which bills add them. */
function sumsOfClasses(plan: MeasurePlan & { kind: 'sum' }, { low, high }: BoxReduction): Range[] {
  const { classCount, pieceCount } = low;
  return Array.from({ length: pieceCount }, (_, piece) => {
    let sum = point(0);
    for (let group = 0; group < classCount; group++) {
      if (plan.classes[group] !== 1) continue;
      sum = plus(sum, classSum(plan.channel, low, high, piece * classCount + group));
    }
    return sum;
  });
}

function classSum(
  channel: (MeasurePlan & { kind: 'sum' })['channel'],
  low: ClassPlan,
  high: ClassPlan,
  at: number,
): Range {
  if (channel !== 'kvarhNet') return { low: low[channel][at]!, high: high[channel][at]! };
  return {
    low: low.kvarhLagging[at]! - high.kvarhLeading[at]!,
    high: high.kvarhLagging[at]! - low.kvarhLeading[at]!,
  };
}

/** Keeps the pieces' sums, by which lines are shared, and adds them up. */
function setSums(state: RangeState, slot: number, sums: Range[]): Range {
  state.sums.set(slot, sums);
  return sums.reduce(plus, point(0));
}
