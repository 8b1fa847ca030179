import { daysBetween, periodFlaws, type BillsStation, type MeterCheck } from '../../schemas/bill';
import { FindingSlip } from '../ui/FindingSlip';
import {
  formatAmount,
  formatBillName,
  formatCount,
  formatNumber,
  formatPercent,
  formatPeriod,
  formatSpelled,
} from '../ui/format';
import { ResultSums } from '../ui/ResultSums';
import { billedMinor, keptBill, lineSums } from './bill-ledger';

const mostSums = 12;

/** Sums by line, days, energy against the meter, and what is odd about the periods. */
export function BillsResult({ bills, currency, year, meterChecks }: BillsStation) {
  const ledgerBills = bills.map((bill) => keptBill(bill));
  const sums = lineSums(ledgerBills);
  const shown = sums.length > mostSums ? sums.slice(0, mostSums - 1) : sums;
  const rest = sums.slice(shown.length).reduce((sum, line) => sum + line.amountMinor, 0);
  const total = ledgerBills.reduce((sum, bill) => sum + billedMinor(bill), 0);
  const days = bills.reduce((sum, bill) => sum + daysBetween(bill.from, bill.to), 0);
  const flaws = periodFlaws(bills);
  return (
    <>
      <ResultSums
        rows={[
          ...shown.map(({ label, amountMinor }) => ({ label, value: formatAmount(amountMinor, currency) })),
          ...(rest === 0 ? [] : [{ label: 'Other lines', value: formatAmount(rest, currency) }]),
          { label: `Billed, ${currency}`, value: formatAmount(total, currency), kind: 'total' as const },
        ]}
      />
      <h3>Days</h3>
      <p>
        {formatNumber(days)} billed, {formatNumber(daysBetween(year.from, year.to))} in the year.
        {flaws.length === 0 && ' Each period begins where the last one ended.'}
      </p>
      <div className="mt-3">
        {flaws.map((flaw, index) => (
          <FindingSlip
            key={index}
            letter={String(index + 1)}
            title={
              flaw.kind === 'gap'
                ? `${formatCount(flaw.days, 'day')} without a bill`
                : `${formatCount(flaw.days, 'day')} billed twice`
            }
          >
            {formatPeriod(flaw.from, flaw.to, { year: true })}.{' '}
            {flaw.kind === 'gap' ? 'A bill is missing, or a date is wrong.' : 'Look at the dates of the two bills.'}
          </FindingSlip>
        ))}
      </div>
      <h3>Energy against the meter</h3>
      <p>{meterWords(meterChecks, bills)}</p>
    </>
  );
}

/** How the printed energies stand to the readings, over the periods that have every reading. */
function meterWords(checks: MeterCheck[], bills: BillsStation['bills']): string {
  if (checks.length === 0) return 'No period has both a printed energy and every reading yet.';
  const off = (check: MeterCheck) => Math.abs(check.meterKwh - check.billedKwh) / Math.max(1, check.billedKwh);
  const worst = checks.reduce((a, b) => (off(b) > off(a) ? b : a));
  const bill = bills.find((one) => one.id === worst.billId);
  const left = bills.length - checks.length;
  const compared =
    left === 0
      ? `All ${formatSpelled(checks.length)}`
      : `${formatNumber(checks.length)} of ${formatNumber(bills.length)}`;
  const others = left === 0 ? '' : ` In the other ${formatSpelled(left)} a reading or the printed energy is missing.`;
  const kwh = Math.abs(worst.meterKwh - worst.billedKwh);
  if (kwh < 1) return `${compared} agree with the readings to the kWh.${others}`;
  return `${compared} agree with the readings within ${formatPercent(Math.ceil(off(worst) * 10_000) / 10_000, 2)}; the farthest, ${bill ? formatBillName(bill) : ''}, by ${formatNumber(kwh)} kWh.${others}`;
}
