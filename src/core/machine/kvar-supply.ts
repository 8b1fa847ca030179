import { cubicTable } from './cubic-table';
import { requireRange } from './errors';
import { fastInput } from './fast-input';
import type { FastInput } from './fast-input';
import type { KvarControl, PowerFactorControl } from './field-control';
import { compileMotor } from './motor';
import type { MotorModel, SynchronousMotor } from './motor';
import { checkLoad } from './operating-point';
import { checkLeastField, heldRangeStates } from './kvar-range';
import type { RangeLimit, RangeStates } from './kvar-range';
import type { TakenMany } from './taken-many';

/** Limits by number: 0 free, 1 field, 2 armature, 3 pull-out or least field. */
export const LIMIT_CODE: Record<RangeLimit, number> = { field: 1, armature: 2, 'pull-out': 3, 'least-field': 3 };

/**
 * What a motor can deliver and what that costs at each of many loads and one voltage. Reactive power is as delivered. Where no
 * reactive power keeps every limit, `least` and `most` are both what the over-excited limiters leave, and `admissible` is 0.
 */
export interface ReactiveSupply {
  loads: Float64Array;
  /** Range per load. [kvar] */
  least: Float64Array;
  most: Float64Array;
  /** What binds each end, by `LIMIT_CODE`. */
  leastBinding: Uint8Array;
  mostBinding: Uint8Array;
  admissible: Uint8Array;
  /** Whole input of load k. [kW] */
  inputKwAt: (k: number, kvarDelivered: number) => number;
  /** What another kvar delivered costs in input at load k. [kW/kvar] */
  marginalLossAt: (k: number, kvarDelivered: number) => number;
  /**
   * Input per interval.
   *
   * @param index  0 at standstill, else 1 + the load's place.
   * @param kvarDelivered  One value an interval; not read at standstill.
   * @param outKw  Overwritten; 0 at standstill.
   */
  fill: (index: Uint32Array, kvarDelivered: Float64Array, outKw: Float64Array) => void;
  /** What a regulator takes at every load, kept within the range: load view. Overwrites `out`, whose arrays have one place a load. */
  hold: (control: PowerFactorControl | KvarControl, out: TakenMany) => void;
}

/** Loads up to this number are solved one by one. */
const FEW = 48;

/** Error of a table's range ends, as a share of rated kVA. */
const TABLE_TOLERANCE = 1e-7;

/**
 * Prepares a motor at many loads for controls that are answered interval by interval.
 *
 * @param motor  Motor data with its limits.
 * @param at.loads  Shaft loads, ascending. [kW], each >= 0
 * @param at.voltagePu  Terminal voltage, 1 when absent. [pu], (0, 2]
 * @param at.leastFieldA  Least field current allowed, 0 when absent. [A]
 * @returns Range ends within 1e-6 of rated kVA of `reactiveRange`, inputs within 1e-8 of `operatingPoint`.
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when the field limit does not hold the highest load
 */
export function reactiveSupply(
  motor: SynchronousMotor,
  at: { loads: Float64Array; voltagePu?: number; leastFieldA?: number },
): ReactiveSupply {
  const model = compileMotor(motor);
  const { loads } = at;
  const highest = loads.length > 0 ? loads[loads.length - 1]! : 0;
  requireRange(loads.length === 0 || loads[0]! >= 0, 'loads', '>= 0', loads[0]);
  const v = checkLoad({ shaftKw: highest, voltagePu: at.voltagePu });
  const ends = rangeEnds(model, v, checkLeastField(at.leastFieldA), loads);
  return { loads, ...ends, ...inputsOf(model, v, loads, ends) };
}

type RangeEnds = Pick<ReactiveSupply, 'least' | 'most' | 'leastBinding' | 'mostBinding' | 'admissible'>;

function rangeEnds(model: MotorModel, v: number, leastFieldA: number, loads: Float64Array): RangeEnds {
  const { baseKva } = model;
  const sample = (shaftKw: number) => {
    const range = heldRangeStates(model, shaftKw / baseKva, v, leastFieldA);
    return { a: -range.least.q * baseKva, b: -range.most.q * baseKva, regime: regimeOf(range) };
  };
  const table = loads.length <= FEW ? readEach(sample, loads) : readTable(sample, loads, TABLE_TOLERANCE * baseKva);
  return {
    least: table.a,
    most: table.b,
    leastBinding: table.regime.map((regime) => regime & 3),
    mostBinding: table.regime.map((regime) => (regime >> 2) & 3),
    admissible: table.regime.map((regime) => regime >> 4),
  };
}

function regimeOf(range: RangeStates): number {
  return LIMIT_CODE[range.leastBinding] | (LIMIT_CODE[range.mostBinding] << 2) | (Number(range.admissible) << 4);
}

type Sample = (shaftKw: number) => { a: number; b: number; regime: number };

function readEach(sample: Sample, loads: Float64Array) {
  const samples = Array.from(loads, sample);
  return {
    a: Float64Array.from(samples, (s) => s.a),
    b: Float64Array.from(samples, (s) => s.b),
    regime: Uint8Array.from(samples, (s) => s.regime),
  };
}

function readTable(sample: Sample, loads: Float64Array, tolerance: number) {
  const highest = loads[loads.length - 1]!;
  // The highest load first: beyond pull-out there is no table to build.
  sample(highest);
  return cubicTable(sample, loads[0]!, highest, tolerance).read(loads);
}

function inputsOf(model: MotorModel, v: number, loads: Float64Array, ends: RangeEnds) {
  const { baseKva } = model;
  const fast = fastInput(model, v);
  const middle = ends.least.map((least, k) => (least + ends.most[k]!) / 2);
  const near = loads.map((kw, k) => fast.inputAt(kw / baseKva, -middle[k]! / baseKva, kw / baseKva));
  const inputKwAt = (k: number, kvarDelivered: number) =>
    fast.inputAt(loads[k]! / baseKva, -kvarDelivered / baseKva, near[k]!) * baseKva;
  const marginalLossAt = (k: number, kvarDelivered: number) =>
    -fast.slopeAt(loads[k]! / baseKva, -kvarDelivered / baseKva, near[k]!);
  const fill = (index: Uint32Array, kvarDelivered: Float64Array, outKw: Float64Array) => {
    for (let i = 0; i < index.length; i++) {
      const k = index[i]!;
      outKw[i] = k === 0 ? 0 : inputKwAt(k - 1, kvarDelivered[i]!);
    }
  };
  const scaled: ScaledLoads = { fast, baseKva, loads, near, ends };
  const hold = (control: PowerFactorControl | KvarControl, out: TakenMany) =>
    control.holds === 'kvar' ? holdKvar(scaled, control, out) : holdPowerFactor(scaled, control, out);
  return { inputKwAt, marginalLossAt, fill, hold };
}

interface ScaledLoads {
  fast: FastInput;
  baseKva: number;
  loads: Float64Array;
  /** Armature power to begin at. [pu] */
  near: Float64Array;
  ends: RangeEnds;
}

function holdKvar(at: ScaledLoads, control: KvarControl, out: TakenMany): void {
  const { fast, baseKva, loads, near, ends } = at;
  for (let k = 0; k < loads.length; k++) {
    out.limited[k] = 0;
    let delivered = control.kvarDelivered;
    if (delivered > ends.most[k]!) {
      delivered = ends.most[k]!;
      out.limited[k] = ends.mostBinding[k]!;
    } else if (delivered < ends.least[k]!) {
      delivered = ends.least[k]!;
      out.limited[k] = ends.leastBinding[k]!;
    }
    out.kvar[k] = -delivered;
    out.inputKw[k] = fast.inputAt(loads[k]! / baseKva, -delivered / baseKva, near[k]!) * baseKva;
  }
}

/** Reactive power in proportion to the whole input, kept within the range. */
function holdPowerFactor(at: ScaledLoads, control: PowerFactorControl, out: TakenMany): void {
  const { fast, baseKva, loads, near, ends } = at;
  const ratio = kvarRatio(control);
  for (let k = 0; k < loads.length; k++) {
    const shaft = loads[k]! / baseKva;
    const lowest = -ends.most[k]! / baseKva;
    const highest = -ends.least[k]! / baseKva;
    const kept = (wanted: number) => Math.min(highest, Math.max(lowest, wanted));
    let q = kept(ratio * near[k]!);
    // The slope hardly changes between the steps of Newton's method: one is enough.
    const slope = 1 - ratio * fast.slopeAt(shaft, q, near[k]!);
    let wanted = q;
    let input = near[k]!;
    for (let i = 0; i < 40; i++) {
      input = fast.inputAt(shaft, q, near[k]!);
      wanted = q - (q - ratio * input) / slope;
      const step = kept(wanted) - q;
      if (Math.abs(step) < 1e-8) break;
      q += step;
    }
    out.kvar[k] = q * baseKva;
    out.inputKw[k] = input * baseKva;
    out.limited[k] =
      wanted < lowest - 1e-8 ? ends.mostBinding[k]! : wanted > highest + 1e-8 ? ends.leastBinding[k]! : 0;
  }
}

/** Reactive power absorbed per input that a power factor asks for. [unitless] */
export function kvarRatio(control: PowerFactorControl): number {
  const { powerFactor, leading } = control;
  requireRange(powerFactor > 0 && powerFactor <= 1, 'powerFactor', 'in (0, 1]', powerFactor);
  if (powerFactor === 1) return 0;
  return (Math.sqrt(1 - powerFactor ** 2) / powerFactor) * (leading ? -1 : 1);
}
