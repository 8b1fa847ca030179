import type { IntervalsBeside, IntervalsOverlap } from '../../schemas/overlap';
import { formatDateTime, formatMonth } from '../ui/format';
import type { LedgerData, LedgerRow } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';

const channelWords = { kwh: 'kW', kvarhLagging: 'kvar lagging', kvarhLeading: 'kvar leading' };

/** Readings of a file beside the kept ones, month by month. */
export function IntervalsBesideTable({ overlap, timeZone }: { overlap: IntervalsOverlap; timeZone: string }) {
  return (
    <LedgerTable {...besideTable(overlap, timeZone)} label="Kept readings and those of the file, month by month" />
  );
}

function cellsOf(beside: IntervalsBeside, timeZone: string): LedgerRow['cells'] {
  const { keptKwh, comesKwh, greatest } = beside;
  const differing = beside.inCommon - beside.equal;
  return {
    inCommon: beside.inCommon,
    differing: { value: differing, tone: differing > 0 ? 'warn' : undefined },
    keptKwh,
    comesKwh,
    less: keptKwh === null || comesKwh === null ? null : comesKwh - keptKwh,
    greatest: greatest && {
      value: greatest.difference,
      note: `${channelWords[greatest.channel]}, ${formatDateTime(greatest.ms, timeZone)}`,
    },
    onlyKept: beside.onlyKept,
    onlyComes: beside.onlyComes,
  };
}

function besideTable({ months, total }: IntervalsOverlap, timeZone: string): LedgerData {
  const figure = (key: string, head: string, unit?: string) => ({ key, head, unit, kind: 'number' as const });
  return {
    columns: [
      { key: 'month', head: 'Month' },
      figure('inCommon', 'In both'),
      figure('differing', 'Differing'),
      figure('keptKwh', 'Kept', 'kWh'),
      figure('comesKwh', 'This file', 'kWh'),
      { ...figure('less', 'Difference', 'kWh'), signed: true },
      { ...figure('greatest', 'Widest apart'), decimals: 1, signed: true },
      figure('onlyKept', 'Only kept'),
      figure('onlyComes', 'Only in file'),
    ],
    rows: months.map((month) => ({
      id: month.from ?? '',
      cells: { month: formatMonth(month.from ?? ''), ...cellsOf(month, timeZone) },
    })),
    total: total && months.length > 1 ? { month: 'All', ...cellsOf(total, timeZone), greatest: null } : undefined,
  };
}
