import { assertLoadSeries, sumLoads } from '../load';
import type { LoadSeries } from '../load';
import { PullOutError, fixField } from '../machine';
import { laggingShare } from './registers';
import type { CapacitorStep, PlanMotor, Plant, Upstream } from './types';

/** Change against standing at each distinct load of a motor. */
interface MotorChange {
  kvar: Float64Array;
  kw: Float64Array;
}

/** A motor's distinct loads and which of them each interval has. */
export interface DistinctLoads {
  /** Ascending, without the standstill. [kW] */
  loads: Float64Array;
  /** Per interval: 0 at standstill, else 1 + index into `loads`. */
  index: Uint32Array;
}

/** Prices many settings of one plant: arrays are reused, loads are solved once per field current. */
export interface Simulator {
  /**
   * The load series with the motors at these field currents.
   *
   * @param fieldsA  Field current per motor, in the plant's order. [A]
   * @returns A series whose arrays are overwritten by the next call.
   * @throws {PullOutError} naming the motor that would fall out of step
   */
  apply: (fieldsA: number[]) => LoadSeries;
  notes: string[];
}

/** Floats kept in a motor's cache of solved field currents. */
const CACHE_FLOATS = 4_000_000;

/**
 * Prepares the simulation of field settings and capacitor steps on metered load.
 *
 * Reactive energy changes by what motors and capacitors take beyond standing (registers by `shiftRegisters`), active energy by
 * the change in losses. A missing interval stays missing. Where a meter has no leading register (NaN throughout) it counts as
 * zero, and a note says so. Of several meters each has its own registers changed by the motors behind it; the sum is priced.
 *
 * @param plant  Load, motors as they stand, and what lies between meter and bus.
 * @param capacitors  Fixed steps connected besides.
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when a motor's standing field does not hold its load
 */
export function createSimulator(plant: Plant, capacitors: CapacitorStep[] = []): Simulator {
  const loads = [plant.load, ...(plant.beside ?? [])];
  const places = placesOf(plant.motors, loads.length);
  const meters = loads.map((load, meter) => {
    const own = places.filter(({ behind }) => behind === meter);
    const rest = meter === 0 ? { capacitors, upstream: plant.upstream } : { capacitors: [] };
    return { own, ...simulateMeter({ load, motors: own, ...rest }) };
  });
  const apply = (fieldsA: number[]): LoadSeries => {
    if (fieldsA.length !== places.length)
      throw new RangeError(`fieldsA must have ${places.length} values, got ${fieldsA.length}`);
    return sumLoads(meters.map((meter) => meter.apply(meter.own.map(({ index }) => fieldsA[index]!))));
  };
  return { apply, notes: [...new Set(meters.flatMap((meter) => meter.notes))] };
}

/** A motor with its place in the plant's order and the meter it stands behind. */
interface PlacedMotor {
  index: number;
  behind: number;
  motor: PlanMotor;
}

function placesOf(motors: readonly PlanMotor[], meters: number): PlacedMotor[] {
  return motors.map((motor, index) => {
    const behind = motor.behind ?? 0;
    if (!Number.isInteger(behind) || behind < 0 || behind >= meters)
      throw new RangeError(`motors[${index}].behind must name one of ${meters} meters from 0, got ${behind}`);
    return { index, behind, motor };
  });
}

/** One meter with what stands behind it. */
interface MeteredPart {
  load: LoadSeries;
  motors: PlacedMotor[];
  capacitors: CapacitorStep[];
  upstream?: Upstream;
}

function simulateMeter(part: MeteredPart): Simulator {
  assertLoadSeries(part.load);
  const { load, notes } = withBothRegisters(part.load);
  const hours = load.stepMinutes / 60;
  const motors = part.motors.map(({ motor, index }) => motorChanges(motor, load.kwh.length, `motors[${index}]`));
  const steps = capacitorChange(part.capacitors, load);
  const upstream = part.upstream ? upstreamChange(part.upstream, load, hours) : null;
  const shares = load.kvarhLagging.map((lagging, i) => laggingShare(lagging, load.kvarhLeading[i]!));
  const out: LoadSeries = {
    ...load,
    kwh: new Float64Array(load.kwh.length),
    kvarhLagging: new Float64Array(load.kwh.length),
    kvarhLeading: new Float64Array(load.kwh.length),
    quality: load.quality.slice(),
  };
  const changeKw = new Float64Array(load.kwh.length);
  const changeKvar = new Float64Array(load.kwh.length);
  const apply = (fieldsA: number[]): LoadSeries => {
    changeKw.set(steps.kw);
    changeKvar.set(steps.kvar);
    motors.forEach(({ index, changeFor }, m) => addChange(changeKw, changeKvar, index, changeFor(fieldsA[m]!)));
    if (upstream) upstream(changeKw, changeKvar);
    shiftAll(load, shares, changeKw, changeKvar, hours, out);
    return out;
  };
  return { apply, notes };
}

/** The load with an absent leading register taken as zero, and a note if so. */
function withBothRegisters(load: LoadSeries): { load: LoadSeries; notes: string[] } {
  const absent = (channel: Float64Array) => channel.length > 0 && channel.every((value) => Number.isNaN(value));
  if (absent(load.kvarhLagging) || !absent(load.kvarhLeading)) return { load, notes: [] };
  const kvarhLeading = load.kvarhLagging.map((lagging) => (Number.isNaN(lagging) ? NaN : 0));
  return {
    load: { ...load, kvarhLeading },
    notes: ['The meter has no leading register: leading energy as metered is taken as zero.'],
  };
}

function shiftAll(
  load: LoadSeries,
  shares: Float64Array,
  changeKw: Float64Array,
  changeKvar: Float64Array,
  hours: number,
  out: LoadSeries,
): void {
  const { kwh, kvarhLagging, kvarhLeading } = load;
  for (let i = 0; i < kwh.length; i++) {
    const share = shares[i]!;
    const e = changeKvar[i]! * hours;
    const a = kvarhLagging[i]! + share * e;
    const b = kvarhLeading[i]! - (1 - share) * e;
    out.kvarhLagging[i] = Math.max(a, 0) + Math.max(-b, 0);
    out.kvarhLeading[i] = Math.max(b, 0) + Math.max(-a, 0);
    out.kwh[i] = kwh[i]! + changeKw[i]! * hours;
  }
}

function addChange(
  changeKw: Float64Array,
  changeKvar: Float64Array,
  index: Uint32Array,
  change: MotorChange | null,
): void {
  if (!change) return;
  const { kw, kvar } = change;
  for (let i = 0; i < index.length; i++) {
    const k = index[i]!;
    changeKw[i]! += kw[k]!;
    changeKvar[i]! += kvar[k]!;
  }
}

function motorChanges(planMotor: PlanMotor, count: number, name: string) {
  const { motor, standingFieldA, voltagePu } = planMotor;
  const { loads, index } = distinctLoads(planMotor.shaftKw, count, name);
  const takenAt = (fieldCurrentA: number) => {
    try {
      return fixField(motor, { fieldCurrentA, voltagePu }).takenAt(loads);
    } catch (error) {
      if (error instanceof PullOutError) throw new PullOutError(`${name}: ${error.message}`, error.pullOutPowerW);
      throw error;
    }
  };
  const standing = takenAt(standingFieldA);
  const cache = new Map<number, MotorChange>();
  const room = Math.max(8, Math.floor(CACHE_FLOATS / (2 * loads.length + 2)));
  const changeFor = (fieldCurrentA: number): MotorChange | null => {
    if (fieldCurrentA === standingFieldA || loads.length === 0) return null;
    let change = cache.get(fieldCurrentA);
    if (!change) {
      const taken = takenAt(fieldCurrentA);
      change = { kvar: difference(taken.kvar, standing.kvar), kw: difference(taken.inputKw, standing.inputKw) };
      if (cache.size >= room) cache.delete(cache.keys().next().value!);
      cache.set(fieldCurrentA, change);
    }
    return change;
  };
  return { index, changeFor };
}

/** after - before, behind a leading zero for the standstill. */
function difference(after: Float64Array, before: Float64Array): Float64Array {
  const change = new Float64Array(after.length + 1);
  for (let k = 0; k < after.length; k++) change[k + 1] = after[k]! - before[k]!;
  return change;
}

/** Sorts a motor's loads into distinct ones. @throws {RangeError} naming a load that is negative or not a number */
export function distinctLoads(shaftKw: Float64Array, count: number, name: string): DistinctLoads {
  if (shaftKw.length !== count)
    throw new RangeError(`${name}.shaftKw must have ${count} values like the load series, got ${shaftKw.length}`);
  const wrong = shaftKw.findIndex((kw) => !(kw >= 0 && Number.isFinite(kw)));
  if (wrong >= 0) throw new RangeError(`${name}.shaftKw[${wrong}] must be >= 0, got ${shaftKw[wrong]}`);
  const loads = Float64Array.from(new Set(shaftKw.filter((kw) => kw > 0))).sort();
  const place = new Map<number, number>([[0, 0]]);
  loads.forEach((kw, k) => place.set(kw, k + 1));
  return { loads, index: Uint32Array.from(shaftKw, (kw) => place.get(kw)!) };
}

function capacitorChange(capacitors: CapacitorStep[], load: LoadSeries) {
  const kvar = new Float64Array(load.kwh.length);
  const kw = new Float64Array(load.kwh.length);
  capacitors.forEach((step, c) => {
    const voltagePu = step.voltagePu ?? 1;
    if (!(step.kvar > 0 && Number.isFinite(step.kvar)))
      throw new RangeError(`capacitors[${c}].kvar must be > 0, got ${step.kvar}`);
    if (!(step.lossWPerKvar >= 0 && Number.isFinite(step.lossWPerKvar)))
      throw new RangeError(`capacitors[${c}].lossWPerKvar must be >= 0, got ${step.lossWPerKvar}`);
    if (!(voltagePu > 0 && voltagePu <= 2))
      throw new RangeError(`capacitors[${c}].voltagePu must be in (0, 2], got ${voltagePu}`);
    if (step.fromMs !== undefined && !Number.isFinite(step.fromMs))
      throw new RangeError(`capacitors[${c}].fromMs must be an instant in ms, got ${step.fromMs}`);
    const delivered = step.kvar * voltagePu ** 2;
    const first = Math.ceil(((step.fromMs ?? load.startMs) - load.startMs) / (load.stepMinutes * 60_000));
    for (let i = Math.max(0, first); i < kvar.length; i++) {
      kvar[i]! -= delivered;
      kw[i]! += (delivered * step.lossWPerKvar) / 1000;
    }
  });
  return { kvar, kw };
}

/**
 * Adds the change of the losses upstream, which the meter sees: R S^2 and X S^2 with S at the meter, before and after.
 * Solved by substitution to rounding error: the losses are a small share of S, so each round gains more than a digit.
 */
function upstreamChange(upstream: Upstream, load: LoadSeries, hours: number) {
  const { ratedKva, resistancePu, reactancePu } = upstream;
  if (!(ratedKva > 0)) throw new RangeError(`upstream.ratedKva must be > 0, got ${ratedKva}`);
  if (!(resistancePu >= 0 && resistancePu < 0.2))
    throw new RangeError(`upstream.resistancePu must be in [0, 0.2), got ${resistancePu}`);
  if (!(reactancePu >= 0 && reactancePu < 0.5))
    throw new RangeError(`upstream.reactancePu must be in [0, 0.5), got ${reactancePu}`);
  const r = resistancePu / ratedKva;
  const x = reactancePu / ratedKva;
  const kw = load.kwh.map((kwh) => kwh / hours);
  const kvar = load.kvarhLagging.map((lagging, i) => (lagging - load.kvarhLeading[i]!) / hours);
  return (changeKw: Float64Array, changeKvar: Float64Array): void => {
    for (let i = 0; i < kw.length; i++) {
      const [p, q, dp, dq] = [kw[i]!, kvar[i]!, changeKw[i]!, changeKvar[i]!];
      let gained = 0;
      for (let round = 0; round < 40; round++) {
        const next = (p + dp + r * gained) ** 2 + (q + dq + x * gained) ** 2 - p * p - q * q;
        const settled = !(Math.abs(next - gained) > 1e-12 * (p * p + q * q));
        gained = next;
        if (settled) break;
      }
      if (Number.isNaN(gained)) continue;
      changeKw[i] = dp + r * gained;
      changeKvar[i] = dq + x * gained;
    }
  };
}
