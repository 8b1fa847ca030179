import {
  NotConvergedError,
  PullOutError,
  controlField,
  fixField,
  newTaken,
  ratedKva,
  reactiveSupply,
} from '../machine';
import type { FieldControl, OwnFieldControl, SynchronousMotor } from '../machine';
import type { LossCurve } from './dispatch';
import { distinctLoads } from './distinct-loads';
import type { DistinctLoads } from './distinct-loads';
import { inductionTaken } from './induction';
import type { PlanMotor, Replacement } from './types';

/** What is taken at each distinct load, behind a zero for the standstill. Load view. */
export interface TakenByLoad {
  kvar: Float64Array;
  kw: Float64Array;
}

/** A motor behind a meter: what it, or the motor it replaces, took as metered, and what it takes under a control. */
export interface PlacedMotor extends DistinctLoads {
  name: string;
  behind: number;
  motor: SynchronousMotor;
  ratedKva: number;
  standing: TakenByLoad;
  /** What it takes beyond standing under a control answered by load and voltage alone; null where that is nothing. */
  changeFor: (control: OwnFieldControl) => TakenByLoad | null;
  /** What it may deliver where it is answered interval by interval. */
  supply: () => MotorSupply;
}

/** Reactive power a motor may deliver, at levels of load where it runs at many loads. */
export interface MotorSupply {
  /** Level of each distinct load, standstill first, which is level 0: nothing can be delivered. */
  levelOf: Uint32Array;
  /** Per level. */
  curves: LossCurve[];
}

/** Floats kept in a motor's cache of solved controls. */
const CACHE_FLOATS = 4_000_000;

/** Levels a motor's loads are gathered to for sharing; each takes the range of its highest load, which is the narrowest. */
const LEVELS = 64;

/** Straight pieces of a loss curve. */
const PIECES = 48;

/** A motor of the plant. @throws {RangeError}, {PullOutError} naming it */
export function placeMotor(planMotor: PlanMotor, intervals: number, name: string): PlacedMotor {
  const { motor, standingFieldA, voltagePu } = planMotor;
  const standingAt = (loads: Float64Array) =>
    fixField(motor, { fieldCurrentA: standingFieldA, voltagePu }).takenAt(loads);
  return place(planMotor, intervals, name, standingAt);
}

/** A new motor in place of an induction motor. @throws {RangeError}, {PullOutError} naming it */
export function placeReplacement(replacement: Replacement, intervals: number, name: string): PlacedMotor {
  return place(replacement, intervals, name, (loads) => inductionTaken(replacement.induction, loads));
}

type TakenAt = (loads: Float64Array) => { kvar: Float64Array; inputKw: Float64Array };
type Placed = Pick<PlanMotor, 'motor' | 'shaftKw' | 'behind' | 'voltagePu' | 'leastFieldA'>;

function place(placed: Placed, intervals: number, name: string, standingAt: TakenAt): PlacedMotor {
  const { motor, behind = 0, voltagePu, leastFieldA } = placed;
  const { loads, index } = distinctLoads(placed.shaftKw, intervals, name);
  const standing = named(name, () => byLoad(standingAt(loads)));
  const scratch = newTaken(loads.length);
  const cache = new Map<string, TakenByLoad | null>();
  const room = Math.max(8, Math.floor(CACHE_FLOATS / (2 * loads.length + 2)));
  const changeFor = (control: OwnFieldControl) => {
    const key = keyOf(control);
    let change = cache.get(key);
    if (change === undefined) {
      const taken = named(name, () => controlField(motor, control, { voltagePu, leastFieldA }).takenAt(loads, scratch));
      change = beyond(taken, standing, cache.size >= room ? oldestOf(cache) : null);
      cache.set(key, change);
    }
    return change;
  };
  let supply: MotorSupply | undefined;
  const supplyOf = () => (supply ??= named(name, () => supplyAt(placed, loads)));
  return { name, behind, motor, ratedKva: ratedKva(motor), loads, index, standing, changeFor, supply: supplyOf };
}

function keyOf(control: FieldControl): string {
  return control.holds === 'field-current' ? `${control.fieldCurrentA}` : JSON.stringify(control);
}

/** Puts a motor's name before what its machine cannot do. */
function named<Result>(name: string, work: () => Result): Result {
  try {
    return work();
  } catch (error) {
    if (error instanceof PullOutError) throw new PullOutError(`${name}: ${error.message}`, error.pullOutPowerW);
    if (error instanceof NotConvergedError)
      throw new NotConvergedError(`${name}: ${error.code}`, error.iterations, error.residual);
    throw error;
  }
}

function byLoad({ kvar, inputKw }: { kvar: Float64Array; inputKw: Float64Array }): TakenByLoad {
  const taken = { kvar: new Float64Array(kvar.length + 1), kw: new Float64Array(kvar.length + 1) };
  taken.kvar.set(kvar, 1);
  taken.kw.set(inputKw, 1);
  return taken;
}

/** Takes the oldest entry out of a cache: its arrays serve again, since a year of new ones costs more than what is written in them. */
function oldestOf(cache: Map<string, TakenByLoad | null>): TakenByLoad | null {
  const [[key, oldest]] = cache as Iterable<[string, TakenByLoad | null]> as [[string, TakenByLoad | null]];
  cache.delete(key);
  return oldest;
}

/** What is taken beyond standing; null where that is nothing. One pass: a submeter's year has as many loads as intervals. */
function beyond(
  { kvar, inputKw }: { kvar: Float64Array; inputKw: Float64Array },
  standing: TakenByLoad,
  spare: TakenByLoad | null,
): TakenByLoad | null {
  const change = spare ?? { kvar: new Float64Array(kvar.length + 1), kw: new Float64Array(kvar.length + 1) };
  let isNothing = true;
  for (let k = 0; k < kvar.length; k++) {
    const moreKvar = kvar[k]! - standing.kvar[k + 1]!;
    const moreKw = inputKw[k]! - standing.kw[k + 1]!;
    change.kvar[k + 1] = moreKvar;
    change.kw[k + 1] = moreKw;
    isNothing &&= moreKvar === 0 && moreKw === 0;
  }
  return isNothing ? null : change;
}

function supplyAt({ motor, voltagePu, leastFieldA }: Placed, loads: Float64Array): MotorSupply {
  const highest = loads[loads.length - 1] ?? 0;
  const few = loads.length <= LEVELS;
  const levels = few ? loads : Float64Array.from({ length: LEVELS }, (_, k) => ((k + 1) * highest) / LEVELS);
  const levelOf = new Uint32Array(loads.length + 1);
  loads.forEach((kw, k) => {
    levelOf[k + 1] = 1 + (few ? k : Math.min(LEVELS - 1, Math.ceil((kw / highest) * LEVELS - 1e-9) - 1));
  });
  const range = reactiveSupply(motor, { loads: levels, voltagePu, leastFieldA });
  const curves = Array.from(levels, (shaftKw, level): LossCurve => {
    const low = range.least[level]!;
    const width = range.most[level]! - low;
    const kvar =
      width > 0
        ? Float64Array.from({ length: PIECES + 1 }, (_, j) => low + (width * j) / PIECES)
        : Float64Array.of(low);
    return { kvar, lossKw: kvar.map((delivered) => range.inputKwAt(level, delivered) - shaftKw) };
  });
  return { levelOf, curves: [{ kvar: Float64Array.of(0), lossKw: Float64Array.of(0) }, ...curves] };
}
