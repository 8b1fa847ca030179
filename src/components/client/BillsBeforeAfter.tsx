import { useState } from 'react';
import type { EditionBill, EditionContent } from '../../schemas/edition';
import { BillsBeforeAfterFigure } from '../charts/BillsBeforeAfterChart';
import { billsTable } from '../report/BillsLeaf';
import { poorFactorBars } from '../report/poor-factor-bars';
import { Button } from '../ui/Button';
import { formatBillName, formatMajor, formatPeriod } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';

function Lines({ bill, currency, planName }: { bill: EditionBill; currency: string; planName: string }) {
  const money = { kind: 'number' as const, decimals: 2, unit: currency };
  return (
    <LedgerTable
      label={`Lines of the bill of ${formatBillName(bill)}`}
      columns={[
        { key: 'line', head: 'Line' },
        { key: 'before', head: 'As it runs', ...money },
        { key: 'after', head: planName, ...money, picked: true },
        { key: 'change', head: 'Change', ...money, signed: true },
      ]}
      rows={bill.lines.map((line) => ({
        id: line.id,
        cells: { line: line.label, before: line.before, after: line.after, change: line.after - line.before },
      }))}
      total={{ line: 'Bill', before: bill.before, after: bill.after, change: bill.after - bill.before }}
    />
  );
}

/** Bills before and after as a picture and a table; a bill opens to its lines. */
export function BillsBeforeAfter({ content }: { content: EditionContent }) {
  const { bills, currency, plan, standing } = content;
  const [from, setFrom] = useState(bills[0]?.from);
  const opened = bills.find((bill) => bill.from === from);
  return (
    <>
      <div className="client-columns">
        <div className="working">
          <BillsBeforeAfterFigure
            finding={`Over the year the bills fall from ${formatMajor(standing.yearTotal, currency, { whole: true })} to ${formatMajor(plan.yearTotal, currency, { whole: true })}.`}
            reading="What poor power factor costs in each bill. Solid copper: what remains. Hatched verdigris: what the plan takes away."
            fileName={`bills-edition-${content.number}`}
            {...poorFactorBars(content)}
          />
        </div>
        <aside className="result">
          <ResultSums
            title="The year"
            rows={[
              { label: 'As it runs', value: formatMajor(standing.yearTotal, currency) },
              { label: plan.name, value: formatMajor(plan.yearTotal, currency) },
              { label: 'Saved', value: formatMajor(plan.saving, currency), kind: 'total', tone: 'leading' },
            ]}
          />
        </aside>
      </div>
      <div className="client-columns">
        <div className="working">
          <h2 className="section-title">Bill by bill</h2>
          <LedgerTable
            label="Bills before and after"
            roomy
            stack
            {...billsTable(content)}
            renderActions={(row) => (
              <Button kind="quiet" onClick={() => setFrom(row.id)} aria-pressed={row.id === from}>
                Lines
              </Button>
            )}
          />
        </div>
        <aside className="result">
          <h2 className="section-title">Before and after</h2>
          <p>
            “As it runs” is each bill as the schedule prices the meter’s readings; what the utility billed stands beside
            it.
          </p>
        </aside>
      </div>
      {opened && (
        <section className="client-row" aria-live="polite">
          <h2 className="section-title">Lines of the bill of {formatPeriod(opened.from, opened.to, { year: true })}</h2>
          <Lines bill={opened} currency={currency} planName={plan.name} />
        </section>
      )}
    </>
  );
}
