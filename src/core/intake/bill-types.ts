/** A person's word on one document of a file of bills. */
export interface DocumentChoice {
  row: number;
  total: number | null;
  isTaken: boolean;
}

/** A line charge as printed; quantity, unit and rate where the bill shows them. */
export interface BillCharge {
  label: string;
  amount: number;
  quantity?: number;
  unit?: string;
  rate?: number;
}

/** A bill as printed. */
export interface BillRecord {
  period: { from: string; to: string };
  quantities: Record<string, number>;
  charges: BillCharge[];
  total: number | null;
  /** Number of the invoice as printed. */
  invoice?: string;
  /** The file says that the reading is estimated. */
  isEstimated?: boolean;
}

/** What a document in a file of bills is. */
export type DocumentKind =
  'bill' | 'estimate' | 'correction' | 'cancelled' | 'credit-note' | 'part' | 'repeat' | 'nought' | 'no-bill';

/** A document met in a file of bills, and what became of it. */
export interface BillDocument {
  /** Row of the file it begins in (column, where a column holds a bill), and the place in words. */
  row: number;
  where: string;
  invoice?: string;
  /** Half-open; null where the file gives it none. */
  period: { from: string; to: string } | null;
  total: number | null;
  kind: DocumentKind;
  /** Position of the bill it stands in; null where it is left out. */
  bill: number | null;
  /** Why it stands or is left out. */
  why: string;
}

/** A line of a bill whose quantity times rate is not its amount. */
export interface RateFault {
  /** Position of the bill. */
  bill: number;
  where: string;
  label: string;
  quantity: number;
  unit: string;
  rate: number;
  amount: number;
}
