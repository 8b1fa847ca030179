import type { LedgerData } from '../ui/ledger';
import { valueAt } from './scale';

/** One point of the cumulative cash: years after the work is done, money in major units. */
export interface PaybackPoint {
  year: number;
  cumulative: number;
  /** One in ten samples lies below, one in ten above. Both or neither. */
  p10?: number;
  p90?: number;
  /** The same with the reader's own figures. */
  yours?: number;
}

export interface PaybackData {
  currency: string;
  /** Paid once at year 0, major units. */
  capitalCost: number;
  /** Received at year 0. */
  incentive?: number;
  points: PaybackPoint[];
  /** Years that are drawn; the table holds all points. Absent: all. */
  shownYears?: number;
  paybackYears: number | null;
  /** Eight in ten samples pay back between these. */
  paybackRange?: { fromYears: number; toYears: number } | null;
  /** "edition 2". */
  editionName: string;
  /** Where the reader's own line crosses nought. */
  yoursPaybackYears?: number | null;
  /** Words at the end of the reader's own line. */
  yoursName?: string;
}

/** Year of a point, for reading between points. */
export const byYear = (p: PaybackPoint) => p.year;
const cumulative = (p: PaybackPoint) => p.cumulative;

/** The years worth drawing of a horizon: three times the payback, three at least. */
export const yearsWorthDrawing = (paybackYears: number | null, horizonYears: number) =>
  Math.min(horizonYears, Math.max(3, Math.ceil((paybackYears ?? horizonYears) * 3)));

/** The part of the data that is drawn. */
export function drawnPart(data: PaybackData): PaybackData {
  const { shownYears } = data;
  return shownYears === undefined ? data : { ...data, points: data.points.filter((p) => p.year <= shownYears) };
}

/** Rows with the band as a pair and the line split where it crosses nought: ink below, verdigris above. */
export function chartRows(data: PaybackData, divisor: number) {
  const crossing = data.paybackYears;
  const points = [...data.points];
  if (crossing !== null && !points.some((p) => p.year === crossing)) {
    const at = (get: (p: PaybackPoint) => number | undefined) =>
      valueAt(data.points, crossing, byYear, (p) => get(p) ?? NaN);
    const optional = (get: (p: PaybackPoint) => number | undefined) => {
      const found = at(get);
      return found === null || Number.isNaN(found) ? undefined : found;
    };
    points.push({
      year: crossing,
      cumulative: at(cumulative) ?? 0,
      p10: optional((p) => p.p10),
      p90: optional((p) => p.p90),
      yours: optional((p) => p.yours),
    });
    points.sort((a, b) => a.year - b.year);
  }
  const scaled = (value: number | undefined) => (value === undefined ? undefined : value / divisor);
  return points.map((p) => ({
    year: p.year,
    before: crossing === null || p.year <= crossing ? p.cumulative / divisor : undefined,
    after: crossing !== null && p.year >= crossing ? p.cumulative / divisor : undefined,
    band: p.p10 !== undefined && p.p90 !== undefined ? [p.p10 / divisor, p.p90 / divisor] : undefined,
    p10: scaled(p.p10),
    p90: scaled(p.p90),
    yours: scaled(p.yours),
  }));
}

/** The same as a table: whole years only, last point included. */
export function paybackTable(data: PaybackData): LedgerData {
  const places = { kind: 'number', decimals: 0, unit: data.currency } as const;
  const has = (key: 'p10' | 'p90' | 'yours') => data.points.some((p) => p[key] !== undefined);
  return {
    columns: [
      { key: 'year', head: 'After year', kind: 'number', align: 'left' },
      ...(has('p10') ? [{ key: 'p10', head: '1 in 10 below', ...places }] : []),
      { key: 'cumulative', head: `So far, ${data.editionName}`, ...places, strong: true },
      ...(has('p90') ? [{ key: 'p90', head: '1 in 10 above', ...places }] : []),
      ...(has('yours') ? [{ key: 'yours', head: data.yoursName ?? 'Your figures', ...places }] : []),
    ],
    rows: data.points
      .filter((p, index) => Number.isInteger(p.year) || index === data.points.length - 1)
      .map((p) => ({ id: String(p.year), cells: { ...p, year: p.year } })),
  };
}
