import { useState } from 'react';
import { periodFlaws, type BillsStation, type BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { formatBillName, formatCount, formatPeriod } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import type { LedgerRow } from '../ui/ledger';
import { BillForm } from './BillForm';
import { billLedger, keptBill } from './bill-ledger';
import { billsHeading, joinedLead } from './bill-words';
import { BillNotes } from './BillNotes';
import { BillsResult } from './BillsResult';
import { BringIn } from './BringIn';
import { FileList } from './FileList';
import { JoinedPanel } from './JoinedPanel';
import { JoinSuggestions } from './JoinSuggestions';
import { MeterPart } from './MeterPart';
import { reload } from './reload';
import { PagesBeside } from './pages/PagesBeside';
import { ColumnNames, SheetHeading, SheetPart } from './Sheet';
import { TraceOf } from './TraceOf';

export interface BillsSheetProps extends BillsStation {
  /** Begin with the empty form open: one types bill after bill. */
  typing: boolean;
}

type Editing = { bill: BillView | null } | null;

/** Station Bills: the year line by line as billed, the form for a bill on paper, and the files. */
export function BillsSheet(props: BillsSheetProps) {
  const { currency, bills, laterBills, year } = props;
  const [editing, setEditing] = useState<Editing>(props.typing ? { bill: null } : null);
  const any = bills.length + laterBills.length > 0;
  const heading = billsHeading(
    bills.map((bill) => keptBill(bill)),
    currency,
    year,
  );
  const open = (bill: BillView | null) => {
    setEditing({ bill });
    requestAnimationFrame(() => {
      document.getElementById('bill')?.scrollIntoView({ block: 'start' });
      document.querySelector<HTMLElement>('#bill input')?.focus({ preventScroll: true });
    });
  };
  const metered = props.meterChecks.length > 0;
  const shown = [
    any && 'year',
    laterBills.length > 0 && 'others',
    editing && 'form',
    metered && 'meter',
    'files',
  ].filter(Boolean);
  const number = (part: string) => `1.${shown.indexOf(part) + 1}`;
  return (
    <>
      <SheetHeading title={heading.title} lead={[heading.lead, joinedLead(bills)].filter(Boolean).join(' ')}>
        {!editing && (
          <Button kind={any ? 'primary' : 'secondary'} onClick={() => open(null)}>
            Type a bill
          </Button>
        )}
      </SheetHeading>
      <ColumnNames />
      {any && <YearPart {...props} number={number('year')} onEdit={open} />}
      {laterBills.length > 0 && <OtherBillsPart {...props} number={number('others')} onEdit={open} />}
      {editing && <FormPart {...props} number={number('form')} bill={editing.bill} onLeave={() => setEditing(null)} />}
      {metered && <MeterPart {...props} number={number('meter')} />}
      <FilesPart {...props} number={number('files')} isFirst={!any && !editing} />
    </>
  );
}

interface PartProps extends BillsStation {
  number: string;
}

type TableProps = PartProps & { onEdit: (bill: BillView) => void };

function BillTable({ code, currency, bills, label, onEdit }: TableProps & { label: string }) {
  const billOf = (row: LedgerRow) => bills.find((one) => String(one.id) === row.id);
  const actions = (row: LedgerRow) => {
    const bill = billOf(row);
    return (
      bill &&
      !bill.parts && (
        <Button kind="quiet" onClick={() => onEdit(bill)} aria-label={`Edit the bill of ${formatBillName(bill)}`}>
          Edit
        </Button>
      )
    );
  };
  const rows = bills.map((bill) => keptBill(bill, code));
  const panel = (row: LedgerRow, close: () => void) => {
    const bill = billOf(row);
    return bill?.parts && <JoinedPanel {...{ code, bill, currency, onEdit }} onClose={close} />;
  };
  const ledger = billLedger(rows, currency, overlapping(bills));
  return <LedgerTable {...ledger} label={label} stack renderActions={actions} renderPanel={panel} />;
}

function YearPart(props: TableProps) {
  return (
    <SheetPart
      id="year"
      number={props.number}
      title="The year, line by line, as billed"
      lead={`Amounts in ${props.currency}. A total opens the whole bill. Whether a bill is right is the question of the station Tariff.`}
      reference={
        <>
          <p>A bill is named by the month of its middle day.</p>
          {props.bills.some(({ differenceMinor }) => differenceMinor) && (
            <p>Lines less total: the sum of the lines less the printed total.</p>
          )}
        </>
      }
      result={<BillsResult {...props} />}
    >
      {props.bills.length > 0 ? (
        <div className="stacked bill-year">
          <BillTable {...props} label="Bills of the year" />
          <JoinSuggestions code={props.code} bills={[...props.bills, ...props.laterBills]} joinable={props.joinable} />
        </div>
      ) : (
        <p>None of the kept bills lies in the year.</p>
      )}
    </SheetPart>
  );
}

function OtherBillsPart(props: TableProps) {
  return (
    <SheetPart
      id="others"
      number={props.number}
      title="Bills outside the year"
      lead="They do not enter the year’s pricing. Later ones are what the station Proof compares with the promise."
    >
      <BillTable {...props} bills={props.laterBills} label="Bills outside the year" />
    </SheetPart>
  );
}

function FormPart(props: PartProps & { bill: BillView | null; onLeave: () => void }) {
  const { code, currency, bill, year, timeZone } = props;
  const all = [...props.bills, ...props.laterBills]
    .flatMap((one) => one.parts ?? one)
    .sort((a, b) => a.from.localeCompare(b.from));
  // One types bill after bill until the year has no gap left.
  const handleDone = (saved: BillView) =>
    reload(bill === null && periodFlaws([...all, saved], year).some((flaw) => flaw.kind === 'gap'));
  return (
    <SheetPart
      id="bill"
      number={props.number}
      title={bill ? `Bill of ${formatPeriod(bill.from, bill.to, { year: true })}` : 'Type a bill'}
      lead="Tab goes down the form, Enter keeps the bill. Leave empty what the bill does not show."
      reference={<p>The last day belongs to the period, as bills print it.</p>}
      result={<BillNotes code={code} bill={bill} />}
    >
      <BillForm
        key={bill?.id ?? 'new'}
        code={code}
        currency={currency}
        bill={bill}
        bills={all}
        yearFrom={year.from}
        onDone={handleDone}
        onCancel={props.onLeave}
        beside={<PagesBeside key={bill?.id ?? 'new'} code={code} timeZone={timeZone} bill={bill} bills={all} />}
      />
      {bill?.source && !bill.parts && (
        <div className="mt-4">
          <TraceOf intakeId={bill.source.intakeId} from={bill.from} />
        </div>
      )}
    </SheetPart>
  );
}

function FilesPart(props: PartProps & { isFirst: boolean }) {
  const { files, code, timeZone, bills, laterBills } = props;
  const any = files.length > 0;
  return (
    <SheetPart
      id="files"
      number={props.number}
      title={any ? 'Files' : 'Bring in the bills'}
      lead={
        any
          ? 'Each file is kept byte for byte as it came, with its check sum.'
          : 'A table with a row for each bill: period, quantities, line charges, total. Nothing is stored until you have seen it and keep it; keeping can be undone.'
      }
    >
      <div className="stacked">
        <BringIn code={code} kind="bills" primary={props.isFirst} />
        {any && (
          <FileList
            code={code}
            files={files}
            timeZone={timeZone}
            goes={goesWith([...bills, ...laterBills].flatMap((bill) => bill.parts ?? bill))}
          />
        )}
      </div>
    </SheetPart>
  );
}

/** Bills whose period begins before the one before them ended. */
function overlapping(bills: BillView[]): Set<string> {
  const flaws = periodFlaws(bills).filter((flaw) => flaw.kind === 'overlap');
  return new Set(bills.filter((bill) => flaws.some((flaw) => flaw.from === bill.from)).map((bill) => String(bill.id)));
}

/** What undoing each file takes away. */
function goesWith(bills: BillView[]): Record<number, string> {
  const goes: Record<number, string> = {};
  for (const id of new Set(bills.flatMap((bill) => bill.source?.intakeId ?? []))) {
    const own = bills.filter((bill) => bill.source?.intakeId === id);
    const first = own[0];
    const last = own.at(-1);
    if (first && last) {
      const edited = own.filter((bill) => bill.version > 0).length;
      const changes = edited > 0 ? `, ${formatCount(edited, 'of them changed', 'of them changed')} since,` : '';
      goes[id] = `${formatCount(own.length, 'bill')} of ${formatPeriod(first.from, last.to, { year: true })}${changes}`;
    }
  }
  return goes;
}
