import { itemKindWords, type ItemKind } from '../../schemas/request';
import { formatCount, formatLongDate, formatPeriod, formatSpelled } from '../ui/format';

/** One thing asked for, as pages and mails name it. */
export interface ItemWords {
  kind: ItemKind;
  words: string;
  period: { from: string; to: string } | null;
  motor: string | null;
  /** Why it was sent back. */
  reason?: string | null;
}

/** A request as its mails tell it. */
export interface RequestLetterContent {
  practice: { name: string; phone: string };
  by: { name: string; email: string };
  recipientName: string;
  client: string;
  site: string;
  dueOn: string;
  note: string;
  items: ItemWords[];
}

const things = (count: number) => `${formatSpelled(count)} ${count === 1 ? 'thing' : 'things'}`;
const are = (count: number) => (count === 1 ? 'is' : 'are');

/** Kind, motor and days of an item, after its words. */
export const aboutItem = ({ kind, motor, period }: ItemWords) =>
  [itemKindWords[kind], motor, period && formatPeriod(period.from, period.to, { year: true })]
    .filter(Boolean)
    .join(', ');

/** `Works 2: two things are needed by Tue 15 Dec 2026` */
export const requestSubject = ({ site, items, dueOn }: RequestLetterContent) =>
  `${site}: ${things(items.length)} ${are(items.length)} needed by ${formatLongDate(dueOn)}`;

/** What is wanted and why, in a sentence. */
export const requestOpening = ({ site, items, dueOn }: RequestLetterContent) =>
  `to go on with the power bills of ${site} we need ${things(items.length)} from you, by ${formatLongDate(dueOn)}.`;

/** How it is sent. */
export const requestHow =
  'Send files or photos from the page below; a telephone will do. Several files for one thing are welcome, and you can send them one after the other. What you do not have, you can say there.';

/** The subject of a reminder: ahead of the day, on it, or after it. */
export function reminderSubject({ site, items, dueOn }: RequestLetterContent, today: string): string {
  const count = things(items.length);
  if (dueOn > today) return `${site}: ${count} still needed by ${formatLongDate(dueOn)}`;
  return dueOn === today ? `${site}: ${count} needed today` : `${site}: ${count} still missing`;
}

/** What a reminder says first. */
export function reminderOpening({ site, items, dueOn }: RequestLetterContent, today: string): string {
  const count = things(items.length);
  if (dueOn > today)
    return `for the power bills of ${site} ${count} ${are(items.length)} still open, until ${formatLongDate(dueOn)}.`;
  if (dueOn === today)
    return `for the power bills of ${site} ${count} ${are(items.length)} still open; today is the day.`;
  return `for the power bills of ${site} we still miss ${count}, asked for until ${formatLongDate(dueOn)}. Without ${items.length === 1 ? 'it' : 'them'} we cannot go on. If you need more time, tell us.`;
}

/** A note on an item that came back. */
export const sentBackOpening = ({ site }: RequestLetterContent) =>
  `thank you for what you sent for ${site}. One thing needs another look:`;

/** How many files came, for the practice's own mail. */
export const filesCame = (count: number) => formatCount(count, 'file');
