import { sumLoads } from '../load';
import type { LoadSeries } from '../load';
import type { FieldControl } from '../machine';
import { placeBank } from './banks';
import { simulateMeter } from './meter';
import type { MeterTrace } from './meter';
import { placeMotor, placeReplacement } from './placed-motor';
import type { PlacedMotor } from './placed-motor';
import type { CapacitorBank, PlanSetup, Plant, Replacement } from './types';

/** What a plan builds and when its spans are; the controls of the plant's motors come with each call. */
export type FixedSetup = Omit<PlanSetup, 'controls'>;

/** Simulates many settings of one plant: arrays are reused, loads are solved once per control. */
export interface Simulator {
  /**
   * The load series with the motors under these controls.
   *
   * @param controls  Per motor, in the plant's order: one a span, or one for all.
   * @param changed  The only spans in which controls differ from the previous call; absent: any.
   * @returns A series whose arrays are overwritten by the next call.
   * @throws {PullOutError} naming the motor that would fall out of step
   * @throws {RangeError} naming the control out of range
   */
  apply: (controls: FieldControl[][], changed?: ReadonlySet<number>) => LoadSeries;
  /** The same with what happened in each interval. `first` is the first meter's own series. */
  trace: (controls: FieldControl[][]) => { load: LoadSeries; first: LoadSeries; trace: SimulationTrace };
  /** Motors of the plant, then those of replacements. */
  placed: readonly PlacedMotor[];
  notes: string[];
}

/** What happened in each interval. */
export interface SimulationTrace {
  /** Per motor, those of replacements after the plant's: delivered where it is answered interval by interval. [kvar] */
  deliveredKvar: Float64Array[];
  limited: Uint8Array[];
  /** Per bank: steps connected. */
  bankSteps: Uint16Array[];
}

/**
 * Prepares the simulation of a plan on metered load.
 *
 * Reactive energy changes by what motors and capacitors take beyond standing (registers by `shiftRegisters`), active energy by
 * the change in losses. A missing interval stays missing. Where a meter has no leading register (NaN throughout) it counts as
 * zero, and a note says so. Of several meters each has its own registers changed by what stands behind it; the sum is priced.
 * Upstream and supply are those of the first meter.
 *
 * @param plant  Load, motors as they stand, and what lies between meter and bus.
 * @param fixed  Spans, banks and replacements, the same in every call.
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when a motor's standing field does not hold its load
 */
export function createSimulator(plant: Plant, fixed: FixedSetup = {}): Simulator {
  const loads = [plant.load, ...(plant.beside ?? [])];
  const count = plant.load.kwh.length;
  const { spans, banks = [], replacements = [] } = fixed;
  checkSpans(fixed, count);
  const placed = [
    ...plant.motors.map((motor, m) => placeMotor(motor, count, `motors[${m}]`)),
    ...replacements.map((one, r) => placeReplacement(one, count, `replacements[${r}]`)),
  ];
  const motorsBy = placesBy(placed, loads.length, (at) => placed[at]!.name);
  const banksBy = placesBy(banks, loads.length, (at) => `banks[${at}]`);
  const meters = loads.map((load, meter) =>
    simulateMeter({
      load,
      motors: motorsBy[meter]!.map((at) => placed[at]!),
      banks: banksBy[meter]!.map((at) => placeBank(banks[at]!, load, `banks[${at}]`)),
      spans,
      ...(meter === 0 ? { upstream: plant.upstream, supply: plant.supply } : {}),
    }),
  );
  let hasRun = false;
  const run = (
    controls: FieldControl[][],
    { trace, changed }: { trace?: SimulationTrace; changed?: ReadonlySet<number> },
  ): LoadSeries[] => {
    const all = withReplacements(controls, replacements, plant.motors.length, spans?.count ?? 1);
    hasRun = true;
    return meters.map((meter, at) => {
      const own = motorsBy[at]!;
      const ofOwn = own.map((m) => all[m]!);
      return meter.apply(ofOwn, { changed, trace: trace && traceOf(trace, own, banksBy[at]!) });
    });
  };
  return {
    apply: (controls, changed) => sumLoads(run(controls, { changed: hasRun ? changed : undefined })),
    trace: (controls) => {
      const trace = emptyTrace(placed.length, banks, count);
      const series = run(controls, { trace });
      return { load: sumLoads(series), first: series[0]!, trace };
    },
    placed,
    notes: [...new Set(meters.flatMap(({ notes }) => notes))],
  };
}

/** What stands behind each meter, by place. */
function placesBy(
  things: readonly Pick<CapacitorBank, 'behind'>[],
  meters: number,
  nameOf: (at: number) => string,
): number[][] {
  const places = Array.from({ length: meters }, (): number[] => []);
  things.forEach(({ behind = 0 }, at) => {
    if (!Number.isInteger(behind) || behind < 0 || behind >= meters)
      throw new RangeError(`${nameOf(at)}.behind must name one of ${meters} meters from 0, got ${behind}`);
    places[behind]!.push(at);
  });
  return places;
}

function checkSpans({ spans }: FixedSetup, count: number): void {
  if (!spans) return;
  if (spans.index.length !== count)
    throw new RangeError(`spans.index must have ${count} values like the load series, got ${spans.index.length}`);
  const beyond = spans.index.find((span) => span >= spans.count);
  if (beyond !== undefined) throw new RangeError(`spans.index must be below ${spans.count}, got ${beyond}`);
}

/** Controls of the plant's motors and of the replacements, each one for all spans or one a span. */
function withReplacements(
  controls: FieldControl[][],
  replacements: readonly Replacement[],
  motors: number,
  spans: number,
): FieldControl[][] {
  if (controls.length !== motors)
    throw new RangeError(`controls must have ${motors} lists, one a motor, got ${controls.length}`);
  const all = [...controls, ...replacements.map((one) => one.controls)];
  all.forEach((own, m) => {
    if (own.length !== 1 && own.length !== spans) {
      const name = m < motors ? `controls[${m}]` : `replacements[${m - motors}].controls`;
      throw new RangeError(`${name} must have 1 or ${spans} controls, got ${own.length}`);
    }
  });
  return all;
}

function emptyTrace(motors: number, banks: readonly CapacitorBank[], count: number): SimulationTrace {
  return {
    deliveredKvar: Array.from({ length: motors }, () => new Float64Array(count)),
    limited: Array.from({ length: motors }, () => new Uint8Array(count)),
    bankSteps: banks.map(() => new Uint16Array(count)),
  };
}

function traceOf(trace: SimulationTrace, motors: number[], banks: number[]): MeterTrace {
  return {
    deliveredKvar: motors.map((m) => trace.deliveredKvar[m]!),
    limited: motors.map((m) => trace.limited[m]!),
    bankSteps: banks.map((b) => trace.bankSteps[b]!),
  };
}
