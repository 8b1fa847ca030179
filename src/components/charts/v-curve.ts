import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { niceTicks, tickDecimals, valueAt } from './scale';

/** A point of the plane: amperes of field, as the motor's ammeter shows them, and of armature. */
export interface CurrentPoint {
  fieldA: number;
  armatureA: number;
}

export interface VCurve {
  /** Shaft load, per cent of rated. */
  loadPercent: number;
  /** In order of field current. */
  points: (CurrentPoint & { leading: boolean })[];
}

export interface VCurveData {
  motorName: string;
  /** "Field current", or "Exciter field current" of a brushless machine. */
  fieldName?: string;
  /** Decimals of its amperes in words; 1 when absent. */
  fieldDecimals?: number;
  curves: VCurve[];
  /** Unity power factor over the loads, from no load upward. */
  unity: CurrentPoint[];
  /** Drawn stronger. */
  usualLoadPercent?: number;
  limits: {
    armatureA: number;
    fieldA: number;
    /** What ends there: "field", or "exciter". */
    fieldBy?: string;
    /** Least field that regulator or maker allow. */
    leastFieldA?: number;
    /** Least admissible field over the loads; the ground above and left of it is hatched. */
    pullOut?: CurrentPoint[];
    /** "pull-out below 1.5". */
    pullOutName?: string;
  };
  today?: CurrentPoint | null;
  plan?: CurrentPoint | null;
  planName?: string;
  nameplate?: CurrentPoint | null;
}

/** Ends of both axes. */
export function vCurveEnds(data: VCurveData): { field: [number, number]; armature: [number, number] } {
  const fields = data.curves.flatMap((curve) => curve.points.map((p) => p.fieldA));
  const most = Math.max(...fields, data.limits.fieldA * 1.1);
  const unit = most > 20 ? 1 : 0.1;
  return {
    field: [Math.floor(Math.min(...fields) / unit) * unit, Math.ceil(most / unit) * unit],
    armature: [0, Math.ceil(data.limits.armatureA * 1.2)],
  };
}

/** The same as a table: a line per field current, a column per load; beyond a curve's ends the cell is empty. */
export function vCurveTable(data: VCurveData): LedgerData {
  const fields = data.curves.flatMap((curve) => curve.points.map((p) => p.fieldA));
  const steps = niceTicks(Math.min(...fields), Math.max(...fields), 16);
  const armature = (curve: VCurve, fieldA: number) =>
    valueAt(
      curve.points,
      fieldA,
      (p) => p.fieldA,
      (p) => p.armatureA,
    );
  return {
    columns: [
      {
        key: 'field',
        head: data.fieldName ?? 'Field current',
        unit: 'A',
        kind: 'number',
        decimals: tickDecimals(steps),
        align: 'left',
      },
      ...data.curves.map((curve) => ({
        key: `load-${curve.loadPercent}`,
        head: `${formatNumber(curve.loadPercent)} % load`,
        unit: 'A',
        kind: 'number' as const,
        decimals: 1,
        strong: curve.loadPercent === data.usualLoadPercent,
      })),
    ],
    rows: steps.map((fieldA) => ({
      id: String(fieldA),
      cells: {
        field: fieldA,
        ...Object.fromEntries(data.curves.map((curve) => [`load-${curve.loadPercent}`, armature(curve, fieldA)])),
      },
    })),
  };
}
