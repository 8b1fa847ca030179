/** One tap on an engagement's bus. */
export interface StationView {
  id: string;
  label: string;
  href: string;
  state: 'closed' | 'open' | 'attention';
  /** Why it is open, or what is complete: "2 findings open". */
  reason: string;
}

/** One labelled field of the title strip. */
export interface StripView {
  label: string;
  value: string;
}
