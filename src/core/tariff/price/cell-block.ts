import { firstIntervalOf, type CellPlan } from '../calendar/cells';
import { place } from '../formula/compile';
import type { LoadSeries } from '../../load';

const { cellKwh, cellKvarhLagging, cellKvarhLeading, cellHours } = place;

/** Single intervals worked on at a time. */
const chunk = 512;

/**
 * Cells that formulas are worked out for together, and room for the steps of these formulas.
 *
 * Cells of several intervals are read where their plan keeps them; single intervals are copied side by side, some hundred at a time.
 */
export class CellBlock {
  /** Cells at work; the first one's number in its plan. */
  count = 0;
  from = 0;
  /** Rises with every block entered. */
  serial = 0;
  kwh: Float64Array;
  kvarhLagging: Float64Array;
  kvarhLeading: Float64Array;
  hours: Float64Array;
  /** Hours of every cell; NaN where they differ. */
  evenHours = NaN;
  /** 0: nothing of the cell was metered, or it does not count; 1: something is missing of it; 2: it is whole. uint8[count or more] */
  standing: Uint8Array;
  /** Rooms for the results of steps. float64[size] each */
  readonly rooms: Float64Array[] = [];

  private size = chunk;
  private readonly single = {
    kwh: new Float64Array(chunk),
    kvarhLagging: new Float64Array(chunk),
    kvarhLeading: new Float64Array(chunk),
    hours: new Float64Array(chunk),
  };
  private ownStanding = new Uint8Array(chunk);

  constructor() {
    ({
      kwh: this.kwh,
      kvarhLagging: this.kvarhLagging,
      kvarhLeading: this.kvarhLeading,
      hours: this.hours,
    } = this.single);
    this.standing = this.ownStanding;
  }

  /** Makes one more room; returns its number. */
  addRoom(): number {
    return this.rooms.push(new Float64Array(this.size)) - 1;
  }

  /** Makes all rooms wide enough for a plan's cells. */
  reserve(plan: CellPlan): void {
    if (plan.isSingle || plan.count <= this.size) return;
    this.size = plan.count;
    this.ownStanding = new Uint8Array(this.size);
    for (let i = 0; i < this.rooms.length; i++) this.rooms[i] = new Float64Array(this.size);
  }

  /** Enters a plan's cells from a number on, as many as there is room for. */
  enter(plan: CellPlan, load: LoadSeries, from: number): void {
    this.serial++;
    this.from = from;
    if (plan.isSingle) {
      this.enterSingle(plan, load);
      return;
    }
    this.count = plan.count;
    ({ kwh: this.kwh, kvarhLagging: this.kvarhLagging, kvarhLeading: this.kvarhLeading, hours: this.hours } = plan);
    this.evenHours = plan.evenHours;
    this.standing = plan.standing;
  }

  private enterSingle(
    { count: all, runFirst }: CellPlan,
    { kwh, kvarhLagging, kvarhLeading, quality, stepMinutes }: LoadSeries,
  ): void {
    const { single, ownStanding, from } = this;
    const count = Math.min(chunk, all - from);
    for (let k = 0; k < count; k++) {
      const i = runFirst[from + k]!;
      single.kwh[k] = kwh[i]!;
      single.kvarhLagging[k] = kvarhLagging[i]!;
      single.kvarhLeading[k] = kvarhLeading[i]!;
      ownStanding[k] = quality[i] === 2 ? 0 : 2;
    }
    single.hours.fill(stepMinutes / 60, 0, count);
    this.count = count;
    this.evenHours = stepMinutes / 60;
    ({ kwh: this.kwh, kvarhLagging: this.kvarhLagging, kvarhLeading: this.kvarhLeading, hours: this.hours } = single);
    this.standing = ownStanding;
  }

  /** Lets cells whose condition is 0 not count. */
  keepWhere(condition: Float64Array): void {
    const { standing } = this;
    const kept = this.takeStanding();
    for (let k = 0; k < this.count; k++) kept[k] = condition[k] === 0 ? 0 : standing[k]!;
  }

  /** A standing of the block's own, to be set anew: that of the plan must stay. */
  takeStanding(): Uint8Array {
    this.standing = this.ownStanding;
    return this.ownStanding;
  }
}

/**
 * Puts a cell's energies where formulas read them.
 *
 * @returns 0 if the cell holds nothing that was metered, 1 if something is missing of it, 2 if it is whole
 */
export function enterCell(plan: CellPlan, load: LoadSeries, cell: number, values: Float64Array): number {
  if (!plan.isSingle) {
    values[cellKwh] = plan.kwh[cell]!;
    values[cellKvarhLagging] = plan.kvarhLagging[cell]!;
    values[cellKvarhLeading] = plan.kvarhLeading[cell]!;
    values[cellHours] = plan.hours[cell]!;
    return plan.standing[cell]!;
  }
  const i = firstIntervalOf(plan, cell);
  if (load.quality[i] === 2) return 0;
  enterInterval(load, i, values);
  return 2;
}

/** Puts one interval's energies where formulas read them. */
export function enterInterval(load: LoadSeries, i: number, values: Float64Array): void {
  values[cellKwh] = load.kwh[i]!;
  values[cellKvarhLagging] = load.kvarhLagging[i]!;
  values[cellKvarhLeading] = load.kvarhLeading[i]!;
  values[cellHours] = load.stepMinutes / 60;
}
