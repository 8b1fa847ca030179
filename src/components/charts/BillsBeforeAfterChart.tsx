import { Bar, ComposedChart, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { barBox, BarFigure, BarNames, barWidth, type BillLabel } from './bars';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, moneyScale, niceTicks } from './scale';

export interface BillBeforeAfter extends BillLabel {
  /** Major units. */
  before: number;
  after: number;
}

export interface BillsBeforeAfterData {
  currency: string;
  bills: BillBeforeAfter[];
  /** What is drawn, after "Thousand USD a bill, ": "demand and kvarh lines with tax". */
  what: string;
  planName: string;
}

interface Drawing {
  bills: BillBeforeAfter[];
  divisor: number;
  plot: Plot;
  palette: Palette;
  savingFill: string;
}

/** Solid: what remains. Hatched: what the plan takes away. Open: what it adds, where it does. */
function Bars({ bills, divisor, plot, palette, savingFill }: Drawing) {
  const width = barWidth(plot, bills.length);
  return bills.map((bill, index) => {
    const [before, after] = [bill.before / divisor, bill.after / divisor];
    const saved = barBox(plot, plot.x(index), width, after, before);
    const top = Math.min(plot.y(before), plot.y(after));
    const change = bill.before - bill.after;
    return (
      <g key={index}>
        <rect {...barBox(plot, plot.x(index), width, 0, Math.min(before, after))} fill={palette.copper} />
        {change >= 0 ? (
          <rect {...saved} fill={savingFill} stroke={palette.verdigris} />
        ) : (
          <rect {...saved} fill={palette.ground} stroke={palette.ink} />
        )}
        <BarFigure
          plot={plot}
          index={index}
          count={bills.length}
          y={top}
          palette={palette}
          tone={change >= 0 ? 'verdigris' : 'ink'}
          bold
        >
          {change >= 0 ? formatNumber(change) : `${formatNumber(-change)} more`}
        </BarFigure>
      </g>
    );
  });
}

/** Every bill before and after a plan. */
export function BillsBeforeAfterChart({
  width,
  height,
  palette = pagePalette,
  ...data
}: BillsBeforeAfterData & ChartSize) {
  const hatch = useHatch();
  const { bills, currency, what } = data;
  const greatest = Math.max(0, ...bills.flatMap((bill) => [bill.before, bill.after]));
  const scale = moneyScale(greatest);
  const yTicks = niceTicks(0, (greatest * 1.06) / scale.divisor, width < narrowBelow ? 3 : 4);
  const rows = bills.map((bill, index) => ({ index, after: bill.after / scale.divisor }));
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 2, bottom: 16, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={`Bills before and after ${data.planName}`}
    >
      <XAxis dataKey="index" height={20} {...axisLook(palette)} tick={false} />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={46}
        tickFormatter={(v: number) => formatNumber(v, { upTo: 1 })}
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <PlotFrame
        bars
        palette={palette}
        xTicks={[]}
        yTicks={yTicks}
        yName={`${scale.word}${currency} a bill, ${what}`}
      />
      <Bar dataKey="after" fill="none" isAnimationActive={false} />
      <OnPlot at="over">
        {(plot) => (
          <>
            <Bars
              bills={bills}
              divisor={scale.divisor}
              plot={plot}
              palette={palette}
              savingFill={`url(#${hatch.saving})`}
            />
            <BarNames plot={plot} bills={bills} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table, with the year's total. */
export function billsBeforeAfterTable(data: BillsBeforeAfterData): LedgerData {
  const money = { kind: 'number', decimals: 2, unit: data.currency } as const;
  const sum = (get: (bill: BillBeforeAfter) => number) => data.bills.reduce((total, bill) => total + get(bill), 0);
  const saved = (bill: BillBeforeAfter) => bill.before - bill.after;
  let year = '';
  return {
    columns: [
      { key: 'bill', head: 'Bill of' },
      { key: 'before', head: 'Before', ...money },
      { key: 'after', head: `After ${data.planName}`, ...money },
      { key: 'saved', head: 'Saved', ...money, strong: true },
    ],
    rows: data.bills.map((bill, index) => {
      year = bill.year ?? year;
      const name = `${bill.label} ${year}`.trim();
      return { id: String(index), cells: { bill: name, before: bill.before, after: bill.after, saved: saved(bill) } };
    }),
    total: { bill: 'All bills', before: sum((b) => b.before), after: sum((b) => b.after), saved: sum(saved) },
  };
}

/** Island: the chart in its frame. */
export function BillsBeforeAfterFigure({ finding, reading, fileName, ...data }: BillsBeforeAfterData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={billsBeforeAfterTable(data)}
      heightOf={(w) => (w < narrowBelow ? 240 : 212)}
    >
      {(size) => <BillsBeforeAfterChart {...data} {...size} />}
    </ChartFigure>
  );
}
