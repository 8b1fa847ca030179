import { daysBetween, periodFlaws, type BillsStation } from '../../schemas/bill';
import { FindingSlip } from '../ui/FindingSlip';
import { formatAmount, formatCount, formatNumber, formatPeriod } from '../ui/format';
import { ResultSums } from '../ui/ResultSums';
import { billedMinor, keptBill, lineSums } from './bill-ledger';
import { meterWords } from './meter-words';

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
