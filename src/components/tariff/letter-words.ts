import { placeOf, totalOf, type LetterClaim, type UtilityLetterContent } from '../../schemas/utility-letter';
import { formatMoney, formatSpelled } from '../ui/format';

/** What the letter is about, in one line. */
export function letterSubject({ claims, client, currency, meter, ...content }: UtilityLetterContent): string {
  const bills = new Set(claims.map(({ from }) => from)).size;
  const which = bills === 1 ? 'one bill' : `${formatSpelled(bills)} bills`;
  return `${formatMoney(totalOf(claims), currency)} in ${which} of ${client}, ${placeOf(content)}, meter ${meter}`;
}

/** What identifies the account, as label and value. */
export function letterAbout(content: UtilityLetterContent): [label: string, value: string][] {
  const { account, client, meter, schedule } = content;
  return [
    ['Customer', client],
    ['Site', placeOf(content)],
    ...(account ? [['Account', account] as [string, string]] : []),
    ['Meter', meter],
    ['Schedule', schedule.title],
  ];
}

/** The small table of a claim: billed, by the schedule, difference, with what follows. */
export function claimRows(claim: LetterClaim, currency: string): [label: string, amount: string][] {
  const { billedMinor, scheduledMinor, differenceMinor, amountMinor, clause, line } = claim;
  const money = (minor: number | null, none: string) => (minor === null ? none : formatMoney(minor, currency));
  if (differenceMinor === 0) return [['Claimed in money', formatMoney(0, currency)]];
  const side = (minor: number) => (minor > 0 ? 'Too much' : 'Too little');
  const rows: [string, string][] = [
    [line ? `Billed, ${line}` : 'Billed', money(billedMinor, 'nothing')],
    [clause ? `By the schedule, clause ${clause}` : 'By the schedule', money(scheduledMinor, 'no such line')],
    [side(differenceMinor), formatMoney(Math.abs(differenceMinor), currency)],
  ];
  if (amountMinor === differenceMinor) return rows;
  return [...rows, [`${side(amountMinor)}, with the taxes on it`, formatMoney(Math.abs(amountMinor), currency)]];
}
