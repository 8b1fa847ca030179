import { formatDelivered } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { valueAt } from './scale';

export type BindingLimit = 'armature' | 'field' | 'pull-out';

export interface KvarPoint {
  loadPercent: number;
  /** Delivered positive, absorbed negative. */
  kvarDelivered: number;
}

export interface LimitPoint extends KvarPoint {
  binding: BindingLimit | 'least-field';
}

/** What a motor delivers over its load while one thing is held. */
export interface ControlLine {
  /** "held 164 A". */
  name: string;
  points: KvarPoint[];
  /** Dashes of its line; none: drawn through. */
  dash?: string;
  /** The setting being tried, drawn stronger. */
  strong?: boolean;
}

export interface FieldControlData {
  motorName: string;
  /** Shaft loads of the picture, per cent of rated, ascending. */
  loadPercents: number[];
  /** Most and least it may deliver; loads at which nothing is admissible are left out. */
  most: LimitPoint[];
  least: LimitPoint[];
  /** What ends at the field's limit: "field" or "exciter". */
  fieldBy: string;
  lines: ControlLine[];
  usualLoadPercent: number;
  marks: { name: string; shape: 'circle' | 'diamond'; kvarDelivered: number }[];
}

export const limitNames = (fieldBy: string): Record<LimitPoint['binding'], string> => ({
  armature: 'stator',
  field: fieldBy,
  'pull-out': 'pull-out',
  'least-field': 'least field',
});

/** Stretches of a limit with one cause each, sharing their ends. */
export function stretches(points: LimitPoint[]): { binding: LimitPoint['binding']; points: LimitPoint[] }[] {
  const found: { binding: LimitPoint['binding']; points: LimitPoint[] }[] = [];
  for (const point of points) {
    const current = found.at(-1);
    if (current && current.binding === point.binding) current.points.push(point);
    else {
      current?.points.push(point);
      found.push({ binding: point.binding, points: [point] });
    }
  }
  return found;
}

export const kvarAt = (points: KvarPoint[], loadPercent: number) =>
  valueAt(
    points,
    loadPercent,
    (p) => p.loadPercent,
    (p) => p.kvarDelivered,
  );

/** The same as a table: a line per load, in words instead of signs. */
export function fieldControlTable(data: FieldControlData): LedgerData {
  const names = limitNames(data.fieldBy);
  const inWords = (value: number | null) => (value === null ? 'cannot run' : formatDelivered(value));
  return {
    columns: [
      { key: 'load', head: 'Shaft load', unit: '% of rated', kind: 'number', align: 'left' },
      ...data.lines.map((line, index) => ({
        key: `line-${index}`,
        head: line.name,
        unit: 'kvar',
        align: 'right' as const,
        wrap: true,
        strong: line.strong,
      })),
      { key: 'most', head: 'Most it may deliver', unit: 'kvar', align: 'right', wrap: true },
      { key: 'limit', head: 'Limit met first' },
      { key: 'least', head: 'Least', unit: 'kvar', align: 'right' },
    ],
    rows: data.loadPercents.map((loadPercent) => {
      const most = data.most.find((p) => p.loadPercent === loadPercent);
      const least = data.least.find((p) => p.loadPercent === loadPercent);
      return {
        id: String(loadPercent),
        cells: {
          load: loadPercent,
          ...Object.fromEntries(
            data.lines.map((line, index) => [`line-${index}`, inWords(kvarAt(line.points, loadPercent))]),
          ),
          most: most ? formatDelivered(most.kvarDelivered) : 'not admissible',
          limit: most ? names[most.binding] : '',
          least: least ? formatDelivered(least.kvarDelivered) : 'not admissible',
        },
      };
    }),
  };
}
