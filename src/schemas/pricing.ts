import type { BillLineView, BillView } from './bill';
import type { PricedBill, PricedLine } from '../core/tariff';

/** Whether bills are priced from the meter's intervals or from the quantities printed on them. */
export type PricingRoute = 'intervals' | 'printed';

/** How a printed line found its place: told by a person, by its label, by its group and order, or not at all. */
export type MatchedBy = 'person' | 'label' | 'amount' | 'group' | 'none';

/** A line as priced beside what the bill says; either side may be missing. Differences are billed minus priced. */
export interface LinePair {
  line: PricedLine | null;
  billed: BillLineView[];
  pricedMinor: number | null;
  billedMinor: number | null;
  differenceMinor: number;
  matchedBy: MatchedBy;
}

/** One bill of the year, priced beside billed. */
export interface ReconciledBill {
  /** Month most of its days lie in, the name people give a bill: "Aug 2025". */
  name: string;
  bill: BillView;
  priced: PricedBill;
  pricedMinor: number;
  /** Printed total, or the sum of the printed lines where no total is printed; null where neither is. */
  billedMinor: number | null;
  /** Billed minus priced; null where the bill says nothing, or readings of its period are missing. */
  differenceMinor: number | null;
  /**
   * Readings missing in its period, or in earlier ones that a ratchet takes its demand from: priced without them, it
   * cannot be held against what was billed.
   */
  missingReadings: number;
  reactiveMinor: number;
  pairs: LinePair[];
  /** Letters of the findings in this bill. */
  findings: string[];
}

export type FindingKind =
  | 'ratchet-not-released'
  | 'wrong-season'
  | 'wrong-version'
  | 'wrong-quantity'
  | 'wrong-window'
  | 'wrong-rounding'
  | 'wrong-base'
  | 'wrong-period'
  | 'wrong-multiplier'
  | 'bill-arithmetic'
  | 'energy-differs'
  | 'line-not-in-schedule'
  | 'line-not-billed'
  | 'unexplained';

/** One explanation that was tried: how far it missed what was billed, in minor units; 0 fits to the cent. */
export interface TriedCause {
  kind: FindingKind;
  label: string;
  missMinor: number;
  fits: boolean;
}

/** Energy a bill prints beside what the meter's intervals add up to. */
export interface EnergyDifference {
  printedKwh: number;
  meteredKwh: number;
  /** Printed less metered at the mean rate of the bill's energy lines; null where there are none. */
  worthMinor: number | null;
}

/** A difference between a bill and what the schedule says it should be. */
export interface Finding {
  /** A, B, ... in order of the bills; the same on the row and the slip. */
  letter: string;
  billId: number;
  /** Line of the schedule the difference lies in; null for the bill's own arithmetic and unknown lines. */
  lineId: string | null;
  /** What the line is called, on the schedule or else on the bill; null for the bill as a whole. */
  lineLabel: string | null;
  kind: FindingKind;
  title: string;
  /** Billed minus priced with everything that follows from it (tax, percentages): over-billed is positive. */
  amountMinor: number;
  /** The line's own part of it. */
  lineAmountMinor: number;
  /** Energy printed and metered, where these differ though the money agrees; its worth at the schedule's rate. */
  energy: EnergyDifference | null;
  sentence: string;
  causes: TriedCause[];
}

/** The year priced beside billed. */
export interface PricedYear {
  route: PricingRoute;
  currency: string;
  /** Differences of a line up to this many minor units are rounding, not findings. */
  toleranceMinor: number;
  timeZone: string;
  /** That the schedule's clock is not the site's; null where it is. */
  clock: string | null;
  bills: ReconciledBill[];
  findings: Finding[];
  totals: {
    pricedMinor: number;
    billedMinor: number;
    /** Billed minus priced over the bills that say what they billed. */
    differenceMinor: number;
    reactiveMinor: number;
    billsWithoutTotal: number;
  };
  /** Quantities that look back at earlier bills. */
  lookBacks: string[];
  /** Readings laid under the year: present and expected; both 0 on the printed route. */
  readings: { present: number; expected: number };
  notes: string[];
}

/** The tolerance of a line, in minor units, where nobody chose another; and the greatest one may choose. */
export const lineToleranceMinor = 5;
export const mostToleranceMinor = 500;
