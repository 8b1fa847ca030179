import type { MonthChoice, MonthLine, MonthSource, MonthView } from '../../../schemas/schedule-editor';
import { SelectField } from '../../ui/Field';
import { currencyDecimals, formatQuantity } from '../../ui/format';
import type { LedgerRow } from '../../ui/ledger';
import { LedgerTable } from '../../ui/LedgerTable';
import { Notice } from '../../ui/Notice';

export interface MonthPanelProps {
  sources: MonthSource[];
  choice: MonthChoice | null;
  onChoose: (choice: MonthChoice) => void;
  month: MonthView | null;
  /** Name of the kept text: "revision 3". */
  keptName: string;
}

const notPriced = { value: 'not priced', tone: 'fault' as const };
const waits = { value: 'waits', tone: 'fault' as const };

const quantityWords = ({ quantity, unit }: MonthLine) =>
  quantity === null || unit === null ? undefined : formatQuantity(quantity, unit, { upTo: 3 });

function rowsOf(month: MonthView): LedgerRow[] {
  const isWaiting = month.yoursMinor === null;
  const hasMoved = (line: MonthLine) => !isWaiting && line.keptMinor !== line.yoursMinor;
  return month.lines.map((line) => ({
    id: line.id,
    kind: hasMoved(line) ? 'chosen' : 'plain',
    cells: {
      line: { value: line.label, note: hasMoved(line) ? (line.explanation ?? undefined) : quantityWords(line) },
      kept: line.keptMinor ?? { value: 'no such line', tone: 'quiet' },
      yours: line.yoursMinor ?? (isWaiting ? notPriced : { value: 'no such line', tone: 'quiet' }),
    },
  }));
}

function MonthTable({ month, keptName }: { month: MonthView; keptName: string }) {
  const money = {
    kind: 'money' as const,
    currency: month.currency,
    decimals: currencyDecimals(month.currency),
  };
  return (
    <LedgerTable
      label={`${month.name} under both texts`}
      columns={[
        { key: 'line', head: 'Line', wrap: true },
        { key: 'kept', head: keptName, ...money },
        { key: 'yours', head: 'Your text', ...money, strong: true },
      ]}
      rows={rowsOf(month)}
      total={{
        line: month.billedMinor === null ? 'Bill' : 'Bill by the schedule',
        kept: month.keptMinor,
        yours: month.yoursMinor ?? waits,
      }}
    />
  );
}

/** A month of an engagement, priced as one types. */
export function MonthPanel({ sources, choice, onChoose, month, keptName }: MonthPanelProps) {
  const source = sources.find(({ code }) => code === choice?.code);
  if (sources.length === 0) {
    return (
      <p className="section-lead">
        No engagement of yours has bills yet. Worked bills under <code>examples:</code> in the text are priced instead.
      </p>
    );
  }
  return (
    <>
      <div className="form-grid month-choice">
        <SelectField
          label="Engagement"
          size="small"
          value={choice?.code ?? ''}
          options={sources.map(({ code, title, uses }) => ({
            value: code,
            label: `${code}, ${title}${uses ? ' (priced on it)' : ''}`,
          }))}
          onChange={(event) => {
            const next = sources.find(({ code }) => code === event.target.value);
            const bill = next?.bills.at(-1);
            if (next && bill) onChoose({ code: next.code, billId: bill.id });
          }}
        />
        <SelectField
          label="Bill"
          size="small"
          value={String(choice?.billId ?? '')}
          options={(source?.bills ?? []).map(({ id, name }) => ({ value: String(id), label: name }))}
          onChange={(event) => choice && onChoose({ code: choice.code, billId: Number(event.target.value) })}
        />
      </div>
      {month?.problem && (
        <Notice kind="fault" title="Your text does not price this month.">{` ${month.problem}`}</Notice>
      )}
      {month && !month.problem && month.keptProblem && (
        <Notice title="The kept text does not price this month.">{` ${month.keptProblem}`}</Notice>
      )}
      {month && month.lines.length > 0 && <MonthTable month={month} keptName={keptName} />}
    </>
  );
}
