import { assertLoadSeries } from '../load';
import type { LoadSeries } from '../load';
import type { FieldControl, OwnFieldControl } from '../machine';
import { stepsFor } from './banks';
import type { PlacedBank } from './banks';
import { jointStates } from './distinct-loads';
import { holdMotors } from './held-motors';
import type { HeldGround, HeldMotors, HeldTrace, IntervalAtWork } from './held-motors';
import type { PlacedMotor } from './placed-motor';
import { laggingShare, shiftRegisters } from './registers';
import { supplyImpedance } from './supply';
import type { BusSupply, Spans, Upstream } from './types';
import { noUpstream, upstreamLosses } from './upstream';
import type { MeteredPower } from './upstream';

/** One meter with what stands behind it. */
export interface MeteredPart {
  load: LoadSeries;
  motors: PlacedMotor[];
  banks: PlacedBank[];
  spans?: Spans;
  upstream?: Upstream;
  supply?: BusSupply;
}

/** What happened behind a meter in each interval. */
export interface MeterTrace extends HeldTrace {
  /** Steps connected of each bank. uint16[intervals] */
  bankSteps: Uint16Array[];
}

/** A meter ready for any controls of its motors. */
export interface SimulatedMeter {
  /**
   * Controls per motor: one a span, or one for all. The arrays of the result are overwritten by the next call. `changed`: the only
   * spans in which controls differ from the previous call.
   */
  apply: (controls: FieldControl[][], how?: { trace?: MeterTrace; changed?: ReadonlySet<number> }) => LoadSeries;
  notes: string[];
}

/** Lays what stands behind a meter over its intervals. @throws {RangeError} naming the argument out of range */
export function simulateMeter(part: MeteredPart): SimulatedMeter {
  assertLoadSeries(part.load);
  const { load, notes } = withBothRegisters(part.load);
  const count = load.kwh.length;
  const spanIndex = part.spans?.index ?? new Uint8Array(count);
  const states = jointStates([...part.motors.map(({ index }) => index), spanIndex], count);
  const parts = states.parts.slice(0, -1);
  const work: MeterWork = {
    ...part,
    load,
    hours: load.stepMinutes / 60,
    shares: load.kvarhLagging.map((lagging, i) => laggingShare(lagging, load.kvarhLeading[i]!)),
    state: states.state,
    parts,
    spanOf: states.parts.at(-1)!,
    runs: runsOf(spanIndex),
    moreKw: new Float64Array(states.count),
    moreKvar: new Float64Array(states.count),
    fixed: fixedBanks(part.banks, count),
    switched: part.banks.flatMap((bank, at) => (bank.target === null ? [] : [{ bank, at }])),
    ground: {
      motors: part.motors,
      parts,
      upstream: part.upstream ? upstreamLosses(part.upstream) : noUpstream,
      supply: part.supply ? supplyImpedance(part.supply) : null,
      known: new Map(),
    },
    out: {
      ...load,
      kwh: new Float64Array(count),
      kvarhLagging: new Float64Array(count),
      kvarhLeading: new Float64Array(count),
      quality: load.quality.slice(),
    },
  };
  return { apply: (controls, how = {}) => applyControls(work, controls, how), notes };
}

interface MeterWork extends MeteredPart {
  hours: number;
  /** Share of a change that the lagging register takes. */
  shares: Float64Array;
  state: Uint32Array;
  parts: Uint32Array[];
  spanOf: Uint32Array;
  /** Successive intervals of one span. */
  runs: { span: number; first: number; end: number }[];
  /** What the motors take beyond standing in each state, at work. */
  moreKw: Float64Array;
  moreKvar: Float64Array;
  fixed: { kw: Float64Array; kvar: Float64Array } | null;
  switched: { bank: PlacedBank; at: number }[];
  ground: HeldGround;
  out: LoadSeries;
}

const isOwn = (control: FieldControl): control is OwnFieldControl =>
  control.holds !== 'voltage' && control.holds !== 'plant-power-factor';

function applyControls(
  work: MeterWork,
  controls: FieldControl[][],
  { trace, changed }: { trace?: MeterTrace; changed?: ReadonlySet<number> },
): LoadSeries {
  work.moreKw.fill(0);
  work.moreKvar.fill(0);
  work.motors.forEach((motor, m) => addMotor(work, motor, m, controls[m]!));
  const held = heldBySpan(work, controls);
  const isUsual = held.every((one) => one === null) && work.switched.length === 0 && !work.upstream;
  for (const { span, first, end } of work.runs) {
    if (changed && !changed.has(span)) continue;
    if (isUsual) shiftRun(work, first, end);
    else settleRun(work, held, { first, end }, trace ?? null);
  }
  if (trace) work.banks.forEach((bank, b) => bank.target === null && trace.bankSteps[b]!.fill(bank.steps, bank.first));
  return work.out;
}

function runsOf(index: Uint8Array): MeterWork['runs'] {
  const runs: MeterWork['runs'] = [];
  index.forEach((span, i) => {
    const last = runs.at(-1);
    if (last?.span === span) last.end = i + 1;
    else runs.push({ span, first: i, end: i + 1 });
  });
  return runs;
}

/** Adds what a motor takes beyond standing under controls of its own. */
function addMotor(
  { moreKw, moreKvar, parts, spanOf }: MeterWork,
  motor: PlacedMotor,
  m: number,
  controls: FieldControl[],
): void {
  const part = parts[m]!;
  controls.forEach((control, span) => {
    const change = isOwn(control) ? motor.changeFor(control) : null;
    if (!change) return;
    const { kw, kvar } = change;
    const isAlone = controls.length === 1;
    for (let s = 0; s < part.length; s++) {
      if (!isAlone && spanOf[s] !== span) continue;
      const k = part[s]!;
      moreKw[s]! += kw[k]!;
      moreKvar[s]! += kvar[k]!;
    }
  });
}

function heldBySpan({ ground }: MeterWork, controls: FieldControl[][]): (HeldMotors | null)[] {
  const spans = Math.max(1, ...controls.map((own) => own.length));
  return Array.from({ length: spans }, (_, span) =>
    holdMotors(
      ground,
      controls.map((own) => own[own.length === 1 ? 0 : span]!),
    ),
  );
}

/** The usual case by itself: nothing hangs on what the meter sees. */
function shiftRun(
  { load, state, shares, moreKw, moreKvar, fixed, hours, out }: MeterWork,
  first: number,
  end: number,
): void {
  const { kwh, kvarhLagging, kvarhLeading } = load;
  const { kwh: outKwh, kvarhLagging: outLagging, kvarhLeading: outLeading } = out;
  for (let i = first; i < end; i++) {
    const s = state[i]!;
    const kw = fixed === null ? moreKw[s]! : moreKw[s]! + fixed.kw[i]!;
    const kvar = fixed === null ? moreKvar[s]! : moreKvar[s]! + fixed.kvar[i]!;
    const share = shares[i]!;
    const e = kvar * hours;
    const a = kvarhLagging[i]! + share * e;
    const b = kvarhLeading[i]! - (1 - share) * e;
    outKwh[i] = kwh[i]! + kw * hours;
    outLagging[i] = Math.max(a, 0) + Math.max(-b, 0);
    outLeading[i] = Math.max(b, 0) + Math.max(-a, 0);
  }
}

/** Interval by interval: motors that hold voltage or power factor, then switched banks, then the losses upstream. */
function settleRun(
  work: MeterWork,
  held: (HeldMotors | null)[],
  { first, end }: { first: number; end: number },
  trace: MeterTrace | null,
): void {
  const { load, state, spanOf, fixed, hours, ground, out } = work;
  const metered = { kw: 0, kvar: 0 };
  const seen = { kw: 0, kvar: 0 };
  const at: IntervalAtWork = { i: 0, metered, moreKw: 0, moreKvar: 0 };
  for (let i = first; i < end; i++) {
    const s = state[i]!;
    metered.kw = load.kwh[i]! / hours;
    metered.kvar = (load.kvarhLagging[i]! - load.kvarhLeading[i]!) / hours;
    at.i = i;
    at.moreKw = work.moreKw[s]! + (fixed?.kw[i] ?? 0);
    at.moreKvar = work.moreKvar[s]! + (fixed?.kvar[i] ?? 0);
    if (!Number.isNaN(metered.kw + metered.kvar)) {
      held[held.length === 1 ? 0 : spanOf[s]!]?.settle(at, s, trace);
      switchBanks(work, at, seen, trace);
    }
    ground.upstream.seen(metered, at.moreKw, at.moreKvar, seen);
    const after = shiftRegisters(load.kvarhLagging[i]!, load.kvarhLeading[i]!, (seen.kvar - metered.kvar) * hours);
    out.kvarhLagging[i] = after.kvarhLagging;
    out.kvarhLeading[i] = after.kvarhLeading;
    out.kwh[i] = load.kwh[i]! + (seen.kw - metered.kw) * hours;
  }
}

function switchBanks(
  { switched, ground }: MeterWork,
  at: IntervalAtWork,
  seen: MeteredPower,
  trace: MeterTrace | null,
): void {
  for (const { bank, at: place } of switched) {
    if (at.i < bank.first) continue;
    ground.upstream.seen(at.metered, at.moreKw, at.moreKvar, seen);
    const steps = stepsFor(bank, seen.kw, seen.kvar);
    at.moreKw += steps * bank.stepKw;
    at.moreKvar -= steps * bank.stepKvar;
    if (trace) trace.bankSteps[place]![at.i] = steps;
  }
}

function fixedBanks(banks: PlacedBank[], count: number): MeterWork['fixed'] {
  const always = banks.filter(({ target }) => target === null);
  if (always.length === 0) return null;
  const kw = new Float64Array(count);
  const kvar = new Float64Array(count);
  for (const { steps, stepKw, stepKvar, first } of always) {
    for (let i = first; i < count; i++) {
      kw[i]! += steps * stepKw;
      kvar[i]! -= steps * stepKvar;
    }
  }
  return { kw, kvar };
}

/** The load with an absent leading register taken as zero, and a note if so. */
export function withBothRegisters(load: LoadSeries): { load: LoadSeries; notes: string[] } {
  const absent = (channel: Float64Array) => channel.length > 0 && channel.every((value) => Number.isNaN(value));
  if (absent(load.kvarhLagging) || !absent(load.kvarhLeading)) return { load, notes: [] };
  const kvarhLeading = load.kvarhLagging.map((lagging) => (Number.isNaN(lagging) ? NaN : 0));
  return {
    load: { ...load, kvarhLeading },
    notes: ['The meter has no leading register: leading energy as metered is taken as zero.'],
  };
}
