import { z } from 'zod';
import { formatDate, formatLongDate, formatMoney, formatPeriod } from '../components/ui/format';
import { isCalendarDate } from '../core/load';
import { emailInput } from './account';

/** One finding as the letter puts it to the utility. */
export interface LetterClaim {
  findingId: number;
  version: number;
  letter: string;
  billName: string;
  from: string;
  to: string;
  line: string | null;
  title: string;
  clause: string | null;
  billedMinor: number | null;
  scheduledMinor: number | null;
  /** The line's own difference, and with the taxes and percentages that follow from it. */
  differenceMinor: number;
  amountMinor: number;
  /** The paragraph. */
  words: string;
  /** How the amount by the schedule was worked out, downward. */
  working: { label: string; working: string; result: string }[];
}

/** A letter to the utility with every figure and word in it. Once sent it is never changed. */
export interface UtilityLetterContent {
  number: number;
  madeOn: string;
  currency: string;
  practice: { name: string; phone: string };
  by: { name: string; email: string };
  client: string;
  site: { name: string; place: string | null };
  meter: string;
  account: string;
  schedule: { title: string; publisher: string | null };
  year: { from: string; to: string };
  addressee: { name: string; address: string; postal: string };
  opening: string;
  closing: string;
  replyBy: string;
  claims: LetterClaim[];
}

/** A letter as lists show it. */
export interface UtilityLetterSummary {
  id: number;
  version: number;
  number: number;
  way: 'mail' | 'post';
  state: 'sending' | 'sent' | 'failed';
  error: string | null;
  /** Begun, and nothing heard since: it is not known whether it went. */
  isUncertain: boolean;
  addressee: string;
  madeOn: string;
  by: string;
  totalMinor: number;
  letters: string[];
  replyBy: string;
  digest: string;
}

/** What the letters claim together. */
export const totalOf = (claims: readonly LetterClaim[]) =>
  claims.reduce((sum, { amountMinor }) => sum + amountMinor, 0);

/** Where the letter is about, as one line. */
export const placeOf = ({ site }: Pick<UtilityLetterContent, 'site'>) =>
  [site.name, site.place].filter(Boolean).join(', ');

/** Fields that stand in the words for live figures, each with what it becomes. */
export function letterFields(content: UtilityLetterContent): Record<string, string> {
  const { claims, currency, client, meter, account, schedule, year, replyBy } = content;
  const bills = new Set(claims.map(({ from }) => from)).size;
  return {
    client,
    site: placeOf(content),
    meter,
    account: account || 'not told',
    schedule: schedule.title,
    year: formatPeriod(year.from, year.to, { year: true }),
    bills: bills === 1 ? 'one bill' : `${bills} bills`,
    total: formatMoney(totalOf(claims), currency),
    replyBy: formatLongDate(replyBy),
    today: formatDate(content.madeOn),
  };
}

export const letterFieldNames = [
  'client',
  'site',
  'meter',
  'account',
  'schedule',
  'year',
  'bills',
  'total',
  'replyBy',
  'today',
];

const field = /\{([^{}]*)\}/g;

/** Fields in a text that there are none of. */
export const unknownFields = (text: string) =>
  [...text.matchAll(field)].map(([, name = '']) => name.trim()).filter((name) => !letterFieldNames.includes(name));

/** A text with its fields filled; unknown ones stay as they are. */
export function fillFields(text: string, content: UtilityLetterContent): string {
  const fields = letterFields(content);
  return text.replace(field, (whole, name: string) => fields[name.trim()] ?? whole);
}

/** The words a letter begins with, until somebody changes them. */
export const usualWords = {
  opening:
    'We audit the power bills of {client} for {site}, meter {meter}. Priced on {schedule}, we find differences in {bills} of the year {year}. Each is shown below with the way it was worked out.',
  closing:
    'Please correct these bills and credit {total} to the account, or show us by {replyBy} where our working is wrong. Readings and working papers are yours on request.',
};

const words = (what: string) =>
  z
    .string()
    .trim()
    .min(1, `Write the ${what}.`)
    .max(3000, `Shorten the ${what} to 3,000 characters.`)
    .superRefine((text, context) => {
      const unknown = unknownFields(text);
      if (unknown.length === 0) return;
      const message = `There is no field {${unknown[0]}}. There are ${letterFieldNames.map((name) => `{${name}}`).join(', ')}.`;
      context.addIssue({ code: 'custom', message });
    });

const oneLine = (message: string) =>
  z
    .string()
    .trim()
    .max(200, message)
    .regex(/^[^\r\n]*$/, 'Write it on one line.');

/** What writing to the utility sends. */
export const utilityLetterInput = z
  .object({
    requestId: z.uuid(),
    findings: z
      .array(z.object({ id: z.number().int().positive(), version: z.number().int() }))
      .min(1, 'Choose at least one finding.')
      .max(60, 'Sixty findings in one letter are enough.'),
    way: z.enum(['mail', 'post'], 'Choose how it goes.'),
    name: oneLine('Shorten the name to 200 characters.').min(1, 'Write who gets the letter.'),
    address: z.string().trim().max(254, 'This address is too long.'),
    postal: z.string().trim().max(400, 'Shorten the postal address to 400 characters.'),
    account: oneLine('Shorten the account to 200 characters.'),
    opening: words('opening words'),
    closing: words('closing words'),
    replyBy: z.string().refine(isCalendarDate, 'Choose a day of the calendar.'),
  })
  .superRefine(({ way, address }, context) => {
    if (way === 'post' || emailInput.safeParse(address).success) return;
    const message = 'Write one e-mail address, such as name@utility.example, or print the letter and post it.';
    context.addIssue({ code: 'custom', path: ['address'], message });
  });
export type UtilityLetterInput = z.infer<typeof utilityLetterInput>;
