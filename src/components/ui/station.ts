/** State of a tap on the bus: work complete, not complete, or something overdue or faulty in it. */
export type StationState = 'closed' | 'open' | 'attention';

/** One tap on the bus. `reason` is the short word beneath it ("2 findings open") and is never empty. */
export interface Station {
  id: string;
  label: string;
  href: string;
  state: StationState;
  reason: string;
}

/** The state in words, for readers and tooltips. */
export const stationStateWords: Record<StationState, string> = {
  closed: 'complete',
  open: 'not complete',
  attention: 'needs attention',
};

/** One labelled field of the title strip. */
export interface StripField {
  label: string;
  value: string;
}
