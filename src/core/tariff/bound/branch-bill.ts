import type { QuantityEntry } from '../model';
import type { ClassPlan } from '../price/class-loops';
import type { MeasurePlan } from '../price/reduction';
import type { BoxReduction } from './box-source';
import type { LossEnvelope } from './coupling';
import { loosened, plus, point, type Range } from './range';
import { rangeCharges } from './range-charges';
import { rangeQuantities } from './range-quantities';
import {
  roundedRange,
  setRange,
  type RangeBill,
  type RangeRun,
  type RangeSource,
  type RangeState,
} from './range-state';

/** Loads of a bill whose net reactive energy lies, class by class, within ends. */
interface Branch {
  net: Range[];
  low: number;
}

/** Bills worked out anew for one bill; and those after which parts that raise nothing are given up. */
const evaluations = 160;
const patience = 40;

/**
 * Raises the low end of a bill by what delivering costs: its loads are parted by the net reactive energy of each class of intervals, and in each
 * part active energy is at least what delivering so much costs. The least of the parts is the low end; the part that has it is parted
 * again, until a number of parts is reached. Every load lies in some part, so that the end holds at any time.
 *
 * The bill keeps its ranges but for the total: later bills look back on every load.
 */
export function branchBill(run: RangeRun, bill: RangeBill, box: BoxReduction, envelopes: LossEnvelope[]): void {
  const [state] = bill.states;
  if (!state || bill.states.length > 1) return;
  const kept = keep(bill, state);
  const source = new BranchSource(run.source, box, envelopes, kept);
  const price = (net: Range[]): Branch => {
    source.net = net;
    const branchRun = { ...run, source };
    rangeQuantities(branchRun, bill, state);
    rangeCharges(branchRun, bill);
    return { net, low: Math.max(kept.total.low, bill.total.low) };
  };
  const branches = [price(envelopes.map((_, group) => netOf(box, group)))];
  for (let count = 1; count < evaluations; count += 2) {
    const at = branches.reduce((least, branch, i) => (branch.low < branches[least]!.low ? i : least), 0);
    const parted = partOf(branches[at]!, envelopes);
    if (!parted || (count > patience && branches[at]!.low <= kept.total.low)) break;
    branches.splice(at, 1, ...parted.map(price));
  }
  restore(bill, state, kept);
  const low = Math.min(...branches.map((branch) => branch.low));
  bill.total = { low: Math.max(kept.total.low, Math.min(low, kept.total.high)), high: kept.total.high };
}

/** Net reactive energy of a class of intervals over the whole box. */
function netOf({ low, high }: BoxReduction, group: number): Range {
  return loosened({
    low: low.kvarhLagging[group]! - high.kvarhLeading[group]!,
    high: high.kvarhLagging[group]! - low.kvarhLeading[group]!,
  });
}

/** Parts a branch in the class whose losses differ most between its ends; nothing where they hardly differ. */
function partOf({ net }: Branch, envelopes: LossEnvelope[]): [Range[], Range[]] | null {
  let widest = -1;
  let most = 1e-6;
  net.forEach(({ low, high }, group) => {
    const width = envelopes[group]!.leastKwh(low) - envelopes[group]!.leastKwh(high);
    if (width > most) [widest, most] = [group, width];
  });
  const range = net[widest];
  if (!range) return null;
  const middle = (range.low + Math.min(range.high, envelopes[widest]!.leastLossKvarh)) / 2;
  const withPart = (part: Range): Range[] => net.map((own, group) => (group === widest ? part : own));
  return [withPart({ low: range.low, high: middle }), withPart({ low: middle, high: range.high })];
}

/** What a bill comes to over the whole box. */
interface Kept {
  low: Float64Array;
  high: Float64Array;
  known: Uint8Array;
  missing: RangeState['point']['missing'];
  amounts: RangeBill['amounts'];
  parts: Range[][];
  blocks: RangeBill['blocks'];
  sums: Map<number, Range[]>;
  total: Range;
}

function keep(
  { amounts, parts, blocks, total }: RangeBill,
  { values, point: { known, missing }, sums }: RangeState,
): Kept {
  return {
    low: values.low.slice(),
    high: values.high.slice(),
    known: known.slice(),
    missing: missing.slice(),
    amounts: amounts.slice(),
    parts: parts.slice(),
    blocks,
    sums: new Map(sums),
    total,
  };
}

function restore(bill: RangeBill, { values, point, sums }: RangeState, kept: Kept): void {
  values.low.set(kept.low);
  values.high.set(kept.high);
  point.known.set(kept.known);
  point.missing = kept.missing;
  kept.sums.forEach((ranges, slot) => sums.set(slot, ranges));
  bill.amounts = kept.amounts;
  bill.parts = kept.parts;
  bill.blocks = kept.blocks;
}

/** Sums of a branch; what is measured otherwise keeps the range of all loads. */
class BranchSource implements RangeSource {
  readonly hasIntervals = true;
  net: Range[] = [];

  constructor(
    private readonly whole: RangeSource,
    private readonly box: BoxReduction,
    private readonly envelopes: LossEnvelope[],
    private readonly kept: Kept,
  ) {}

  printed(bill: RangeBill, quantity: QuantityEntry): Range | undefined {
    return this.whole.printed(bill, quantity);
  }

  measure(_run: RangeRun, _bill: RangeBill, state: RangeState, { slot, rounding }: QuantityEntry): void {
    const { kept } = this;
    if (kept.known[slot] !== 1) {
      state.point.missing[slot] = kept.missing[slot];
      return;
    }
    const plan = this.box.reduction.measures.get(slot);
    if (plan?.kind === 'sum') setRange(state, slot, roundedRange(this.sumOf(plan), rounding));
    else setRange(state, slot, { low: kept.low[slot]!, high: kept.high[slot]! });
  }

  private sumOf(plan: MeasurePlan & { kind: 'sum' }): Range {
    let sum = point(0);
    for (const [group, net] of this.net.entries()) {
      if (plan.classes[group] === 1) sum = plus(sum, this.classSum(plan.channel, group, net));
    }
    return loosened(sum);
  }

  /** Ends of a class: net energy is lagging less leading, and active energy pays for what is delivered. */
  private classSum(channel: (MeasurePlan & { kind: 'sum' })['channel'], group: number, net: Range): Range {
    const at = (of: (ends: ClassPlan) => Float64Array): Range => ({
      low: of(this.box.low)[group]!,
      high: of(this.box.high)[group]!,
    });
    const [kwh, lagging, leading] = [
      at((ends) => ends.kwh),
      at((ends) => ends.kvarhLagging),
      at((ends) => ends.kvarhLeading),
    ];
    switch (channel) {
      case 'kwh':
        return { low: Math.min(kwh.high, kwh.low + this.envelopes[group]!.leastKwh(net.high)), high: kwh.high };
      case 'kvarhLagging':
        return within(lagging, net.low + leading.low, net.high + leading.high);
      case 'kvarhLeading':
        return within(leading, lagging.low - net.high, lagging.high - net.low);
      case 'kvarhNet':
        return net;
    }
  }
}

/** A range brought within further ends that hold the same value. */
function within(range: Range, low: number, high: number): Range {
  const ends = { low: Math.max(range.low, low), high: Math.min(range.high, high) };
  return ends.low <= ends.high ? ends : { low: Math.min(ends.low, ends.high), high: Math.max(ends.low, ends.high) };
}
