import { useState } from 'react';
import { ApiError } from '../../client/api';
import { joinBills } from '../../client/intake';
import { daysBetween, type BillView, type JoinSuggestion } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { Field } from '../ui/Field';
import { capital, formatCount, formatPeriod, formatSpelled } from '../ui/format';
import { Notice } from '../ui/Notice';
import { reload } from './reload';

export interface JoinSuggestionsProps {
  code: string;
  bills: BillView[];
  joinable: JoinSuggestion[];
}

/** Bills that look like the invoices of one bill: a person says whether they are. */
export function JoinSuggestions({ code, bills, joinable }: JoinSuggestionsProps) {
  return joinable.map((suggestion) => (
    <Suggestion key={suggestion.ids.join('-')} code={code} bills={bills} suggestion={suggestion} />
  ));
}

function Suggestion({ code, bills, suggestion }: { code: string; bills: BillView[]; suggestion: JoinSuggestion }) {
  const [note, setNote] = useState('');
  const [fault, setFault] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const { ids, from, to, demandBilledOn } = suggestion;
  const invoices = bills.filter(({ id }) => ids.includes(id));
  const join = async () => {
    setBusy(true);
    try {
      await joinBills(code, invoices, note);
      reload(false);
    } catch (error) {
      setBusy(false);
      setFault(error instanceof ApiError ? error.message : 'They could not be joined. Load the page again.');
    }
  };
  const count = formatSpelled(invoices.length);
  const days = formatCount(daysBetween(from, to), 'day');
  const periods = invoices.map((bill) => `${formatPeriod(bill.from, bill.to)} (${formatCount(bill.days, 'day')})`);
  return (
    <Notice
      kind={fault ? 'fault' : 'plain'}
      title={fault ?? `${capital(count)} bills look like the invoices of one bill of ${days}`}
    >
      <span>
        {`${periods.join(' and ')} join on day by day. ${demandWords(demandBilledOn, invoices.length)} Joined they are priced as one bill, and a ratchet counts them as one; they can be taken apart again.`}
      </span>
      <span className="actions items-end">
        <Field
          label="Why they are one, where it is known"
          size="small"
          maxLength={500}
          value={note}
          onChange={(event) => setNote(event.target.value)}
        />
        <Button kind="secondary" size="small" busy={busy} onClick={() => void join()}>
          {`Join ${count} invoices`}
        </Button>
      </span>
    </Notice>
  );
}

function demandWords(billedOn: number, count: number): string {
  if (billedOn === 0) return 'None of them bills demand.';
  if (billedOn === 1) return 'Demand is billed on one of them only.';
  return `Demand is billed on ${billedOn === count ? 'each of them' : `${billedOn} of them`}: they may be bills of their own.`;
}
