import { enterCell, enterInterval } from './cell-block';
import { extremeCell, extremeCells, sumCells } from './cell-loops';
import { gatherActive, gatherApparent, gatherReactive, type ClassPlan } from './class-loops';
import { firstIntervalOf, type CellGround } from '../calendar/cells';
import { layPeriod } from '../calendar/period-calendar';
import { intervalStartMs, type LoadSeries } from '../../load';
import { channelOf, type ChannelName } from '../channels';
import { isSame } from '../formula/functions';
import { PriceError } from '../errors';
import type { MeasureDefinition, QuantityEntry, Schedule, ValueDefinition } from '../model';
import type { PricingGrid } from '../types';
import type { BillState, PieceState } from './bill-state';
import { firstMissing } from './evaluate-quantities';
import { fillCells } from './fill-cells';
import { wordPeriod, type PeriodPlan } from './period-plan';
import { CellFormulas, planReduction, type MeasurePlan, type Reduction } from './reduction';
import { evaluateIn, setRounded, type QuantitySource, type Run } from './run';
import type { TextPlan } from './text-plan';

/** One period over the grid: its intervals and the gathering of each text that holds in it. */
export interface PeriodGround {
  /** Intervals of the period, inside the series or not. */
  count: number;
  reductions: ReadonlyMap<TextPlan, Reduction>;
  /** Intervals of the period inside the series: first and behind the last. */
  first: number;
  end: number;
}

/** Lays the grid over every period. */
export function layGround(schedule: Schedule, plans: PeriodPlan[], grid: PricingGrid): PeriodGround[] {
  const formulas = new CellFormulas();
  return plans.map((plan) => {
    const calendar = layPeriod(grid, plan, schedule.timeZone);
    const pieceEnds: number[] = [];
    let days = 0;
    for (const piece of plan.pieces) {
      days += piece.days;
      let end = pieceEnds[pieceEnds.length - 1] ?? 0;
      while (end < calendar.count && calendar.day[end]! < days) end++;
      pieceEnds.push(end);
    }
    const ground: CellGround = { calendar, stepMinutes: grid.stepMinutes, seriesCount: grid.count, pieceEnds };
    const texts = [...new Set(plan.pieces.map((piece) => piece.text))];
    const first = Math.min(grid.count, Math.max(0, calendar.first));
    const end = Math.max(first, Math.min(grid.count, calendar.first + calendar.count));
    if (end === first)
      throw new PriceError(
        `${wordPeriod(plan.period)}: the series has no interval of this period. Leave the period out, or add its readings.`,
        { period: plan.period },
      );
    return {
      count: calendar.count,
      reductions: new Map(texts.map((text) => [text, planReduction({ text, plan, ground, grid, formulas })])),
      first,
      end,
    };
  });
}

/** Quantities measured over a series' intervals. */
export class IntervalSource implements QuantitySource {
  readonly hasIntervals = true;

  constructor(
    private readonly periods: readonly PeriodGround[],
    readonly load: LoadSeries,
    /** Periods whose intervals may differ from what was gathered last; absent: any may. */
    private readonly changed?: ReadonlySet<number>,
  ) {}

  /** Gathers everything over the intervals; the arrays of the ground are filled anew. */
  gather(isActiveKept: boolean): void {
    for (const [index, { reductions, first, end }] of this.periods.entries()) {
      if (this.changed && !this.changed.has(index)) continue;
      const hasMissing = hasQuality(this.load.quality, 2, first, end);
      for (const { classes, cells } of reductions.values()) {
        if (!isActiveKept && (classes.needs.kwh || classes.needs.kwPeak)) gatherActive(classes, this.load, hasMissing);
        if (classes.needs.reactive) gatherReactive(classes, this.load, hasMissing);
        if (classes.needs.kvaPeak) gatherApparent(classes, this.load, hasMissing);
        for (const plan of cells) fillCells(plan, this.load, { hasMissing, isActiveKept });
      }
    }
  }

  printed(): undefined {
    return undefined;
  }

  measure(run: Run, bill: BillState, state: PieceState, quantity: QuantityEntry, needs: readonly number[]): void {
    const { definition, slot } = quantity;
    if (this.changed && !this.changed.has(bill.plan.index) && state.piece.text.steady.has(slot)) {
      state.known[slot] = 1;
      return;
    }
    state.atMs[slot] = NaN;
    state.atCell[slot] = -1;
    if (definition.kind === 'value') setRounded(run, bill, state, quantity, this.valueAt(run, bill, state, definition));
    else if (definition.kind === 'measure') {
      const cause = firstMissing(state, needs);
      if (cause) state.missing[slot] = cause;
      else {
        setRounded(run, bill, state, quantity, this.valueOf(run, bill, state, slot, definition));
        if (!run.isUnity && definition.operation !== 'sum' && state.atCell[slot]! < 0) {
          bill.notes?.add(`"${quantity.name}" is 0: no cell of the period is whole and meets its condition.`);
        }
      }
    }
  }

  /** How a measure is gathered in a bill's period. */
  planOf(bill: BillState, state: PieceState, slot: number): { plan: MeasurePlan; reduction: Reduction } {
    const reduction = this.periods[bill.plan.index]!.reductions.get(state.piece.text)!;
    return { plan: reduction.measures.get(slot)!, reduction };
  }

  private valueOf(run: Run, bill: BillState, state: PieceState, slot: number, definition: MeasureDefinition): number {
    const { plan, reduction } = this.planOf(bill, state, slot);
    run.at = definition.expression;
    if (plan.kind === 'sum') return sumClasses(plan, reduction.classes, state, slot);
    if (plan.kind === 'peak') return this.peak(plan, reduction.classes, state, slot);
    const { cells, formula } = plan;
    if (definition.operation === 'sum') {
      const { sums } = state;
      return sumCells(cells, this.load, formula, state.values, { sums, at: slot * bill.pieces.length });
    }
    if (definition.count === 1) {
      const sign = definition.operation === 'highest' ? 1 : -1;
      const { value, cell } = extremeCell(cells, this.load, formula, state.values, sign);
      this.setInstant(state, slot, plan, cell);
      return value;
    }
    const best = extremeCells(cells, this.load, formula, state.values);
    this.setInstant(state, slot, plan, best[0]?.cell ?? -1);
    return best.length === 0 ? 0 : best.reduce((sum, { value }) => sum + value, 0) / best.length;
  }

  private peak(plan: MeasurePlan & { kind: 'peak' }, classes: ClassPlan, state: PieceState, slot: number): number {
    const isKva = plan.channel === 'kva';
    const highest = isKva ? classes.highestSquare : classes.highestKwh;
    const places = isKva ? classes.highestSquareAt : classes.highestKwhAt;
    let best = -Infinity;
    let at = -1;
    for (let group = 0; group < classes.classCount; group++) {
      const place = places[group]!;
      if (plan.classes[group] !== 1 || place < 0) continue;
      const energy = highest[group]!;
      if (at < 0 || (isSame(energy, best) ? place < at : energy > best)) {
        best = energy;
        at = place;
      }
    }
    this.setInstant(state, slot, plan, at);
    if (at < 0) return 0;
    return (isKva ? Math.sqrt(best) : best) / (this.load.stepMinutes / 60);
  }

  private setInstant(state: PieceState, slot: number, plan: MeasurePlan, cell: number): void {
    state.atCell[slot] = cell;
    if (cell < 0) return;
    const interval = plan.kind === 'cells' ? firstIntervalOf(plan.cells, cell) : cell;
    state.atMs[slot] = intervalStartMs(this.load, interval);
  }

  private valueAt(run: Run, bill: BillState, state: PieceState, definition: ValueDefinition): number {
    const slot = run.schedule.slots.get(definition.at)!;
    if (!this.enterCellOf(bill, state, slot)) return 0;
    return evaluateIn(run, state, definition.expression);
  }

  /** Puts the cell that set a highest or lowest where formulas read it; false if there is none. */
  enterCellOf(bill: BillState, state: PieceState, slot: number): boolean {
    const cell = state.atCell[slot]!;
    if (cell < 0) return false;
    const { plan } = this.planOf(bill, state, slot);
    if (plan.kind === 'cells') enterCell(plan.cells, this.load, cell, state.values);
    else enterInterval(this.load, cell, state.values);
    return true;
  }
}

function sumClasses(plan: MeasurePlan & { kind: 'sum' }, classes: ClassPlan, state: PieceState, slot: number): number {
  const { classCount, pieceCount } = classes;
  let whole = 0;
  for (let piece = 0; piece < pieceCount; piece++) {
    let sum = 0;
    for (let group = 0; group < classCount; group++) {
      if (plan.classes[group] !== 1) continue;
      const place = piece * classCount + group;
      if (plan.channel === 'kwh') sum += classes.kwh[place]!;
      else if (plan.channel === 'kvarhLagging') sum += classes.kvarhLagging[place]!;
      else if (plan.channel === 'kvarhLeading') sum += classes.kvarhLeading[place]!;
      else sum += classes.kvarhLagging[place]! - classes.kvarhLeading[place]!;
    }
    state.sums[slot * pieceCount + piece] = sum;
    whole += sum;
  }
  return whole;
}

/** Whether a quality occurs among some intervals. */
export function hasQuality(quality: Uint8Array, wanted: number, first: number, end: number): boolean {
  return quality.subarray(first, end).includes(wanted);
}

/**
 * The series with channels it does not carry set aside: a leading register that is not carried counts as 0 in net and apparent values.
 *
 * @throws {PriceError} if a quantity measures a channel that the series does not carry
 */
export function withCarriedChannels(schedule: Schedule, load: LoadSeries): { load: LoadSeries; note?: string } {
  const isAbsent = (values: Float64Array): boolean => {
    const first = load.quality.findIndex((quality) => quality !== 2);
    return first >= 0 && Number.isNaN(values[first]!) && values.every((value) => Number.isNaN(value));
  };
  const absent = {
    kwh: isAbsent(load.kwh),
    lagging: isAbsent(load.kvarhLagging),
    leading: isAbsent(load.kvarhLeading),
  };
  const used = channelsUsed(schedule);
  for (const [name, channels] of used) {
    for (const channel of channels) {
      const { isActive, usesLagging, usesLeading } = channelOf(channel);
      if (isActive && absent.kwh) throw absentError('kwh', name);
      if (usesLagging && absent.lagging) throw absentError('kvarhLagging', name);
      if (usesLeading && !usesLagging && absent.leading) throw absentError('kvarhLeading', name);
    }
  }
  if (!absent.leading || absent.lagging) return { load };
  const isNetUsed = [...used.values()].some((channels) => channels.some((channel) => channelOf(channel).usesLeading));
  const note = isNetUsed
    ? 'The series does not carry leading kvarh: net and apparent values count it as 0.'
    : undefined;
  return { load: { ...load, kvarhLeading: new Float64Array(load.kwh.length) }, note };
}

function absentError(channel: string, name: string): PriceError {
  return new PriceError(
    `The series does not carry ${channel}, which "${name}" measures. Bring in a file that has it, or price from the bills' figures.`,
    { name: channel },
  );
}

function channelsUsed(schedule: Schedule): Map<string, ChannelName[]> {
  const used = new Map<string, ChannelName[]>();
  for (const { quantities } of schedule.texts) {
    for (const { name, definition } of quantities) {
      if (definition.kind === 'measure')
        used.set(name, [...definition.expression.channels, ...(definition.where?.channels ?? [])]);
      else if (definition.kind === 'value') used.set(name, definition.expression.channels);
    }
  }
  return used;
}
