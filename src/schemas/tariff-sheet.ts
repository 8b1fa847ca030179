import type { MatchedBy } from './pricing';

/** A quantity printed in the sheet, and the figure to ask about it. */
export interface SheetQuantity {
  value: number;
  figure: string;
}

/** A head of the sheet's quantity columns. */
export interface SheetColumn {
  key: 'energy' | 'peak' | 'pf' | 'billed' | 'rate';
  head: string;
  unit: string;
  decimals: number;
}

/** A line priced beside billed, as the opened bill lists it. */
export interface PairView {
  key: string;
  lineId: string | null;
  label: string;
  group: string | null;
  clause: string | null;
  quantity: number | null;
  unit: string | null;
  rate: number | null;
  pricedMinor: number | null;
  billed: { label: string; amountMinor: number }[];
  billedMinor: number | null;
  differenceMinor: number;
  matchedBy: MatchedBy;
  /** That the match was taken over from an earlier engagement, in words. */
  remembered: string | null;
  finding: string | null;
}

/** One bill of the sheet. */
export interface SheetRow {
  billId: number;
  name: string;
  from: string;
  to: string;
  quantities: Partial<Record<SheetColumn['key'], SheetQuantity>>;
  /** The demand is set by an earlier bill. */
  ratchet: boolean;
  groups: Record<'energy' | 'demand' | 'reactive' | 'other', number>;
  pricedMinor: number;
  billedMinor: number | null;
  differenceMinor: number | null;
  findings: string[];
  pairs: PairView[];
  notes: string[];
}

/** The year as the island of the tariff sheet needs it. */
export interface TariffSheetView {
  code: string;
  currency: string;
  columns: SheetColumn[];
  rows: SheetRow[];
  /** Lines a printed label may be matched to. */
  lines: { id: string; label: string }[];
  /** Version of the choice, sent back with a corrected match. */
  choiceVersion: number;
}
