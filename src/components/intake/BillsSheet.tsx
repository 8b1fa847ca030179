import { useState } from 'react';
import { ApiError } from '../../client/api';
import { removeBill } from '../../client/intake';
import { daysBetween, periodFlaws, type BillsStation, type BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { formatCount, formatMoney, formatPeriod } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import type { LedgerRow } from '../ui/ledger';
import { Notice } from '../ui/Notice';
import { BillForm } from './BillForm';
import { billedMinor, billLedger, billName, keptBill } from './bill-ledger';
import { billsHeading } from './bill-words';
import { BillsResult } from './BillsResult';
import { BringIn } from './BringIn';
import { FileList } from './FileList';
import { ColumnNames, SheetHeading, SheetPart } from './Sheet';

export interface BillsSheetProps extends BillsStation {
  /** Begin with the empty form open: one types bill after bill. */
  typing: boolean;
}

type Editing = { bill: BillView | null } | null;

/** Loads the page again, so that sums, bus and findings follow; with `typing` the form opens for the next bill. */
function reload(typing: boolean): void {
  const { pathname } = window.location;
  window.history.replaceState(null, '', typing ? `${pathname}?typing#bill` : pathname);
  window.location.reload();
}

/** Station Bills: the year line by line as billed, the form for a bill on paper, and the files. */
export function BillsSheet(props: BillsSheetProps) {
  const { code, currency, bills, laterBills, files, timeZone, year } = props;
  const [editing, setEditing] = useState<Editing>(props.typing ? { bill: null } : null);
  const [removing, setRemoving] = useState<BillView | null>(null);
  const all = [...bills, ...laterBills].sort((a, b) => a.from.localeCompare(b.from));
  const heading = billsHeading(bills.map(keptBill), currency, year);
  const open = (bill: BillView | null) => {
    setRemoving(null);
    setEditing({ bill });
    requestAnimationFrame(() => document.getElementById('bill')?.scrollIntoView({ block: 'start' }));
  };
  const actions = (row: LedgerRow) => {
    const bill = all.find((one) => String(one.id) === row.id);
    return (
      bill && (
        <span className="actions-tight">
          <Button kind="quiet" onClick={() => open(bill)} aria-label={`Edit the bill of ${billName(bill.to)}`}>
            Edit
          </Button>
          <Button kind="quiet" onClick={() => setRemoving(bill)} aria-label={`Remove the bill of ${billName(bill.to)}`}>
            Remove
          </Button>
        </span>
      )
    );
  };
  const tableOf = (some: BillView[], label: string) => (
    <LedgerTable
      {...billLedger(some.map(keptBill), currency, overlapping(some))}
      label={label}
      renderActions={actions}
    />
  );
  const any = all.length > 0;
  return (
    <>
      <SheetHeading title={heading.title} lead={heading.lead}>
        {!editing && (
          <Button kind={any ? 'primary' : 'secondary'} onClick={() => open(null)}>
            Type a bill
          </Button>
        )}
      </SheetHeading>
      <ColumnNames />
      {any && (
        <SheetPart
          id="year"
          number="1.1"
          title="The year, line by line, as billed"
          lead={`Amounts in ${currency}. A total opens the whole bill. Whether a bill is right is the question of the station Tariff.`}
          reference={
            <>
              <p>A bill is named by the month its last day lies in.</p>
              <p>Lines less total: the sum of the lines less the printed total.</p>
            </>
          }
          result={<BillsResult {...props} />}
        >
          <div className="stacked">
            {bills.length > 0 ? tableOf(bills, 'Bills of the year') : <p>None of the kept bills lies in the year.</p>}
            {removing && <Removal code={code} bill={removing} onLeave={() => setRemoving(null)} />}
          </div>
        </SheetPart>
      )}
      {laterBills.length > 0 && (
        <SheetPart
          id="later"
          number="1.2"
          title="Bills outside the year"
          lead="They do not enter the year’s pricing. Later ones are what the station Proof compares with the promise."
        >
          {tableOf(laterBills, 'Bills outside the year')}
        </SheetPart>
      )}
      {editing && (
        <SheetPart
          id="bill"
          number={laterBills.length > 0 ? '1.3' : any ? '1.2' : '1.1'}
          title={
            editing.bill ? `Bill of ${formatPeriod(editing.bill.from, editing.bill.to, { year: true })}` : 'Type a bill'
          }
          lead="Tab goes down the form, Enter keeps the bill. Leave empty what the bill does not show."
          reference={<p>The last day belongs to the period, as bills print it.</p>}
          result={<FormNotes bill={editing.bill} />}
        >
          <BillForm
            key={editing.bill?.id ?? 'new'}
            code={code}
            currency={currency}
            bill={editing.bill}
            bills={all}
            yearFrom={year.from}
            onDone={() => reload(editing.bill === null)}
            onCancel={() => setEditing(null)}
          />
        </SheetPart>
      )}
      <SheetPart
        id="files"
        number={
          ['1.1', '1.2', '1.3', '1.4'][Number(any) + Number(laterBills.length > 0) + Number(editing !== null)] ?? ''
        }
        title={files.length > 0 ? 'Files' : 'Bring in the bills'}
        lead={
          files.length > 0
            ? 'Each file is kept byte for byte as it came, with its check sum.'
            : 'A table with a row for each bill: period, quantities, line charges, total. Nothing is stored until you have seen it and keep it; keeping can be undone.'
        }
      >
        <div className="stacked">
          <BringIn code={code} kind="bills" primary={!any && !editing} />
          {files.length > 0 && <FileList code={code} files={files} timeZone={timeZone} goes={goesWith(all)} />}
        </div>
      </SheetPart>
    </>
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

function FormNotes({ bill }: { bill: BillView | null }) {
  if (!bill) {
    return <p>After keeping, the form opens for the next period with the same lines.</p>;
  }
  return (
    <>
      <h3>{bill.source ? `From ${bill.source.fileName}` : 'Typed by hand'}</h3>
      <p>
        {bill.source?.row ? `${bill.source.row}. ` : ''}
        Every change is in the trail with who made it.
      </p>
    </>
  );
}

/** Asks once, naming what goes. */
function Removal({ code, bill, onLeave }: { code: string; bill: BillView; onLeave: () => void }) {
  const [fault, setFault] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const remove = async () => {
    setBusy(true);
    try {
      await removeBill(code, bill);
      reload(false);
    } catch (error) {
      setBusy(false);
      setFault(error instanceof ApiError ? error.message : 'The bill could not be removed. Load the page again.');
    }
  };
  const what = `${formatPeriod(bill.from, bill.to, { year: true })}, ${formatCount(daysBetween(bill.from, bill.to), 'day')}, ${formatCount(bill.lines.length, 'line')}, ${formatMoney(billedMinor(keptBill(bill)), bill.currency)}`;
  return (
    <Notice kind={fault ? 'fault' : 'plain'} title={fault ?? `Remove the bill of ${billName(bill.to)}?`}>
      <span>{what}.</span>
      <span className="actions">
        <Button kind="secondary" size="small" busy={busy} onClick={() => void remove()}>
          Remove it
        </Button>
        <Button kind="quiet" onClick={onLeave}>
          Leave it
        </Button>
      </span>
    </Notice>
  );
}
