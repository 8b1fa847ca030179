import { formatDelivered } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

export interface KvarCost {
  /** Delivered positive, absorbed negative. */
  kvarDelivered: number;
  fieldA: number;
  lossKw: number;
  marginalWPerKvar: number;
  averageWPerKvar: number;
}

export interface LossData {
  motorName: string;
  /** "Field current", or "Exciter field current". */
  fieldName: string;
  fieldDecimals: number;
  points: KvarCost[];
  /** Where the losses are least. */
  least: KvarCost;
  today: KvarCost;
  tried: (KvarCost & { name: string }) | null;
  /** Most it may deliver, and the limit's name. */
  most: { kvarDelivered: number; name: string } | null;
}

/** The same as a table: every fifth point, in words instead of signs. */
export function lossTable({ points, fieldName, fieldDecimals }: LossData): LedgerData {
  return {
    columns: [
      { key: 'kvar', head: 'Reactive power', unit: 'kvar' },
      { key: 'field', head: fieldName, unit: 'A', kind: 'number', decimals: fieldDecimals },
      { key: 'loss', head: 'Losses', unit: 'kW', kind: 'number', decimals: 1 },
      { key: 'marginal', head: 'Next kvar', unit: 'W', kind: 'number', decimals: 1, strong: true },
      { key: 'average', head: 'Mean since today', unit: 'W/kvar', kind: 'number', decimals: 1 },
    ],
    rows: points
      .filter((_, index) => index % 5 === 0)
      .map((point, index) => ({
        id: String(index),
        cells: {
          kvar: formatDelivered(point.kvarDelivered),
          field: point.fieldA,
          loss: point.lossKw,
          marginal: point.marginalWPerKvar,
          average: point.averageWPerKvar,
        },
      })),
  };
}
