import type { QuantityDefinition } from '../model';
import type { Found } from './dimensions';
import type { RawExpression } from './expressions';

/** A quantity parsed: its definition for each window of its family, or for none. */
export interface RawQuantity {
  expressions: RawExpression[];
  windows?: string[];
  /** Of what kind its value is, where its unit does not tell. */
  found?: Found;
  define(window: string | undefined): { definition: QuantityDefinition; unit: string };
}
