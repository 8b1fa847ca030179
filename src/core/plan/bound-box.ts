import { sumLoads, type LoadSeries } from '../load';
import type { Coupling, LoadBox } from '../tariff';
import { placeBank } from './banks';
import { motorReach, type MotorReach } from './bound-motor';
import { seenAtBus, seenThrough, type Ends, type SeenEnds } from './bound-upstream';
import { withBothRegisters } from './meter';
import { placeMotor, placeReplacement } from './placed-motor';
import { laggingShare } from './registers';
import type { CapacitorBank, Plant, Replacement } from './types';

/** What a bound is asked for: the plant with what may be built there. */
export interface BoundGround {
  plant: Plant;
  /** Capacitors, each step of which may be connected or not in every interval. */
  banks?: CapacitorBank[];
  /** New motors that stand in place of induction motors. */
  replacements?: Replacement[];
}

/** All loads that admissible reactive power can make of a plant's. */
export interface PlantBox {
  box: LoadBox;
  /** What delivering costs; nothing where losses upstream hang on it too. */
  coupling?: Coupling;
  /** As if every motor delivered its most, at the losses of that and at the least losses of all: the difference is not charged. */
  mostDelivered: { withLosses: LoadSeries; withLeast: LoadSeries };
}

/** Changes at a bus in each interval. */
interface BusReach {
  kvar: { low: Float64Array; high: Float64Array };
  kw: { low: Float64Array; high: Float64Array; atMost: Float64Array };
}

/**
 * Box of the loads that a plant may have when in every interval each motor runs anywhere within its limits, and each capacitor
 * step is connected or not.
 *
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when a motor cannot hold its load
 * @returns null where the upstream impedance cannot carry what the box holds
 */
export function plantBox({ plant, banks = [], replacements = [] }: BoundGround): PlantBox | null {
  const loads = [plant.load, ...(plant.beside ?? [])];
  const count = plant.load.kwh.length;
  const motors = [
    ...plant.motors.map((motor, m) => {
      const placed = placeMotor(motor, count, `motors[${m}]`);
      return { behind: placed.behind, reach: motorReach(placed, motor, true) };
    }),
    ...replacements.map((one, r) => {
      const placed = placeReplacement(one, count, `replacements[${r}]`);
      return { behind: placed.behind, reach: motorReach(placed, one, false) };
    }),
  ];
  const boxes = loads.map((load, meter) => {
    const reach = emptyReach(count);
    for (const { behind, reach: own } of motors) if (behind === meter) addMotor(reach, own);
    banks.forEach((bank, b) => (bank.behind ?? 0) === meter && addBank(reach, placeBank(bank, load, `banks[${b}]`)));
    const seen = meter === 0 && plant.upstream ? seenThrough(plant.upstream) : seenAtBus;
    return meterBox(withBothRegisters(load).load, reach, seen);
  });
  const own = boxes.flatMap((box) => (box ? [box] : []));
  if (own.length < boxes.length) return null;
  const low = sumLoads(own.map((box) => box.low));
  const high = sumLoads(own.map((box) => box.high));
  const { startMs, stepMinutes, quality } = low;
  return {
    box: { startMs, stepMinutes, quality, low, high },
    ...(plant.upstream ? {} : { coupling: couplingOf(loads, motors, banks) }),
    mostDelivered: {
      withLosses: sumLoads(own.map((box) => box.withLosses)),
      withLeast: sumLoads(own.map((box) => box.withLeast)),
    },
  };
}

function emptyReach(count: number): BusReach {
  const room = (): Float64Array => new Float64Array(count);
  return { kvar: { low: room(), high: room() }, kw: { low: room(), high: room(), atMost: room() } };
}

function addMotor({ kvar, kw }: BusReach, reach: MotorReach): void {
  reach.index.forEach((k, i) => {
    kvar.low[i]! += reach.leastKvar[k]!;
    kvar.high[i]! += reach.mostKvar[k]!;
    kw.low[i]! += reach.leastKw[k]!;
    kw.high[i]! += reach.mostKw[k]!;
    kw.atMost[i]! += reach.atMostDeliveredKw[k]!;
  });
}

function addBank({ kvar, kw }: BusReach, { steps, stepKvar, stepKw }: ReturnType<typeof placeBank>): void {
  for (let i = 0; i < kvar.low.length; i++) {
    kvar.low[i]! -= steps * stepKvar;
    kw.high[i]! += steps * stepKw;
    kw.atMost[i]! += steps * stepKw;
  }
}

interface PlacedReach {
  behind: number;
  reach: MotorReach;
}

/** What motors and banks lose for what they deliver, interval by interval; the registers of all meters are summed. */
function couplingOf(loads: LoadSeries[], motors: PlacedReach[], banks: CapacitorBank[]): Coupling {
  const [first] = loads;
  const hours = first!.stepMinutes / 60;
  const leastLossKvarh = new Float64Array(first!.kwh.length);
  for (const load of loads) {
    const { kvarhLagging, kvarhLeading } = withBothRegisters(load).load;
    kvarhLagging.forEach((lagging, i) => (leastLossKvarh[i]! += lagging - kvarhLeading[i]!));
  }
  const ofMotors = motors.map(({ reach: { index, leastLossKvar, pieces } }) => {
    index.forEach((k, i) => (leastLossKvarh[i]! += leastLossKvar[k]! * hours));
    const curves = pieces.map(
      (one) =>
        one && { kvarh: one.kvar.map((kvar) => kvar * hours), kwhPerKvarh: one.kwPerKvar, roomKwh: one.roomKw * hours },
    );
    return { index, curves };
  });
  const ofBanks = banks.map((bank, b) => {
    const { steps, stepKvar, stepKw } = placeBank(bank, first!, `banks[${b}]`);
    const kvarh = Float64Array.of(steps * stepKvar * hours);
    const curve = { kvarh, kwhPerKvarh: Float64Array.of(stepKw / stepKvar), roomKwh: 0 };
    return { index: new Uint32Array(leastLossKvarh.length), curves: [curve] };
  });
  return { leastLossKvarh, sources: [...ofMotors, ...ofBanks] };
}

interface MeterBox {
  low: LoadSeries;
  high: LoadSeries;
  withLosses: LoadSeries;
  withLeast: LoadSeries;
}

/** Share of an energy added on either side for the last digits, in which bound and simulation may differ. */
const DIGITS = 1e-10;

function meterBox(load: LoadSeries, { kvar, kw }: BusReach, seenEnds: SeenEnds): MeterBox | null {
  const hours = load.stepMinutes / 60;
  const copy = (): LoadSeries => ({
    ...load,
    kwh: load.kwh.slice(),
    kvarhLagging: load.kvarhLagging.slice(),
    kvarhLeading: load.kvarhLeading.slice(),
  });
  const box: MeterBox = { low: copy(), high: copy(), withLosses: copy(), withLeast: copy() };
  const metered = { kw: 0, kvar: 0 };
  const seen = { kw: { low: 0, high: 0 }, kvar: { low: 0, high: 0 } };
  const [moreKw, moreKvar]: [Ends, Ends] = [
    { low: 0, high: 0 },
    { low: 0, high: 0 },
  ];
  for (let i = 0; i < load.kwh.length; i++) {
    metered.kw = load.kwh[i]! / hours;
    metered.kvar = (load.kvarhLagging[i]! - load.kvarhLeading[i]!) / hours;
    if (Number.isNaN(metered.kw + metered.kvar)) continue;
    moreKw.low = kw.low[i]!;
    moreKw.high = kw.high[i]!;
    moreKvar.low = kvar.low[i]!;
    moreKvar.high = kvar.high[i]!;
    if (!seenEnds(metered, moreKw, moreKvar, seen)) return null;
    setInterval(box, load, i, {
      kwh: scaled(seen.kw, metered.kw, hours),
      kvarh: scaled(seen.kvar, metered.kvar, hours),
    });
    const mostLossKwh = (kw.atMost[i]! - kw.low[i]!) * hours;
    for (const series of [box.withLosses, box.withLeast]) {
      series.kvarhLagging[i] = box.low.kvarhLagging[i]!;
      series.kvarhLeading[i] = box.high.kvarhLeading[i]!;
    }
    box.withLeast.kwh[i] = box.low.kwh[i]!;
    box.withLosses.kwh[i] = box.low.kwh[i]! + mostLossKwh;
  }
  return box;
}

function scaled({ low, high }: Ends, from: number, hours: number): Ends {
  return { low: (low - from) * hours, high: (high - from) * hours };
}

/** Sets an interval's ends: both registers move with the reactive power one way each, by the rule of `shiftRegisters`. */
function setInterval({ low, high }: MeterBox, load: LoadSeries, i: number, more: { kwh: Ends; kvarh: Ends }): void {
  const [lagging, leading] = [load.kvarhLagging[i]!, load.kvarhLeading[i]!];
  const share = laggingShare(lagging, leading);
  const size =
    DIGITS * (Math.abs(load.kwh[i]!) + lagging + leading + Math.abs(more.kvarh.low) + Math.abs(more.kvarh.high));
  const laggingAt = (e: number): number => Math.max(lagging + share * e, 0) + Math.max((1 - share) * e - leading, 0);
  const leadingAt = (e: number): number => Math.max(leading - (1 - share) * e, 0) + Math.max(-lagging - share * e, 0);
  low.kwh[i] = load.kwh[i]! + more.kwh.low - size;
  high.kwh[i] = load.kwh[i]! + more.kwh.high + size;
  low.kvarhLagging[i] = Math.max(0, laggingAt(more.kvarh.low) - size);
  high.kvarhLagging[i] = laggingAt(more.kvarh.high) + size;
  low.kvarhLeading[i] = Math.max(0, leadingAt(more.kvarh.high) - size);
  high.kvarhLeading[i] = leadingAt(more.kvarh.low) + size;
}
