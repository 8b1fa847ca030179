import { fromMinorUnits } from '../../core/units';
import type { CompareView, SweepView } from '../../schemas/compare';
import type { FigureText } from '../charts/ChartFigure';
import { formatAmount, formatCount, formatMoney, formatNumber } from '../ui/format';
import type { SumRow } from '../ui/ResultSums';
import type { MonthsChartData } from './MonthsChart';
import type { SweepData } from './SweepChart';

/** Bars of every bill, with the finding: in how many of them another schedule is cheaper. */
export function monthsData(view: CompareView, code: string): MonthsChartData & FigureText {
  const { columns, months, currency } = view;
  const [standing, ...others] = columns;
  const counts = others.map(({ name, months: own }) => {
    const cheaper = own.filter(({ totalMinor }, index) => totalMinor < standing!.months[index]!.totalMinor);
    const among = formatCount(own.length, 'bill');
    const count =
      cheaper.length === 0 ? 'none' : cheaper.length === own.length ? 'every one' : formatNumber(cheaper.length);
    return `${name} is cheaper than ${standing!.name} in ${count} of ${among}`;
  });
  return {
    currency,
    bills: months.map(({ name }, index) => {
      const [label = '', year] = name.split(' ');
      return { label, year: index === 0 || label === 'Jan' ? year : undefined };
    }),
    schedules: columns.map(({ name, months: own }) => ({
      name,
      amounts: own.map(({ totalMinor }) => fromMinorUnits(totalMinor, currency)),
    })),
    finding: `${counts.join('; ')}.`,
    reading: 'A group of bars a bill: solid ink is the standing schedule.',
    fileName: `${code}-schedules-by-bill`,
  };
}

/** Cost over a varied load, with what it says of every pair. */
export function sweepData(
  { columns, currency, kwh }: CompareView,
  sweep: SweepView,
  over: SweepData['over'],
  code: string,
): SweepData & FigureText {
  const names = sweep.ids.map((id) => columns.find((column) => column.id === id)?.name ?? id);
  return {
    currency,
    over,
    names,
    points: sweep.points,
    marks: sweep.marks,
    kwh: kwh ?? 0,
    finding: sweep.words
      .map(({ name, finding }) => (sweep.words.length > 1 ? `${name}: ${finding}` : finding))
      .join(' '),
    reading: 'Solid: the standing schedule. A cross: two cost the same, or jump past one another.',
    fileName: `${code}-schedules-by-${over === 'share' ? 'power-factor' : 'load'}`,
  };
}

/** Totals of the result column. */
export function resultRows({ columns, currency }: CompareView): SumRow[] {
  const [standing, ...others] = columns;
  return [
    { label: `${standing!.name}, ${currency}`, value: formatAmount(standing!.totalMinor, currency), kind: 'strong' },
    ...others.flatMap(({ name, totalMinor, differenceMinor }): SumRow[] => [
      { label: name, value: formatAmount(totalMinor, currency), kind: 'subtotal' },
      {
        label: differenceMinor > 0 ? 'dearer by' : 'cheaper by',
        value: formatMoney(Math.abs(differenceMinor), currency),
        kind: 'strong',
        tone: differenceMinor < 0 ? 'leading' : undefined,
      },
    ]),
  ];
}
