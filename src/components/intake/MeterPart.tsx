import type { BillsStation } from '../../schemas/bill';
import { FindingSlip } from '../ui/FindingSlip';
import { formatBillName, formatPeriod } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import { meterLedger, meterLetters, sharedRemarks } from './meter-ledger';
import { SheetPart } from './Sheet';

/** Every bill of the year beside the kept readings of its period, with what differs named. */
export function MeterPart({ bills, meterChecks, number }: BillsStation & { number: string }) {
  const letters = meterLetters(meterChecks);
  const { shared, own } = sharedRemarks(meterChecks);
  const said = own.filter(({ billId }) => letters.has(billId));
  return (
    <SheetPart
      id="meter"
      number={number}
      title="Billed against metered"
      lead="The readings kept at the station Intervals, over the days of each bill."
      reference={
        <>
          <p>Peak: the highest mean of 15 minutes, or of the length of the readings.</p>
          <p>≥: readings are missing; it is at least that.</p>
          <p>Power factor: at the peak, or over the period where the bill prints that.</p>
        </>
      }
      result={
        <>
          {said.length === 0 && <p>No bill differs from the readings.</p>}
          {shared.length > 0 && <p>{`On every bill: ${shared.join(' ')}`}</p>}
          <div className="mt-3">
            <Slips {...{ bills, said, letters }} />
          </div>
        </>
      }
    >
      <LedgerTable {...meterLedger(bills, meterChecks)} label="Bills against the meter" stack />
    </SheetPart>
  );
}

function Slips(props: {
  bills: BillsStation['bills'];
  said: BillsStation['meterChecks'];
  letters: Map<number, string>;
}) {
  return props.said.map(({ billId, remarks, figures }) => {
    const bill = props.bills.find(({ id }) => id === billId);
    if (!bill) return null;
    const differs = figures.some(({ agrees }) => agrees === false);
    const title = `${formatBillName(bill)}, ${formatPeriod(bill.from, bill.to)}`;
    return (
      <FindingSlip key={billId} letter={props.letters.get(billId)} title={title} caution={!differs}>
        {remarks.join(' ')}
      </FindingSlip>
    );
  });
}
