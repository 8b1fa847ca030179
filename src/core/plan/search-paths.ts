import { controlField } from '../machine';
import type { OwnFieldControl } from '../machine';
import type { SearchAxis, SearchMotor } from './search-axes';
import type { Spans } from './types';
import type { At } from './search-walk';

/** What a motor takes at its usual load under each setting of an axis. */
interface Ladder {
  /** Delivered, ascending. [kvar] */
  kvar: number[];
  inputKw: number[];
  /** Place in the axis. */
  place: number[];
}

/**
 * The cheapest order of raising the axes of one span: from all at their least to all at their most delivery, each step the one that
 * loses least per kvar, at the load each motor runs at longest in the span.
 *
 * @returns Points over the axes given, in their order.
 */
export function cheapestPath(axes: readonly SearchAxis[], motors: readonly SearchMotor[], spans?: Spans): At[] {
  const ladders = axes.map((axis) => ladderOf(axis, motors, spans));
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

function ladderOf(axis: SearchAxis, motors: readonly SearchMotor[], spans?: Spans): Ladder {
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
