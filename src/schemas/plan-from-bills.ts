/** A figure with its ends: surely between `low` and `high` on what is assumed. Major units. */
export interface EstimatedAmount {
  low: number;
  best: number;
  high: number;
}

/** One bill before, and as estimated after. Major units. */
export interface EstimatedBillView {
  from: string;
  to: string;
  standing: number;
  total: EstimatedAmount;
  saving: EstimatedAmount;
}

/** A plan, or fields raised by some part of what the limits leave, estimated from bills alone. */
export interface EstimatedPlanView {
  /** null: no stored plan, but raised fields. */
  id: number | null;
  name: string;
  /** What is set, where it is no stored plan. */
  fields: { name: string; fieldA: number; todayA: number }[];
  total: EstimatedAmount;
  saving: EstimatedAmount;
  /** What makes it wide, the greatest first. Major units a year. */
  widths: { doubt: 'moment' | 'netting' | 'formula'; width: number }[];
  bills: EstimatedBillView[];
}

/** The plans of a year of which bills are kept and no readings; or why they cannot be estimated either. */
export type BillsOnlyView =
  | {
      currency: string;
      scheduleTitle: string;
      from: string;
      to: string;
      standing: number;
      plans: EstimatedPlanView[];
      refused?: undefined;
    }
  | { refused: string };
