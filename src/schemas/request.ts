import { z } from 'zod';
import { isCalendarDate } from '../core/load';

export const itemKinds = ['bills', 'intervals', 'nameplate', 'other'] as const;
export type ItemKind = (typeof itemKinds)[number];
export type ItemState = 'asked' | 'answered' | 'accepted' | 'sent-back';

/** What became of a file: `taking` while its intake is made, `plate` as a picture to a motor, `removed` by who sent it. */
export type FileState = 'new' | 'taking' | 'taken' | 'plate' | 'set-aside' | 'removed';
export type RequestState = 'open' | 'closed' | 'withdrawn';

/** Kinds of items in words. */
export const itemKindWords: Record<ItemKind, string> = {
  bills: 'Bills',
  intervals: 'Meter readings',
  nameplate: 'Nameplate',
  other: 'Something else',
};

/** When the people of a request are reminded; null or false is never. */
export interface ReminderRule {
  daysBefore: number | null;
  onDue: boolean;
  everyDaysAfter: number | null;
}

/** Three days before, on the day, and weekly after it: a choice of ours. */
export const usualReminders: ReminderRule = { daysBefore: 3, onDue: true, everyDaysAfter: 7 };

/** Reminders after the due day end with this one; then somebody telephones. */
export const mostAfterDue = 3;

/** Limits of what a client may send for one request. */
export const requestCaps = { files: 200, bytes: 1024 ** 3 };

const version = z.number().int().min(0);
const day = z.string().refine(isCalendarDate, 'Choose a day of the calendar.');
const words = (most: number) =>
  z
    .string()
    .trim()
    .max(most, `Shorten it to ${most.toLocaleString('en-US')} characters.`);
const waitDays = z.number().int().min(1).max(60);

const itemInput = z
  .object({
    kind: z.enum(itemKinds, 'Choose what is asked for.'),
    words: words(500).min(3, 'Say in a few words what is asked for.'),
    /** Half-open, as every period. */
    from: day.nullable(),
    to: day.nullable(),
    motorId: z.number().int().positive().nullable(),
  })
  .superRefine(({ from, to }, context) => {
    const fault = (field: string, message: string) => context.addIssue({ code: 'custom', path: [field], message });
    if (from && !to) fault('to', 'Choose the last day too.');
    if (to && !from) fault('from', 'Choose the first day too.');
    if (from && to && from >= to) fault('to', 'The last day lies before the first.');
  });

/** A request to be sent. */
export const requestInput = z.object({
  requestId: z.uuid(),
  dueOn: day,
  note: words(2000),
  internalNote: words(2000),
  reminders: z.object({ daysBefore: waitDays.nullable(), onDue: z.boolean(), everyDaysAfter: waitDays.nullable() }),
  userIds: z.array(z.number().int().positive()).min(1, 'Choose who gets it.').max(20, 'At most 20 people.'),
  items: z.array(itemInput).min(1, 'Choose at least one thing to ask for.').max(40, 'At most 40 things in a request.'),
});
export type RequestInput = z.infer<typeof requestInput>;
export type RequestItemInput = RequestInput['items'][number];

/** Changes of a request; each names one thing. */
export const requestChangeInput = z.discriminatedUnion('change', [
  z.object({ change: z.literal('close'), version }),
  z.object({ change: z.literal('withdraw'), version }),
  z.object({ change: z.literal('reopen'), version }),
  z.object({ change: z.literal('due'), dueOn: day, version }),
  z.object({ change: z.literal('mail'), userId: z.number().int().positive(), version }),
]);
export type RequestChangeInput = z.infer<typeof requestChangeInput>;

/** What the practice decides about an answered item. */
export const itemDecisionInput = z.discriminatedUnion('to', [
  z.object({ to: z.literal('accepted'), version }),
  z.object({
    to: z.literal('sent-back'),
    reason: words(1000).min(3, 'Say what is missing or wrong; the client reads it.'),
    version,
  }),
]);
export type ItemDecisionInput = z.infer<typeof itemDecisionInput>;

/** What the practice does with a file that came. */
export const fileActInput = z.discriminatedUnion('act', [
  z.object({ act: z.literal('intake'), kind: z.enum(['bills', 'intervals']), version }),
  z.object({ act: z.literal('plate'), motorId: z.number().int().positive().nullable(), version }),
  z.object({ act: z.literal('set-aside'), version }),
  z.object({ act: z.literal('back'), version }),
]);
export type FileActInput = z.infer<typeof fileActInput>;

/** What the client says instead of a file; null takes it back. */
export const answerInput = z.object({
  words: words(1000).min(3, 'Say in a few words why, or where it may be found.').nullable(),
  version,
});
export type AnswerInput = z.infer<typeof answerInput>;

/** The version of a row that goes. */
export const removeFileInput = z.object({ version });

/** A file as its sender sees it. */
export interface ClientFileView {
  key: string;
  version: number;
  fileName: string;
  bytes: number;
  at: string;
  by: string;
  /** Whether the reader sent it, and so may open it again. */
  isMine: boolean;
  mayRemove: boolean;
}

/** One thing asked for, as the client sees it. */
export interface ClientItemView {
  position: number;
  version: number;
  kind: ItemKind;
  words: string;
  period: { from: string; to: string } | null;
  motor: string | null;
  state: ItemState;
  /** Why it was sent back. */
  reason: string | null;
  /** What was said instead of a file. */
  answer: string | null;
  files: ClientFileView[];
}

interface RequestFrame {
  code: string;
  number: number;
  state: RequestState;
  sentOn: string;
  dueOn: string;
  /** Days from today to the due day, negative when it has passed. */
  daysLeft: number;
  note: string | null;
}

/** A request as the client's people see it. */
export interface ClientRequestView extends RequestFrame {
  by: { name: string; email: string; practice: string; phone: string };
  items: ClientItemView[];
  mayAnswer: boolean;
}

/** A file as the practice sees it. */
export interface StaffFileView {
  key: string;
  version: number;
  fileName: string;
  bytes: number;
  mediaType: string;
  at: string;
  by: string;
  state: Exclude<FileState, 'removed'>;
  intakeId: number | null;
  motor: string | null;
}

/** One thing asked for, as the practice sees it. */
export interface StaffItemView extends Omit<ClientItemView, 'files'> {
  motorId: number | null;
  answeredBy: string | null;
  files: StaffFileView[];
}

/** Somebody a request went to. */
export interface RequestPersonView {
  userId: number;
  name: string;
  email: string;
  state: 'sending' | 'sent' | 'failed';
  /** Begun, and nothing heard since: it is not known whether it went. */
  isUncertain: boolean;
  error: string | null;
  sentAt: string | null;
}

/** A reminder that went, or did not. */
export interface ReminderView {
  day: string;
  name: string;
  state: 'sending' | 'sent' | 'failed';
}

/** A request as the practice sees it. */
export interface StaffRequestView extends RequestFrame {
  version: number;
  by: string;
  internalNote: string | null;
  rule: ReminderRule;
  people: RequestPersonView[];
  reminders: ReminderView[];
  /** Day of the next reminder; null where none will go. */
  nextReminderOn: string | null;
  items: StaffItemView[];
  motors: { id: number; name: string }[];
}

/** A request in a list. */
export interface RequestSummary extends Omit<RequestFrame, 'note'> {
  people: string[];
  kinds: ItemKind[];
  /** Kinds of which something is still to come. */
  wanted: ItemKind[];
  items: number;
  /** Answered or accepted. */
  answered: number;
  accepted: number;
  /** Files the practice has not looked at. */
  newFiles: number;
}

/** One thing that is missing, drafted from what is kept. */
export interface DraftItem extends RequestItemInput {
  /** Why it is proposed: "Interval readings stop on 3 May". */
  why: string;
  /** Number of the open request that asks for it already and waits; null where none does. */
  askedIn: number | null;
}

/** A new request as it could be sent now. */
export interface RequestDraft {
  code: string;
  today: string;
  dueOn: string;
  client: string;
  site: string;
  practice: { name: string; phone: string };
  by: { name: string; email: string };
  people: { id: number; name: string; email: string; hasPassword: boolean }[];
  motors: { id: number; name: string }[];
  items: DraftItem[];
}

/** Whether the client still has to do something about an item. */
export const isWanted = ({ state }: Pick<ClientItemView, 'state'>) => state === 'asked' || state === 'sent-back';

/** Pictures a browser can show; others are kept for downloading. */
export const isPicture = (mediaType: string) => /^image\/(jpeg|png|webp)$/.test(mediaType);
