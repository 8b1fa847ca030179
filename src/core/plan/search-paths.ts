import { controlField } from '../machine';
import type { OwnFieldControl } from '../machine';
import type { SearchAxis, SearchMotor } from './search-axes';
import type { Spans } from './types';
import type { At, Exchange } from './search-walk';

/** What a motor takes at its usual load under each setting of an axis. */
export interface Ladder {
  /** Delivered, ascending. [kvar] */
  kvar: number[];
  inputKw: number[];
  /** Place in the axis. */
  place: number[];
}

/**
 * The cheapest order of raising the axes of one span: from all at their least to all at their most delivery, each step the one that
 * loses least per kvar.
 *
 * @returns Points over the axes given, in their order.
 */
export function cheapestPath(ladders: readonly Ladder[]): At[] {
  const rung = ladders.map(() => 0);
  const point = () => ladders.map(({ place }, a) => place[rung[a]!]!);
  const points = [point()];
  for (;;) {
    const prices = ladders.map((ladder, a) => priceOf(ladder, rung[a]!));
    const cheapest = prices.reduce((best, price, a) => (price < prices[best]! ? a : best), 0);
    if (prices[cheapest] === undefined || prices[cheapest] === Infinity) return points;
    rung[cheapest]!++;
    points.push(point());
  }
}

/** Loss per kvar of the next rung; Infinity at the top. [kW/kvar] */
function priceOf({ kvar, inputKw }: Ladder, rung: number): number {
  if (rung >= kvar.length - 1) return Infinity;
  const more = kvar[rung + 1]! - kvar[rung]!;
  return more > 0 ? (inputKw[rung + 1]! - inputKw[rung]!) / more : -Infinity;
}

/** A ladder of capacitor steps. */
export function stepLadder(mostSteps: number, stepKvar: number, lossWPerKvar: number): Ladder {
  const place = Array.from({ length: mostSteps + 1 }, (_, k) => k);
  const kvar = place.map((steps) => steps * stepKvar);
  return { kvar, inputKw: kvar.map((amount) => (amount * lossWPerKvar) / 1000), place };
}

/**
 * Pairs of axes that can take over reactive power from one another, the one of coarser steps first.
 *
 * @param ladders  Per axis; those of one list can.
 */
export function exchangesOf(ladders: readonly { axis: number; ladder: Ladder }[]): Exchange[] {
  const stepOf = ({ kvar }: Ladder) => Math.abs(kvar.at(-1)! - kvar[0]!) / Math.max(1, kvar.length - 1);
  const bySetting = ({ kvar, place }: Ladder) => {
    const found = new Array<number>(kvar.length).fill(0);
    place.forEach((setting, rung) => (found[setting] = kvar[rung]!));
    return found;
  };
  return ladders.flatMap((one, k) =>
    ladders.slice(k + 1).map((other): Exchange => {
      const [from, to] = stepOf(one.ladder) >= stepOf(other.ladder) ? [one, other] : [other, one];
      return { from: from.axis, to: to.axis, fromKvar: bySetting(from.ladder), toKvar: bySetting(to.ladder) };
    }),
  );
}

/** What the settings of an axis come to at the load its motor runs at longest in the axis' span. */
export function ladderOf(axis: SearchAxis, motors: readonly SearchMotor[], spans?: Spans): Ladder {
  const places = axis.settings.map((_, k) => k);
  const motor = motors[axis.motors[0]!]!;
  const shaftKw = usualLoad(motor.shaftKw, spans && { ...spans, span: axis.span });
  // What holds the plant's power factor shares by itself: its set points are their own order.
  if (shaftKw === 0 || axis.settings.some((control) => control.holds === 'plant-power-factor'))
    return { kvar: places, inputKw: places.map(() => 0), place: places };
  const { voltagePu, leastFieldA } = motor;
  const points = axis.settings.map((control) =>
    controlField(motor.motor, control as OwnFieldControl, { voltagePu, leastFieldA }).point(shaftKw),
  );
  const place = places.sort((a, b) => points[b]!.kvar - points[a]!.kvar || a - b);
  return {
    kvar: place.map((k) => -points[k]!.kvar),
    inputKw: place.map((k) => points[k]!.inputKw),
    place,
  };
}

/** Load a motor spends most intervals of a span at; 0 when it never runs in it. [kW] */
function usualLoad(shaftKw: Float64Array, within?: Spans & { span: number }): number {
  const counts = new Map<number, number>();
  shaftKw.forEach((kw, i) => {
    if (kw > 0 && (!within || within.index[i] === within.span)) counts.set(kw, (counts.get(kw) ?? 0) + 1);
  });
  return [...counts].reduce((a, b) => (b[1] > a[1] ? b : a), [0, 0])[0];
}
