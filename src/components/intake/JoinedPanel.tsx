import { useEffect, useState } from 'react';
import { ApiError } from '../../client/api';
import { takeBillApart } from '../../client/intake';
import type { BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { formatBillName, formatCount, formatSpelled } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import { partsLedger } from './bill-ledger';
import { joinedWords } from './bill-words';
import { reload } from './reload';

export interface JoinedPanelProps {
  code: string;
  bill: BillView;
  currency: string;
  onEdit: (part: BillView) => void;
  onClose: () => void;
}

/** The invoices of a joined bill under its row: what each asks for, why they are one, and the way back. */
export function JoinedPanel({ code, bill, currency, onEdit, onClose }: JoinedPanelProps) {
  const [fault, setFault] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const parts = bill.parts ?? [];
  useEffect(() => {
    const listen = (event: KeyboardEvent) => {
      if (event.key === 'Escape') onClose();
    };
    document.addEventListener('keydown', listen);
    return () => document.removeEventListener('keydown', listen);
  }, [onClose]);
  const takeApart = async () => {
    setBusy(true);
    try {
      await takeBillApart(code, bill);
      reload(false);
    } catch (error) {
      setBusy(false);
      setFault(error instanceof ApiError ? error.message : 'It could not be taken apart. Load the page again.');
    }
  };
  const label = `Invoices of ${formatBillName(bill)}`;
  return (
    <div className="joined-panel" role="region" aria-label={label}>
      <h3>{`Joined from ${formatSpelled(parts.length)} invoices, priced as one bill of ${formatCount(bill.days, 'day')}`}</h3>
      <LedgerTable
        {...partsLedger(bill, currency, code)}
        label={label}
        stack
        renderActions={(row) => {
          const part = parts.find(({ id }) => String(id) === row.id);
          return (
            part && (
              <Button
                kind="quiet"
                onClick={() => onEdit(part)}
                aria-label={`Edit invoice ${part.invoice ?? formatBillName(part)}`}
              >
                Edit
              </Button>
            )
          );
        }}
      />
      <p className="hint mt-2">
        {bill.joinNote && `${bill.joinNote.replace(/([^.!?])$/, '$1.')} `}
        {joinedWords(bill)}{' '}
        <Button kind="quiet" busy={busy} onClick={() => void takeApart()}>
          Take apart again
        </Button>
      </p>
      {fault && (
        <p className="fault" role="alert">
          {fault}
        </p>
      )}
    </div>
  );
}
