import { useState } from 'react';
import type { PricedBillView } from '../../schemas/plan';
import { BillsBeforeAfterFigure, type BillsBeforeAfterData } from '../charts/BillsBeforeAfterChart';
import { SelectField } from '../ui/Field';
import { LedgerTable } from '../ui/LedgerTable';
import { billLines } from './tables';
import { formatBillName } from '../ui/format';

export interface BillsPairProps {
  chart: BillsBeforeAfterData;
  finding: string;
  reading: string;
  fileName: string;
  before: PricedBillView[];
  after: PricedBillView[];
}

/** Every bill before and after a plan; one opened line by line. */
export function BillsPair({ chart, finding, reading, fileName, before, after }: BillsPairProps) {
  const [opened, setOpened] = useState('');
  const index = before.findIndex((bill) => bill.from === opened);
  const pair = index >= 0 ? { before: before[index]!, after: after[index]! } : null;
  return (
    <>
      <BillsBeforeAfterFigure {...chart} finding={finding} reading={reading} fileName={fileName} />
      <div className="bill-opener">
        <SelectField
          label="Open a bill line by line"
          size="small"
          placeholder="Choose a bill"
          value={opened}
          onChange={(event) => setOpened(event.target.value)}
          options={before.map((bill) => ({ value: bill.from, label: formatBillName(bill) }))}
        />
      </div>
      {pair && (
        <LedgerTable
          {...billLines(pair.before, pair.after, chart.currency, chart.planName)}
          label={`Bill of ${formatBillName(pair.before)}, standing and ${chart.planName}`}
        />
      )}
    </>
  );
}
