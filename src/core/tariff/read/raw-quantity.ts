import type { QuantityDefinition } from '../model';
import type { RawExpression } from './expressions';

/** A quantity parsed: its definition for each window of its family, or for none. */
export interface RawQuantity {
  expressions: RawExpression[];
  windows?: string[];
  define(window: string | undefined): { definition: QuantityDefinition; unit: string };
}
