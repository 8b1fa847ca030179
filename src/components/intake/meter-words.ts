import type { BillView, MeterCheck } from '../../schemas/bill';
import { formatBillName, formatNumber, formatPercent, formatSpelled } from '../ui/format';

/** `+0.02 %`, `−1.4 %`. */
export function offInPercent(printed: number, metered: number): string {
  const off = metered === 0 ? 0 : (printed - metered) / metered;
  const text = formatPercent(Math.abs(off), 2);
  return /[1-9]/.test(text) ? `${off < 0 ? '\u2212' : '+'}${text}` : text;
}

/** How the printed energies stand to the readings, over the periods that have every reading. */
export function meterWords(checks: MeterCheck[], bills: BillView[]): string {
  const compared = checks.flatMap(({ billId, missing, figures }) => {
    const energy = figures.find(({ name }) => name === 'kwh');
    return missing > 0 || !energy || energy.metered === null ? [] : [{ billId, ...energy, metered: energy.metered }];
  });
  const [first] = compared;
  if (!first) return 'No period has both a printed energy and every reading yet.';
  const share = (one: typeof first) => Math.abs(one.metered - one.printed) / Math.max(1, one.printed);
  const worst = compared.reduce((a, b) => (share(b) > share(a) ? b : a), first);
  const bill = bills.find(({ id }) => id === worst.billId);
  const left = bills.length - compared.length;
  const count =
    left === 0
      ? `All ${formatSpelled(compared.length)}`
      : `${formatNumber(compared.length)} of ${formatNumber(bills.length)}`;
  const others = left === 0 ? '' : ` In the other ${formatSpelled(left)} a reading or the printed energy is missing.`;
  const kwh = Math.abs(worst.metered - worst.printed);
  if (kwh < 1) return `${count} agree with the readings to the kWh.${others}`;
  const within = formatPercent(Math.ceil(share(worst) * 10_000) / 10_000, 2);
  return `${count} agree with the readings within ${within}; the farthest, ${bill ? formatBillName(bill) : ''}, by ${formatNumber(kwh)} kWh.${others}`;
}
