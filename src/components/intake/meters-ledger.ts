import type { MeterOfYear } from '../../schemas/intervals';
import type { LedgerData, LedgerRow } from '../ui/ledger';

/** Address of the station Intervals with one of its meters shown. */
const pageOf = (code: string, meterId: number) => `/engagements/${encodeURIComponent(code)}/intervals?meter=${meterId}`;

const percent = (present: number, intervals: number) =>
  intervals === 0 ? 0 : Math.floor((present / intervals) * 10_000) / 100;

/** A row a meter, and the sum that is priced. */
export function metersLedger(
  code: string,
  meters: MeterOfYear[],
  together: Omit<MeterOfYear, 'id' | 'label'> | null,
  shown: number,
): LedgerData {
  const cellsOf = ({ present, intervals, kwh, kvarhLagging, maxKw }: Omit<MeterOfYear, 'id' | 'label'>) => ({
    present: percent(present, intervals),
    kwh,
    kvarhLagging,
    maxKw,
  });
  const rows = meters.map((meter): LedgerRow => ({
    id: String(meter.id),
    kind: meter.id === shown ? 'chosen' : 'plain',
    cells: { meter: { value: meter.label, href: pageOf(code, meter.id) }, ...cellsOf(meter) },
  }));
  return {
    columns: [
      { key: 'meter', head: 'Meter' },
      { key: 'present', head: 'Present', unit: '%', kind: 'number', decimals: 2 },
      { key: 'kwh', head: 'Energy', unit: 'kWh', kind: 'number' },
      { key: 'kvarhLagging', head: 'Lagging', unit: 'kvarh', kind: 'number' },
      { key: 'maxKw', head: 'Highest', unit: 'kW', kind: 'number', decimals: 1 },
    ],
    rows,
    total: together
      ? { meter: 'Together', ...cellsOf(together) }
      : { meter: 'Together', kwh: 'when each has readings' },
  };
}
