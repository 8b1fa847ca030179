import type { HoursAnswer } from '../../client/hours';
import { hourStations, type HourForm, type HourStation, type HourView } from '../../schemas/hour';
import { capital, formatAmount, formatClock, formatHours, formatMoney, formatNumber } from '../ui/format';
import type { SumRow } from '../ui/ResultSums';

export const stationLabel = (station: HourStation) => capital(station);
export const stationOptions = hourStations.map((value) => ({ value, label: stationLabel(value) }));

/** The sheet's finding: how much was logged, what it is worth, how it stands to the budget. */
export function hoursHeading(code: string, { sums, currency, budgetHours }: HoursAnswer, isPartner: boolean): string {
  if (sums.minutes === 0)
    return isPartner ? `No hours are logged on ${code} yet.` : `You have logged no hours on ${code} yet.`;
  const hours = formatHours(sums.minutes);
  const whole = isPartner ? `${hours} hours are logged on ${code}` : `You have logged ${hours} hours on ${code}`;
  const rated = sums.billableMinutes > sums.unratedMinutes;
  const worth = rated
    ? `, worth ${formatMoney(sums.amountMinor, currency)} at ${isPartner ? 'rates' : 'your rate'}`
    : '';
  const share = isPartner && budgetHours ? sums.minutes / 60 / budgetHours : null;
  if (share === null) return `${whole}${worth}.`;
  const budget = `${formatNumber(share * 100)}\u00a0% of the budget of ${formatNumber(budgetHours ?? 0, { upTo: 1 })} h`;
  return share > 1 ? `${whole}${worth}; they are ${budget}.` : `${whole}${worth}: ${budget}.`;
}

/** Sums of the result column. */
export function sumRows({ sums, currency }: HoursAnswer): SumRow[] {
  const rows: SumRow[] = [
    { label: 'Billable', value: formatHours(sums.billableMinutes) },
    { label: 'Not billable', value: formatHours(sums.minutes - sums.billableMinutes) },
    { label: 'Hours', value: formatHours(sums.minutes), kind: 'total' },
  ];
  if (sums.unratedMinutes > 0) {
    rows.push({ label: 'Without a rate, h', value: formatHours(sums.unratedMinutes), tone: 'warn' });
  }
  rows.push({ label: `At rates, ${currency}`, value: formatAmount(sums.amountMinor, currency), kind: 'strong' });
  return rows;
}

/** What an entry is worth, in words where there is no figure. */
export function worthOf(entry: HourView, currency: string): { text: string; tone?: 'warn' | 'quiet' } {
  if (!entry.billable) return { text: 'not billed', tone: 'quiet' };
  if (entry.amountMinor === null) return { text: 'no rate', tone: 'warn' };
  return { text: formatAmount(entry.amountMinor, currency) };
}

/** An entry as its form shows it. */
export function formOf(entry: HourView): HourForm {
  const { day, minutes, station, note, billable } = entry;
  return { day, time: formatClock(minutes), station, note, billable };
}
