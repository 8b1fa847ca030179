import type { BillPreview } from '../../core/intake';
import { periodFlaws } from '../../schemas/bill';
import type { IntakeView } from '../../schemas/intake';
import { FindingSlip } from '../ui/FindingSlip';
import { formatAmount, formatBillName, formatCount, formatPeriod } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';
import { BillDocuments, rateFaultInWords } from './BillDocuments';
import { billedMinor, billLedger, lessTotal, lineSums, readBill } from './bill-ledger';
import { coverage } from './bill-words';
import type { IntakeActions } from './IntakeSheet';
import { Notes } from './Notes';
import { SheetPart } from './Sheet';

interface CheckBillsProps {
  intake: IntakeView;
  preview: BillPreview;
  actions: IntakeActions;
}

/** Notes that stand elsewhere in the step: in the table of documents and on slips. */
const shownElsewhere = new Set([
  'document-left-out',
  'document-joined',
  'document-undated',
  'rate-differs',
  'sum-differs',
]);
const mostRateFaults = 6;

/** Where a bill stands in the file, in words. */
const placeOf = ({ documents }: BillPreview, bill: number): string =>
  documents
    .filter((document) => document.bill === bill)
    .map((document) => document.where)
    .join(' and ');

/** The bills as they would be kept: lines, sums against totals, days, overlaps. */
export function CheckBills({ intake, preview, actions }: CheckBillsProps) {
  const { currency, yearFrom, yearTo } = intake.engagement;
  const { report } = preview;
  const bills = preview.bills.map((bill, index) => ({
    ...readBill(bill, index, currency, report?.billRows?.[index]),
    source: placeOf(preview, index),
  }));
  const flaws = periodFlaws(bills);
  const odd = bills.filter((bill) => (lessTotal(bill) ?? 0) !== 0);
  const asks = new Set([
    ...odd.map((bill) => bill.id),
    ...bills
      .filter((bill) => flaws.some((flaw) => flaw.kind === 'overlap' && flaw.from === bill.from))
      .map((bill) => bill.id),
  ]);
  const total = bills.reduce((sum, bill) => sum + billedMinor(bill), 0);
  return (
    <SheetPart
      id="check"
      number="3"
      title="Check"
      lead={
        bills.length > 0
          ? `Amounts in ${currency}. A total opens the whole bill. ${coverage(bills, { from: yearFrom, to: yearTo })}`
          : 'The bills follow when the table can be read.'
      }
      reference={<p>Lines less total: the sum of the lines less the printed total.</p>}
      result={
        bills.length > 0 && (
          <>
            <ResultSums
              rows={[
                ...lineSums(bills)
                  .slice(0, 12)
                  .map(({ label, amountMinor }) => ({ label, value: formatAmount(amountMinor, currency) })),
                { label: `Billed, ${currency}`, value: formatAmount(total, currency), kind: 'total' as const },
              ]}
            />
            <div className="mt-4">
              {odd.map((bill) => (
                <FindingSlip key={bill.id} caution letter="+" title={`${formatBillName(bill)} does not add up`}>
                  {`Its lines come to ${formatAmount(lessTotal(bill) ?? 0, currency, { signed: true })} ${currency} against the printed total. It is kept as printed.`}
                </FindingSlip>
              ))}
              <RateFaults preview={preview} currency={currency} />
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
                  {formatPeriod(flaw.from, flaw.to, { year: true })}.
                  {flaw.kind === 'overlap' && ' It must be corrected before the file can be kept.'}
                </FindingSlip>
              ))}
            </div>
          </>
        )
      }
    >
      <div className="stacked">
        {bills.length > 0 && <LedgerTable {...billLedger(bills, currency, asks)} label="Bills of the file" />}
        {preview.documents.length > 0 && <BillDocuments intake={intake} preview={preview} actions={actions} />}
        {report && (
          <Notes report={{ ...report, notes: report.notes.filter(({ code }) => !shownElsewhere.has(code)) }} />
        )}
      </div>
    </SheetPart>
  );
}

/** Lines whose quantity times rate is not their amount, each with its working. */
function RateFaults({ preview, currency }: { preview: BillPreview; currency: string }) {
  const faults = preview.report?.rateFaults ?? [];
  const more = faults.length - mostRateFaults;
  return (
    <>
      {faults.slice(0, mostRateFaults).map((fault, index) => {
        const bill = preview.bills[fault.bill];
        return (
          <FindingSlip
            key={index}
            caution
            letter="×"
            title={`${fault.label}${bill ? ` of ${formatBillName(bill.period)}` : ''}`}
          >
            {rateFaultInWords(fault, currency)}
          </FindingSlip>
        );
      })}
      {more > 0 && <p>{`${formatCount(more, 'more line')} whose quantity times rate is not the amount.`}</p>}
    </>
  );
}
