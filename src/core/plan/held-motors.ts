import type { FieldControl, PlantPowerFactorControl, VoltageControl } from '../machine';
import { cheapestOrder } from './dispatch';
import type { Dispatch } from './dispatch';
import { kvarPerKw } from './network';
import type { PlacedMotor } from './placed-motor';
import { busVoltagePu, shareByDroop } from './supply';
import type { SupplyImpedance, VoltageHolder } from './supply';
import type { MeteredPower, UpstreamLosses } from './upstream';

/** What motors answered interval by interval delivered. */
export interface HeldTrace {
  /** Per motor of the meter. [kvar], float64[intervals] */
  deliveredKvar: Float64Array[];
  /** 1 where an end of the range kept the motor from what it holds. */
  limited: Uint8Array[];
}

/** The interval at work: power as metered, and what the plant takes more. */
export interface IntervalAtWork {
  i: number;
  metered: MeteredPower;
  moreKw: number;
  moreKvar: number;
}

/** Motors of one meter and span that hold the bus voltage or the power factor at the meter. */
export interface HeldMotors {
  /** Adds what they take beyond standing. `parts[m][state]` is the distinct load of motor m. */
  settle: (at: IntervalAtWork, state: number, trace: HeldTrace | null) => void;
}

/** What the motors of a meter share. */
export interface HeldGround {
  motors: readonly PlacedMotor[];
  /** Distinct load of each motor in each state. */
  parts: readonly Uint32Array[];
  upstream: UpstreamLosses;
  supply: SupplyImpedance | null;
  /** Orders of loading found so far, by the motors that share. */
  known: Map<string, (state: number) => TogetherState>;
}

/** Relative gap at which the power factor at the meter is met. */
const MET = 1e-10;

/**
 * Prepares motors that hold the bus voltage (settled first) or the power factor at the meter (settled on what is left).
 *
 * @param controls  Of each motor of the meter in this span; the others' controls are passed over.
 * @returns null where no motor holds either
 * @throws {RangeError} when two hold different power factors, or the voltage is held on a bus whose supply is not known
 */
export function holdMotors(ground: HeldGround, controls: readonly FieldControl[]): HeldMotors | null {
  const voltage = controls.flatMap((control, m) => (control.holds === 'voltage' ? [{ m, control }] : []));
  const factor = controls.flatMap((control, m) => (control.holds === 'plant-power-factor' ? [{ m, control }] : []));
  if (voltage.length + factor.length === 0) return null;
  const byVoltage = voltage.length > 0 ? holdVoltage(ground, voltage) : null;
  const byFactor = factor.length > 0 ? holdFactor(ground, factor) : null;
  return {
    settle: (at, state, trace) => {
      byVoltage?.(at, state, trace);
      byFactor?.(at, state, trace);
    },
  };
}

type Settle = HeldMotors['settle'];
type Holding<Control> = { m: number; control: Control }[];

/** Motors together in one state: the order of loading, and what taking them off as they stand changes. */
interface TogetherState {
  dispatch: Dispatch;
  offKw: number;
  offKvar: number;
}

function togetherStates(ground: HeldGround, held: readonly number[]): (state: number) => TogetherState {
  const key = held.join();
  const found = ground.known.get(key) ?? findTogether(ground, held);
  ground.known.set(key, found);
  return found;
}

function findTogether({ motors, parts }: HeldGround, held: readonly number[]): (state: number) => TogetherState {
  const known: TogetherState[] = [];
  const dispatches = new Map<string, Dispatch>();
  return (state) => {
    const found = known[state];
    if (found) return found;
    const supplies = held.map((m) => motors[m]!.supply());
    const levels = held.map((m, h) => supplies[h]!.levelOf[parts[m]![state]!]!);
    const key = levels.join();
    let dispatch = dispatches.get(key);
    if (!dispatch) {
      dispatch = cheapestOrder(levels.map((level, h) => supplies[h]!.curves[level]!));
      dispatches.set(key, dispatch);
    }
    let offKw = 0;
    let offKvar = 0;
    for (const m of held) {
      const k = parts[m]![state]!;
      const { standing, loads } = motors[m]!;
      offKw += (k === 0 ? 0 : loads[k - 1]!) - standing.kw[k]!;
      offKvar -= standing.kvar[k]!;
    }
    return (known[state] = { dispatch, offKw, offKvar });
  };
}

function holdFactor(ground: HeldGround, held: Holding<PlantPowerFactorControl>): Settle {
  const [first, ...others] = held;
  const { powerFactor } = first!.control;
  const other = others.find(({ control }) => control.powerFactor !== powerFactor);
  if (other)
    throw new RangeError(
      `controls must hold one power factor at a meter, got ${powerFactor} and ${other.control.powerFactor}`,
    );
  const target = kvarPerKw(powerFactor);
  const together = togetherStates(
    ground,
    held.map(({ m }) => m),
  );
  const seen = { kw: 0, kvar: 0 };
  const shared = new Float64Array(held.length);
  return (at, state, trace) => {
    const { dispatch, offKw, offKvar } = together(state);
    const { lowKvar, highKvar, lossKw } = dispatch;
    let delivered = Math.min(highKvar, Math.max(lowKvar, 0));
    let asked = delivered;
    for (let round = 0; round < 40; round++) {
      const moreKw = at.moreKw + offKw + lossKw(delivered);
      ground.upstream.seen(at.metered, moreKw, at.moreKvar + offKvar - delivered, seen);
      const gap = seen.kvar - target * seen.kw;
      asked = delivered + gap;
      const next = Math.min(highKvar, Math.max(lowKvar, asked));
      const settled = Math.abs(next - delivered) <= MET * (1 + Math.abs(next));
      delivered = next;
      if (settled) break;
    }
    at.moreKw += offKw + lossKw(delivered);
    at.moreKvar += offKvar - delivered;
    if (!trace) return;
    dispatch.share(delivered, shared);
    const short = Math.abs(asked - delivered) > 1e-6 * (1 + Math.abs(asked));
    held.forEach(({ m }, h) => note(trace, m, at.i, shared[h]!, short && ground.parts[m]![state]! > 0));
  };
}

function holdVoltage(ground: HeldGround, held: Holding<VoltageControl>): Settle {
  const { supply, motors, parts } = ground;
  if (!supply) {
    const names = held.map(({ m }) => motors[m]!.name).join(', ');
    throw new RangeError(
      `${names} must not hold the bus voltage where the supply of its bus is not known: give the short-circuit power of the bus behind the first meter`,
    );
  }
  held.forEach(({ control }) => checkVoltage(control));
  const each = held.map(({ m }) => togetherStates(ground, [m]));
  const shared = new Float64Array(held.length);
  return (at, state, trace) => {
    const states = each.map((of) => of(state));
    const holders = held.map(({ m, control }, h): VoltageHolder => {
      const { lowKvar, highKvar } = states[h]!.dispatch;
      return { ...control, ratedKva: motors[m]!.ratedKva, lowKvar, highKvar };
    });
    const bus = ground.upstream.atBus(at.metered);
    const moreKvar = states.reduce((sum, { offKvar }) => sum + offKvar, at.moreKvar);
    let moreKw = at.moreKw;
    shared.fill(0);
    // Losses move the voltage by a share of a share: two rounds settle them.
    for (let round = 0; round < 3; round++) {
      moreKw = states.reduce((sum, { offKw, dispatch }, h) => sum + offKw + dispatch.lossKw(shared[h]!), at.moreKw);
      const voltagePu = busVoltagePu(supply, { kw: bus.kw + moreKw, kvar: bus.kvar + moreKvar });
      shareByDroop(voltagePu, supply.puPerKvar / supply.noLoadPu, holders, shared);
    }
    at.moreKw = states.reduce((sum, { offKw, dispatch }, h) => sum + offKw + dispatch.lossKw(shared[h]!), at.moreKw);
    at.moreKvar = shared.reduce((sum, delivered) => sum - delivered, moreKvar);
    if (!trace) return;
    held.forEach(({ m }, h) => {
      const { lowKvar, highKvar } = holders[h]!;
      const atEnd = shared[h]! <= lowKvar || shared[h]! >= highKvar;
      note(trace, m, at.i, shared[h]!, atEnd && parts[m]![state]! > 0);
    });
  };
}

function checkVoltage({ setPu, droopPu }: VoltageControl): void {
  if (!(setPu > 0 && setPu <= 2)) throw new RangeError(`setPu must be in (0, 2], got ${setPu}`);
  if (!(droopPu > 0 && droopPu <= 1)) throw new RangeError(`droopPu must be in (0, 1], got ${droopPu}`);
}

function note(trace: HeldTrace, m: number, i: number, delivered: number, limited: boolean): void {
  trace.deliveredKvar[m]![i] = delivered;
  trace.limited[m]![i] = limited ? 1 : 0;
}
