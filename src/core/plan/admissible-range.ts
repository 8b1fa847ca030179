import { capability, fixField, leastField, leastLossWithin, operatingPoint, ratedKva } from '../machine';
import type { PlanMotor } from './types';

/** What a motor could change against standing at each of its loads if its field were free there. */
export interface AdmissibleRange {
  /** Least and greatest change of reactive power absorbed. [kvar], one per load */
  leastKvar: Float64Array;
  greatestKvar: Float64Array;
  /** Least change of input power. [kW] */
  leastKw: Float64Array;
}

/** Loads solved; where a motor runs at more, the figures between are straight lines widened by a margin. */
const SOLVED = 512;

/** Margin on figures between solved loads, as a share of rated kVA. */
const MARGIN = 1e-4;

/**
 * Range of what a motor may take at each load with any admissible field, standing included, against standing.
 *
 * @param planMotor  The motor as it stands.
 * @param loads  Distinct loads, ascending. [kW]
 */
export function admissibleRange(planMotor: PlanMotor, loads: Float64Array): AdmissibleRange {
  const many = loads.length > SOLVED;
  const nodes = many
    ? Float64Array.from(
        { length: SOLVED },
        (_, k) => loads[0]! + ((loads[loads.length - 1]! - loads[0]!) * k) / (SOLVED - 1),
      )
    : loads;
  const solved = [...nodes].map((shaftKw) => rangeAt(planMotor, shaftKw));
  const margin = many ? MARGIN * ratedKva(planMotor.motor) : 0;
  const figure = (pick: (range: Range) => number, widen: number) =>
    loads.map((kw, k) => (many ? between(nodes, solved.map(pick), kw) : pick(solved[k]!)) + widen);
  return {
    leastKvar: figure((r) => r.leastKvar, -margin),
    greatestKvar: figure((r) => r.greatestKvar, margin),
    leastKw: figure((r) => r.leastKw, -margin),
  };
}

interface Range {
  leastKvar: number;
  greatestKvar: number;
  leastKw: number;
}

function rangeAt({ motor, standingFieldA, voltagePu }: PlanMotor, shaftKw: number): Range {
  const standing = fixField(motor, { fieldCurrentA: standingFieldA, voltagePu }).taken(shaftKw);
  const most = capability(motor, { shaftKw, voltagePu });
  const low = leastField(motor, { shaftKw, voltagePu });
  if (most.kvarDelivered === null || !low) return { leastKvar: 0, greatestKvar: 0, leastKw: 0 };
  const lagging = operatingPoint(motor, { shaftKw, voltagePu, fieldCurrentA: low.fieldCurrentA }).kvar;
  const least = leastLossWithin(motor, { shaftKw, voltagePu, fromKvar: -most.kvarDelivered, toKvar: lagging });
  return {
    leastKvar: Math.min(0, -most.kvarDelivered - standing.kvar),
    greatestKvar: Math.max(0, lagging - standing.kvar),
    leastKw: Math.min(0, least.inputKw - standing.inputKw),
  };
}

function between(nodes: Float64Array, values: number[], kw: number): number {
  const place = ((kw - nodes[0]!) / (nodes[nodes.length - 1]! - nodes[0]!)) * (nodes.length - 1);
  const k = Math.min(nodes.length - 2, Math.floor(place));
  return values[k]! + (place - k) * (values[k + 1]! - values[k]!);
}
