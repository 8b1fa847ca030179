import { useState } from 'react';
import { ApiError } from '../../client/api';
import { removeBill } from '../../client/intake';
import { daysBetween, type BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { formatBillName, formatCount, formatMoney, formatPeriod } from '../ui/format';
import { Notice } from '../ui/Notice';
import { billedMinor, keptBill } from './bill-ledger';
import { reload } from './reload';

/** Where the bill came from, and the way to remove it. */
export function BillNotes({ code, bill }: { code: string; bill: BillView | null }) {
  if (!bill) return <p>After keeping, the form opens for the next period with the same lines.</p>;
  return (
    <>
      <h3>{bill.source ? `From ${bill.source.fileName}` : 'Typed by hand'}</h3>
      <p>
        {bill.source?.row ? `${bill.source.row[0]?.toUpperCase()}${bill.source.row.slice(1)}. ` : ''}
        Every change is in the trail with who made it.
      </p>
      <Removal key={bill.id} code={code} bill={bill} />
    </>
  );
}

/** Asks once, naming what goes. */
function Removal({ code, bill }: { code: string; bill: BillView }) {
  const [asked, setAsked] = useState(false);
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
  if (!asked) {
    return (
      <p>
        <Button kind="quiet" onClick={() => setAsked(true)}>
          Remove this bill
        </Button>
      </p>
    );
  }
  const days = formatCount(daysBetween(bill.from, bill.to), 'day');
  const amount = formatMoney(billedMinor(keptBill(bill)), bill.currency);
  const what = `${formatPeriod(bill.from, bill.to, { year: true })}, ${days}, ${formatCount(bill.lines.length, 'line')}, ${amount}`;
  return (
    <Notice kind={fault ? 'fault' : 'plain'} title={fault ?? `Remove the bill of ${formatBillName(bill)}?`}>
      <span>{what}.</span>
      <span className="actions">
        <Button kind="secondary" size="small" busy={busy} onClick={() => void remove()}>
          Remove it
        </Button>
        <Button kind="quiet" onClick={() => setAsked(false)}>
          Leave it
        </Button>
      </span>
    </Notice>
  );
}
