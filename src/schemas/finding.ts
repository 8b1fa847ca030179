import { z } from 'zod';
import { isCalendarDate } from '../core/load';
import type { EnergyDifference, FindingKind } from './pricing';

/** Where a finding stands. Raised is put to the utility; a dropped one carries its reason. */
export const findingStates = ['open', 'raised', 'agreed', 'refunded', 'dropped'] as const;
export type FindingState = (typeof findingStates)[number];

/** What a finding is about; with bill and line it is the identity that outlives each pricing, whatever its cause. */
export type FindingFamily = 'line' | 'printed-line' | 'arithmetic' | 'energy' | 'total';

/** One step of a finding's history; from and to are null for a note. */
export interface FindingChangeView {
  id: number;
  at: string;
  day: string;
  by: string;
  from: FindingState | null;
  to: FindingState | null;
  amountMinor: number | null;
  note: string | null;
}

/** A finding with what people decided about it. */
export interface FindingView {
  id: number;
  version: number;
  /** Letter on the sheet; null where the newest pricing finds it no more. */
  letter: string | null;
  kind: FindingKind | null;
  family: FindingFamily;
  billId: number | null;
  billName: string;
  from: string;
  to: string;
  lineId: string | null;
  line: string | null;
  title: string;
  sentence: string;
  amountMinor: number;
  energy: EnergyDifference | null;
  state: FindingState;
  since: string;
  /** The amount when it left the state open, where it is another by now. */
  wasMinor: number | null;
  refunded: { amountMinor: number; on: string } | null;
  /** The letter it was put to the utility with. */
  letterNumber: number | null;
  /** States it may go to. */
  moves: FindingState[];
  changes: FindingChangeView[];
}

/** What was claimed, what the utility agreed to, what came back; in minor units. */
export interface RecoveredView {
  claimedMinor: number;
  agreedMinor: number;
  refundedMinor: number;
}

const noteInput = z.string().trim().max(2000, 'Shorten the note to 2,000 characters.');
const dayInput = z.string().refine(isCalendarDate, 'Choose a day of the calendar.');
const versionInput = z.number().int();

/** A finding's step from state to state. */
export const moveFindingInput = z
  .object({
    version: versionInput,
    to: z.enum(findingStates, 'Choose a state.'),
    day: dayInput,
    /** Amount refunded, in major units. */
    amount: z.number({ error: 'Write the amount refunded.' }).nullable(),
    note: noteInput,
  })
  .superRefine(({ to, amount, note }, context) => {
    const fault = (field: string, message: string) => context.addIssue({ code: 'custom', path: [field], message });
    if (to === 'dropped' && note === '')
      fault('note', 'Write why it is dropped; whoever reads the year later wants to know.');
    if (to === 'refunded' && !(amount !== null && amount > 0))
      fault('amount', 'Write the amount refunded, more than nought.');
  });
export type MoveFindingInput = z.infer<typeof moveFindingInput>;

/** A note about a finding, for the practice alone. */
export const findingNoteInput = z.object({ note: noteInput.min(1, 'Write the note first.') });
export type FindingNoteInput = z.infer<typeof findingNoteInput>;
