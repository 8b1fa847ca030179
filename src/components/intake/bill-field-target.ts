import { createContext, useContext } from 'react';
import type { Offer } from './pages/offer';

/** A field of the form for a bill. */
export interface BillField {
  /** As the form calls it: "Demand, amount". */
  label: string;
  /** The name of its input: `lines.2.amount`, `quantities.0.figure`, `total`, `invoice`, `from`. */
  path: string;
}

/** Where a number of the attached page goes. */
export interface BillFieldTarget {
  /** The field that has the focus, or had it last; null before the form was entered. */
  focused: BillField | null;
  /** What became of the last number that was offered, in words. */
  said: string;
  /**
   * Writes a number or date of a page into a field as if it had been typed, remembers where it stands, and puts the focus
   * there. A field that cannot take it stays as it is.
   *
   * @param path  The field; none: the focused one
   */
  fill(offer: Offer, path?: string): void;
  /** Puts the focus back into the field that had it. */
  back(): void;
}

export const BillFieldTargetContext = createContext<BillFieldTarget | null>(null);

/** The target for what stands beside the form; null outside of a form. */
export const useBillFieldTarget = () => useContext(BillFieldTargetContext);
