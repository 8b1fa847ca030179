import { createContext, useContext } from 'react';

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
  /**
   * Writes a text into a field as if it had been typed, and puts the focus there.
   *
   * @param path  The field; none: the focused one
   * @returns Whether there was a field to take it
   */
  fill(text: string, path?: string): boolean;
}

export const BillFieldTargetContext = createContext<BillFieldTarget | null>(null);

/** The target for what stands beside the form; null outside of a form. */
export const useBillFieldTarget = () => useContext(BillFieldTargetContext);
