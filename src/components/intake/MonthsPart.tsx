import type { KeptYear, MonthOfLoad } from '../../schemas/intervals';
import { formatDate, formatDateTime, formatMonth, formatNumber } from '../ui/format';
import type { LedgerData, LedgerRow } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';
import { SheetPart } from './Sheet';

/** The year by calendar months, with its balance of reactive energy. */
export function MonthsPart({ year, timeZone }: { year: KeptYear; timeZone: string }) {
  return (
    <SheetPart
      id="months"
      number={year.peak ? '2.3' : '2.2'}
      title="Month by month"
      lead={`Calendar months of the site’s time. Sums are of the readings that are there${year.estimated > 0 ? ', estimated ones included' : '; nothing is filled in'}.`}
      result={<Balance months={year.months} />}
    >
      <LedgerTable {...monthsTable(year.months, timeZone)} label="Readings month by month" />
    </SheetPart>
  );
}

const sum = (months: MonthOfLoad[], key: 'kwh' | 'kvarhLagging' | 'kvarhLeading') =>
  months.some((month) => month[key] !== null) ? months.reduce((total, month) => total + (month[key] ?? 0), 0) : null;

function Balance({ months }: { months: MonthOfLoad[] }) {
  const kwh = sum(months, 'kwh');
  const lagging = sum(months, 'kvarhLagging');
  const leading = sum(months, 'kvarhLeading');
  const figure = (value: number | null) => (value === null ? 'not in the files' : formatNumber(value));
  return (
    <>
      <ResultSums
        rows={[
          { label: 'Energy, kWh', value: figure(kwh) },
          { label: 'Lagging, kvarh', value: figure(lagging), tone: 'lagging' },
          { label: 'Leading, kvarh', value: figure(leading), tone: 'leading' },
        ]}
      />
      {kwh !== null && lagging !== null && kwh > 0 && (
        <p>
          Lagging kvarh are {formatNumber((lagging / kwh) * 100, { decimals: 1 })} % of the kWh: an average power factor
          of {formatNumber(kwh / Math.hypot(kwh, lagging), { decimals: 3 })}.
        </p>
      )}
    </>
  );
}

function monthsTable(months: MonthOfLoad[], timeZone: string): LedgerData {
  const figure = (key: string, head: string, unit?: string) => ({ key, head, unit, kind: 'number' as const });
  const rows = months.map((month): LedgerRow => {
    const missing = month.intervals - month.present;
    const none = month.present === 0 ? 'none' : null;
    return {
      id: month.from,
      cells: {
        month: formatMonth(month.from),
        intervals: month.intervals,
        missing: { value: missing, tone: missing > 0 ? 'fault' : undefined },
        estimated: month.estimated,
        kwh: month.kwh ?? none,
        lagging: month.kvarhLagging === null ? none : { value: month.kvarhLagging, tone: 'lagging' },
        leading: month.kvarhLeading === null ? none : { value: month.kvarhLeading, tone: 'leading' },
        peak: month.maxKw,
        at: month.maxKwMs === null ? null : formatDateTime(month.maxKwMs, timeZone),
      },
    };
  });
  const total = (pick: (month: MonthOfLoad) => number) => months.reduce((all, month) => all + pick(month), 0);
  const highest = months.reduce((top, month) => ((month.maxKw ?? 0) > (top.maxKw ?? 0) ? month : top), months[0]!);
  return {
    columns: [
      { key: 'month', head: 'Month' },
      figure('intervals', 'Intervals'),
      figure('missing', 'Missing'),
      figure('estimated', 'Estimated'),
      figure('kwh', 'Energy', 'kWh'),
      figure('lagging', 'Lagging', 'kvarh'),
      figure('leading', 'Leading', 'kvarh'),
      figure('peak', 'Highest', 'kW'),
      { key: 'at', head: 'on', quiet: true },
    ],
    rows,
    total: {
      month: 'Year',
      intervals: total((month) => month.intervals),
      missing: total((month) => month.intervals - month.present),
      estimated: total((month) => month.estimated),
      kwh: sum(months, 'kwh'),
      lagging: sum(months, 'kvarhLagging'),
      leading: sum(months, 'kvarhLeading'),
      peak: highest.maxKw,
      at: highest.maxKwMs === null ? null : formatDate(highest.maxKwMs, timeZone),
    },
  };
}
