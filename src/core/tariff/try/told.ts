import type { BillingPeriod } from '../../load';
import type { QuantityEntry } from '../model';

/** What the bill on the telephone says, before its windows are asked. */
export interface QuickFigures {
  /** Active energy of the period. [kWh] */
  energyKwh?: number;
  /** Highest active power, over the schedule's demand window. [kW] */
  peakKw?: number;
  /** Lagging reactive energy of the period. [kvarh] */
  energyKvarh?: number;
  /** Average lagging power factor. [unitless], (0, 1] */
  powerFactor?: number;
}

/** A month told in short. */
export interface ToldMonth {
  period: BillingPeriod;
  quick: QuickFigures;
  /** Quantities of the schedule told by name; they win over every assumption. */
  typed: Record<string, number>;
  contract: Record<string, number>;
}

/** How a quantity's value came about: told by name, one of the quick figures, assumed from these, the schedule's default, not known. */
export type Basis = 'typed' | 'quick' | 'assumed' | 'default' | 'missing';

/** Which quick figure a quantity simply is. */
export type QuickName = 'energyKwh' | 'peakKw' | 'energyKvarh';

/** A quantity the schedule's lines need, with what is taken for it. */
export interface AskedQuantity {
  quantity: QuantityEntry;
  value: number | null;
  basis: Basis;
  quick?: QuickName;
  /** How the value came about; what to type where there is none. */
  words: string;
}

/** A month with every quantity told or assumed. */
export interface AssumedMonth {
  asked: AskedQuantity[];
  /** Energy, peak and kvarh per kWh everything rests on; null where neither told nor to be worked out. */
  energyKwh: number | null;
  peakKw: number | null;
  kvarhPerKwh: number | null;
}

/** Figures that cannot all be true, by the field to change. */
export class ToldError extends RangeError {
  /** @param field  A quick figure, or the name of a quantity */
  constructor(
    readonly field: string,
    message: string,
  ) {
    super(message);
    this.name = 'ToldError';
  }
}

/** What a month comes to as a whole. */
export type Whole = Omit<AssumedMonth, 'asked'>;
