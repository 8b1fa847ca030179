import type { LoadSeries } from '../load';
import { fieldCurrentAtPanelA, panelCurrentA } from '../machine';
import { fieldBounds } from './field-bounds';
import type { FieldBounds } from './field-bounds';
import { createCostTable } from './search-cost';
import type { CostTable } from './search-cost';
import { descend, startsFrom } from './search-steps';
import { createSimulator } from './simulator';
import type { CapacitorStep, PlanMotor, Plant } from './types';

/** A motor whose field is searched. */
export interface SearchMotor extends PlanMotor {
  /** Step an operator can set, as the panel shows it; 1 A when absent. [A], > 0 */
  stepA?: number;
  /** Narrower range than the motor's limits, of the panel. [A] */
  panelLowA?: number;
  panelHighA?: number;
}

/** How far the search is. `planned` counts what is priced and what is certain to be: it grows while better settings are found. */
export interface SearchProgress {
  priced: number;
  planned: number;
  bestCost: number;
}

/** One point of the cost along a motor's field, the other motors at their best. */
export interface CostPoint {
  fieldCurrentA: number;
  panelA: number;
  cost: number;
}

export interface SearchResult {
  /** Best field current per motor, the standing one where leaving it alone is best. [A] */
  fieldsA: number[];
  /** The same as the panel shows it. [A] */
  panelsA: number[];
  cost: number;
  standingCost: number;
  /** Bill totals, period by period, at the best setting and standing. */
  totals: Float64Array;
  standingTotals: Float64Array;
  /** True when no setting is cheaper than leaving the fields alone. */
  leaveAlone: boolean;
  curves: CostPoint[][];
  bounds: (FieldBounds | null)[];
  priced: number;
  /** Every combination of settings was priced: the result is the best there is at this step. */
  exhaustive: boolean;
  cancelled: boolean;
  notes: string[];
}

/** Differences of cost below this are none. [currency] */
const SAME_COST = 0.005;

/**
 * Finds the constant field current per motor that makes the year's bills least.
 *
 * Bills are jagged in the settings (ratchets, cliffs, steps), so no slope is used: a coarse grid over all motors, then from its
 * best points each motor in turn over its whole range until nothing improves, then every neighbour of the best; found better,
 * the descent begins again. The same input gives the same result. Settings keep every limit at every load the motor runs at;
 * leaving the fields alone is a candidate and wins a tie.
 *
 * @param input.plant  Load, motors with their step, and what lies between meter and bus.
 * @param input.capacitors  Steps connected besides, in every candidate but standing.
 * @param input.totals  Bill totals of a load series, period by period. [currency]
 * @param input.onProgress  Called after every candidate; returning false ends the search with the best so far.
 * @param input.exhaustiveUpTo  Price every combination when there are no more than this; 2000 when absent.
 * @returns Best setting with its cost, cost curves, bounds and notes.
 * @throws {RangeError} naming the argument out of range
 * @throws {PullOutError} when a standing field does not hold its load
 */
export function searchFields(input: {
  plant: Plant & { motors: SearchMotor[] };
  capacitors?: CapacitorStep[];
  totals: (load: LoadSeries) => Float64Array;
  onProgress?: (progress: SearchProgress) => boolean | void;
  exhaustiveUpTo?: number;
}): SearchResult {
  const { plant, capacitors = [], totals, onProgress, exhaustiveUpTo = 2000 } = input;
  const notes: string[] = [];
  const standing = plant.motors.map((m) => m.standingFieldA);
  const standingSimulator = createSimulator(plant);
  const standingTotals = Float64Array.from(totals(standingSimulator.apply(standing)));
  const simulator = capacitors.length > 0 ? createSimulator(plant, capacitors) : standingSimulator;
  const axes = plant.motors.map((motor, m) => axisOf(motor, m, notes));
  const settings = axes.map((axis) => axis.settings);
  const costs = createCostTable(settings, (fieldsA) => totals(simulator.apply(fieldsA)), onProgress);
  const exhaustive = explore(costs, axes, exhaustiveUpTo);
  const winner = pickWinner(costs, axes, standing);
  const fieldsA = winner.at.map((k, m) => settings[m]![k]!);
  const winnerTotals = Float64Array.from(totals(simulator.apply(fieldsA)));
  return {
    fieldsA,
    panelsA: fieldsA.map((fieldA, m) => panelCurrentA(plant.motors[m]!.motor, fieldA)),
    cost: sum(winnerTotals),
    standingCost: sum(standingTotals),
    totals: winnerTotals,
    standingTotals,
    leaveAlone: fieldsA.every((fieldA, m) => fieldA === standing[m]),
    curves: costs.cancelled() ? [] : curvesAt(costs, winner.at, settings, plant.motors),
    bounds: axes.map((axis) => axis.bounds),
    priced: costs.priced(),
    exhaustive,
    cancelled: costs.cancelled(),
    notes: [...notes, ...simulator.notes],
  };
}

interface Axis {
  /** Field currents, ascending, the standing one among them. [A] */
  settings: number[];
  bounds: FieldBounds | null;
  /** Index of the standing field; whether it keeps the limits. */
  standing: number;
  standingAdmissible: boolean;
}

/** Settings of one motor: multiples of its step within bounds, and the standing field. */
function axisOf(motor: SearchMotor, m: number, notes: string[]): Axis {
  const stepA = motor.stepA ?? 1;
  if (!(stepA > 0 && Number.isFinite(stepA))) throw new RangeError(`motors[${m}].stepA must be > 0, got ${stepA}`);
  const found = fieldBounds(motor);
  const only = { settings: [motor.standingFieldA], standing: 0, standingAdmissible: true };
  if ('none' in found) {
    const { limit, shaftKw } = found.none;
    notes.push(
      `Motor ${m + 1} has no admissible field at ${shaftKw.toFixed(1)} kW (${limit}): its field is left alone.`,
    );
    return { ...only, bounds: null };
  }
  const lowPanelA = Math.max(panelCurrentA(motor.motor, found.lowA), motor.panelLowA ?? -Infinity);
  const highPanelA = Math.min(panelCurrentA(motor.motor, found.highA), motor.panelHighA ?? Infinity);
  const fields = new Set<number>([motor.standingFieldA]);
  for (let k = Math.ceil(lowPanelA / stepA - 1e-9); k * stepA <= highPanelA + 1e-9 * stepA; k++) {
    fields.add(fieldCurrentAtPanelA(motor.motor, k * stepA));
  }
  const standingAdmissible =
    motor.standingFieldA >= found.lowA * (1 - 1e-9) && motor.standingFieldA <= found.highA * (1 + 1e-9);
  if (!standingAdmissible) {
    notes.push(
      `Motor ${m + 1} stands at ${motor.standingFieldA} A, outside its limits of ${found.lowA.toFixed(1)} to ${found.highA.toFixed(1)} A: ` +
        (fields.size > 1
          ? 'leaving it alone is not offered.'
          : 'no step lies within them and the range given, so its field is left alone.'),
    );
  }
  const settings = [...fields].sort((a, b) => a - b);
  return { settings, bounds: found, standing: settings.indexOf(motor.standingFieldA), standingAdmissible };
}

function explore(costs: CostTable, axes: Axis[], exhaustiveUpTo: number): boolean {
  const settings = axes.map((axis) => axis.settings);
  const alone = axes.map((axis) => axis.standing);
  // Priced first: a search cancelled at once never answers with something dearer than leaving the fields alone.
  costs.cost(alone);
  const combinations = settings.reduce((product, axis) => product * axis.length, 1);
  if (combinations <= exhaustiveUpTo) {
    return costs.priceAll();
  }
  for (const start of [...startsFrom(costs, settings), alone]) descend(costs, settings, start);
  return false;
}

/** The cheapest admissible setting; leaving every field alone wins within half a cent, then the least change of fields. */
function pickWinner(costs: CostTable, axes: Axis[], standing: number[]): { at: number[] } {
  const admissible = costs
    .all()
    .filter(({ at }) => at.every((k, m) => k !== axes[m]!.standing || axes[m]!.standingAdmissible));
  const alone = axes.map((axis) => axis.standing);
  if (admissible.length === 0) return { at: alone };
  const least = Math.min(...admissible.map(({ cost }) => cost));
  const moved = (at: number[]) =>
    at.reduce((total, k, m) => {
      const { settings } = axes[m]!;
      return total + Math.abs(settings[k]! - standing[m]!) / (settings[settings.length - 1]! || 1);
    }, 0);
  return admissible
    .filter(({ cost }) => cost <= least + SAME_COST)
    .reduce((a, b) => (moved(b.at) < moved(a.at) - 1e-12 ? b : a));
}

function curvesAt(costs: CostTable, at: number[], settings: number[][], motors: SearchMotor[]): CostPoint[][] {
  return settings.map((axis, m) =>
    axis.map((fieldCurrentA, k) => ({
      fieldCurrentA,
      panelA: panelCurrentA(motors[m]!.motor, fieldCurrentA),
      cost: costs.cost(at.map((own, other) => (other === m ? k : own))),
    })),
  );
}

function sum(values: Float64Array): number {
  return values.reduce((total, value) => total + value, 0);
}
