import { useState } from 'react';
import { takeBackFill } from '../../client/gap-fills';
import type { GapFillView } from '../../schemas/gap-fill';
import { Button } from '../ui/Button';
import { formatDate, formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { gapInWords } from './carpet-marks';
import { gapMethodNames } from './gap-words';
import { SheetPart } from './Sheet';

export interface FillsPartProps {
  code: string;
  number: string;
  fills: GapFillView[];
  timeZone: string;
}

/** The gaps that were estimated: where, how, by whom, what they add, and the way back. */
export function FillsPart({ code, number, fills, timeZone }: FillsPartProps) {
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const takeBack = async (fill: GapFillView) => {
    setBusy(true);
    setFault(null);
    try {
      await takeBackFill(code, fill);
      window.location.reload();
    } catch (refusal) {
      setBusy(false);
      setFault(refusal instanceof Error ? refusal.message : 'This failed in the browser. Load the page again.');
    }
  };
  const kwh = fills.reduce((sum, fill) => sum + (fill.kwh ?? 0), 0);
  return (
    <SheetPart
      id="estimated"
      number={number}
      title="Estimated gaps"
      lead="Nobody measured these. They are marked in every bill, plan and report that rests on them, and worked out again when the readings around them change."
      result={<p>{`${formatNumber(kwh)} kWh of the year are estimated here.`}</p>}
    >
      <LedgerTable
        {...fillsTable(fills, timeZone)}
        label="Estimated gaps"
        roomy
        stack
        renderActions={(row) => {
          const fill = fills.find(({ id }) => String(id) === row.id);
          return (
            fill && (
              <Button kind="quiet" busy={busy} onClick={() => void takeBack(fill)}>
                Take back
              </Button>
            )
          );
        }}
      />
      {fault && <Notice kind="fault" title={fault} />}
    </SheetPart>
  );
}

function fillsTable(fills: GapFillView[], timeZone: string): LedgerData {
  return {
    columns: [
      { key: 'when', head: 'When' },
      { key: 'how', head: 'How', wrap: true },
      { key: 'intervals', head: 'Readings', kind: 'number' },
      { key: 'kwh', head: 'Adds', unit: 'kWh', kind: 'number' },
      { key: 'by', head: 'By', quiet: true },
    ],
    rows: fills.map((fill) => ({
      id: String(fill.id),
      cells: {
        when: gapInWords(fill, timeZone),
        how: gapMethodNames[fill.method],
        intervals: { value: fill.intervals, note: standing(fill) },
        kwh: fill.kwh,
        by: [fill.madeBy, formatDate(fill.madeAt, timeZone)].filter(Boolean).join(', '),
      },
    })),
  };
}

function standing({ intervals, left }: GapFillView): string | undefined {
  if (intervals === 0) return left > 0 ? 'nothing to go by any more' : 'the readings have come in';
  return left > 0 ? `${formatNumber(left)} stay missing` : undefined;
}
