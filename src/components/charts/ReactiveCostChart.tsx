import { Bar, ComposedChart, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { barBox, BarFigure, BarNames, barWidth, type BillLabel } from './bars';
import { ChartFigure, type FigureText } from './ChartFigure';
import { axisLook, narrowBelow, OnPlot, PlotFrame, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, niceTicks } from './scale';

export interface ReactiveCostBill extends BillLabel {
  /** Part in the demand lines, major units. A credit is negative. */
  demand: number;
  /** Part in the lines for kvarh or power factor itself. */
  reactive: number;
}

export interface ReactiveCostData {
  currency: string;
  bills: ReactiveCostBill[];
  /** Names of the two parts: solid, outlined. */
  demandName?: string;
  reactiveName?: string;
}

const totalOf = (bill: ReactiveCostBill) => bill.demand + bill.reactive;

function Bars({ bills, plot, palette }: { bills: ReactiveCostBill[]; plot: Plot; palette: Palette }) {
  const width = barWidth(plot, bills.length);
  return bills.map((bill, index) => {
    const x = plot.x(index);
    const stacked = bill.demand * bill.reactive >= 0;
    const from = stacked ? bill.demand : 0;
    const outlined = barBox(plot, x, width - 1.5, from, from + bill.reactive);
    const top = Math.min(plot.y(bill.demand), plot.y(from + bill.reactive), plot.y(0));
    return (
      <g key={index}>
        <rect {...barBox(plot, x, width, 0, bill.demand)} fill={palette.copper} />
        <rect {...outlined} fill={palette.ground} stroke={palette.copper} strokeWidth={1.5} />
        <BarFigure plot={plot} index={index} count={bills.length} y={top} palette={palette}>
          {formatNumber(totalOf(bill))}
        </BarFigure>
      </g>
    );
  });
}

/** What poor power factor costs, bill by bill: solid in the demand lines, outlined in the reactive lines. */
export function ReactiveCostChart({
  width,
  height,
  palette = pagePalette,
  bills,
  currency,
}: ReactiveCostData & ChartSize) {
  const ends = bills.flatMap((bill) => [bill.demand, bill.reactive, totalOf(bill), 0]);
  const greatest = Math.max(...ends, 0);
  const yTicks = niceTicks(Math.min(...ends, 0), greatest * 1.1 || 1, width < narrowBelow ? 3 : 4);
  const rows = bills.map((bill, index) => ({ index, total: totalOf(bill) }));
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 2, bottom: 16, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label="Cost of poor power factor by bill"
    >
      <XAxis dataKey="index" height={20} {...axisLook(palette)} tick={false} />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={46}
        tickFormatter={(v: number) => formatNumber(v)}
        {...axisLook(palette)}
      />
      <PlotFrame bars palette={palette} xTicks={[]} yTicks={yTicks} yName={`${currency} a bill`} />
      <Bar dataKey="total" fill="none" isAnimationActive={false} />
      <OnPlot at="over">
        {(plot) => (
          <>
            <Bars bills={bills} plot={plot} palette={palette} />
            <BarNames plot={plot} bills={bills} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table, with the year's total. */
export function reactiveCostTable(data: ReactiveCostData): LedgerData {
  const money = { kind: 'number', decimals: 2, unit: data.currency } as const;
  const sum = (get: (bill: ReactiveCostBill) => number) => data.bills.reduce((total, bill) => total + get(bill), 0);
  let year = '';
  return {
    columns: [
      { key: 'bill', head: 'Bill of' },
      { key: 'demand', head: data.demandName ?? 'In the demand lines', ...money },
      { key: 'reactive', head: data.reactiveName ?? 'In the reactive lines', ...money },
      { key: 'total', head: 'Poor power factor', ...money, strong: true },
    ],
    rows: data.bills.map((bill, index) => {
      year = bill.year ?? year;
      const { demand, reactive } = bill;
      return {
        id: String(index),
        cells: { bill: `${bill.label} ${year}`.trim(), demand, reactive, total: totalOf(bill) },
      };
    }),
    total: { bill: 'All bills', demand: sum((b) => b.demand), reactive: sum((b) => b.reactive), total: sum(totalOf) },
  };
}

/** Island: the chart in its frame. */
export function ReactiveCostFigure({ finding, reading, fileName, ...data }: ReactiveCostData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={reactiveCostTable(data)}
      heightOf={(w) => (w < narrowBelow ? 220 : 180)}
    >
      {(size) => <ReactiveCostChart {...data} {...size} />}
    </ChartFigure>
  );
}
