import { formatDelivered, formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

/** A point of the plane: active power of the armature and reactive power, delivered positive. */
export interface PqPoint {
  kw: number;
  kvarDelivered: number;
}

/** Hours of the year in one square of the plane. */
export interface PqSquare extends PqPoint {
  hours: number;
  /** Limits broken there, in words; '' within all. */
  beyond: string;
}

/** The year's operating points at one field setting. */
export interface PqCloud {
  name: string;
  shape: 'circle' | 'diamond';
  /** At the usual load. */
  usual: PqPoint;
  squares: PqSquare[];
}

export interface PqPlaneData {
  motorName: string;
  /** Side of a square. */
  squareKw: number;
  squareKvar: number;
  limits: {
    /** From full delivery over unity power factor to full absorption. */
    armature: PqPoint[];
    /** At the field limit, load ascending. */
    field: PqPoint[];
    fieldBy: string;
    /** At the pull-out margin, load ascending. */
    pullOut: PqPoint[];
    pullOutName: string;
  };
  nameplate: PqPoint;
  usualKw: number;
  usualName: string;
  clouds: PqCloud[];
}

/** Edge of what may be delivered, load ascending: the lesser of field and armature limit. */
export function deliveryEdge({ armature, field }: PqPlaneData['limits']): PqPoint[] {
  const topKw = Math.max(...armature.map((p) => p.kw));
  return field
    .filter((p) => p.kw <= topKw)
    .map((p) => ({ kw: p.kw, kvarDelivered: Math.min(p.kvarDelivered, Math.sqrt(topKw ** 2 - p.kw ** 2)) }));
}

/** Ends of the plane: all limits over the range the clouds and the nameplate lie in. */
export function pqEnds({ limits, clouds, nameplate }: PqPlaneData): {
  absorbed: [number, number];
  kw: [number, number];
} {
  const points = [...clouds.flatMap((cloud) => [cloud.usual, ...cloud.squares]), nameplate];
  const topKw = Math.max(...limits.armature.map((p) => p.kw));
  const most = Math.max(...deliveryEdge(limits).map((p) => p.kvarDelivered), ...points.map((p) => p.kvarDelivered));
  const absorbed = Math.max(0.45 * topKw, ...points.map((p) => -1.25 * p.kvarDelivered));
  return { absorbed: [-1.08 * most, absorbed], kw: [0, 1.02 * Math.max(topKw, ...points.map((p) => p.kw))] };
}

/** The same as a table: hours per square and setting, most hours first. */
export function pqPlaneTable({ clouds, squareKw, squareKvar }: PqPlaneData): LedgerData {
  const rows = clouds.flatMap((cloud) =>
    cloud.squares.map((square) => ({ ...square, setting: cloud.name })).sort((a, b) => b.hours - a.hours),
  );
  return {
    columns: [
      { key: 'setting', head: 'Setting' },
      { key: 'kw', head: `Armature power, by ${formatNumber(squareKw)}`, unit: 'kW', kind: 'number', decimals: 0 },
      { key: 'kvar', head: `Reactive power, by ${formatNumber(squareKvar)}`, unit: 'kvar', align: 'right' },
      { key: 'hours', head: 'Hours of the year', unit: 'h', kind: 'number', decimals: 0, strong: true },
      { key: 'beyond', head: 'Beyond' },
    ],
    rows: rows.map(({ setting, kw, kvarDelivered, hours, beyond }, index) => ({
      id: `${setting}-${index}`,
      cells: { setting, kw, kvar: formatDelivered(kvarDelivered), hours, beyond: beyond || 'none' },
    })),
  };
}
