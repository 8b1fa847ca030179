import type { PricedBill, QuantityEntry } from '../../core/tariff';
import { wordNumber } from '../../core/units';
import type { FindingKind } from '../../schemas/pricing';
import { wordsOfName } from '../presenters/schedule';
import { quantitiesBehind } from './schedule-variants';
import type { TrialPricing } from './trial-pricing';

/** The amount a cause must explain: one line of a bill, or its total where no lines are printed. */
export interface CauseTarget {
  index: number;
  lineId: string | null;
  billedMinor: number;
}

/** A way in which a billed amount may have come about, to be tried by pricing with it. */
export interface Supposition {
  kind: FindingKind;
  label: string;
  /** The bill under it; undefined where it cannot be priced. */
  bill: () => PricedBill | undefined;
  /** The same with it in every bill of the year: tried where nothing else fits, since a ratchet carries it on. */
  throughout?: () => PricedBill | undefined;
}

/** What a quantity is called. */
export const nameOf = (quantity: QuantityEntry) => quantity.label ?? wordsOfName(quantity.name);

/** A value with its unit. */
export const worded = (value: number, unit: string) =>
  `${wordNumber(Math.round(value * 1000) / 1000)}${unit ? ` ${unit}` : ''}`;

/** Quantities behind the target; all of the text where no line is named. */
export function quantitiesOf(trial: TrialPricing, { index, lineId }: CauseTarget): QuantityEntry[] {
  const text = trial.text(index);
  return lineId === null ? [...text.quantities] : quantitiesBehind(text, lineId);
}
