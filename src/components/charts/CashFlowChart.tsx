import { Bar, ComposedChart, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { barBox, BarFigure, BarNames, barWidth } from './bars';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, type ChartSize } from './kit';
import { pagePalette } from './palette';
import { domainOf, moneyScale, niceTicks } from './scale';

export interface CashFlowYear {
  /** 0 is the year of the work. */
  year: number;
  /** Saved less upkeep less work, major units. */
  flow: number;
}

export interface CashFlowData {
  currency: string;
  years: CashFlowYear[];
}

/** Cash of each year: spent in ink below the line, saved hatched verdigris above it. */
export function CashFlowChart({ width, height, palette = pagePalette, years, currency }: CashFlowData & ChartSize) {
  const hatch = useHatch();
  const flows = years.map((year) => year.flow);
  const scale = moneyScale(Math.max(...flows.map(Math.abs)));
  const yTicks = niceTicks(
    (Math.min(0, ...flows) * 1.08) / scale.divisor,
    (Math.max(0, ...flows) * 1.12) / scale.divisor,
    4,
  );
  const rows = flows.map((flow, index) => ({ index, flow: flow / scale.divisor }));
  const names = years.map((year) => ({ label: String(year.year) }));
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 2, bottom: 4, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label="Cash of each year"
    >
      <XAxis dataKey="index" height={20} {...axisLook(palette)} tick={false} />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={48}
        tickFormatter={(v: number) => formatNumber(v, { upTo: 1 })}
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <PlotFrame
        bars
        palette={palette}
        xTicks={[]}
        yTicks={yTicks}
        yName={`${scale.word}${currency} a year; year 0 is the work`}
      />
      <Bar dataKey="flow" fill="none" isAnimationActive={false} />
      <OnPlot at="over">
        {(plot) => (
          <>
            {years.map(({ flow }, index) => {
              const box = barBox(plot, plot.x(index), barWidth(plot, years.length), 0, flow / scale.divisor);
              const fill = flow < 0 ? palette.ink : `url(#${hatch.saving})`;
              return (
                <g key={index}>
                  <rect {...box} fill={fill} stroke={flow < 0 ? palette.ink : palette.verdigris} />
                  <BarFigure
                    plot={plot}
                    index={index}
                    count={years.length}
                    y={flow < 0 ? box.y + box.height + 20 : box.y}
                    palette={palette}
                    tone={flow < 0 ? 'ink' : 'verdigris'}
                    bold
                  >
                    {formatNumber(flow)}
                  </BarFigure>
                </g>
              );
            })}
            <BarNames plot={plot} bills={names} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table, with the running total. */
export function cashFlowTable(data: CashFlowData): LedgerData {
  const money = { kind: 'number', decimals: 0, unit: data.currency } as const;
  let soFar = 0;
  return {
    columns: [
      { key: 'year', head: 'Year', kind: 'number', align: 'left' },
      { key: 'flow', head: 'In the year', ...money },
      { key: 'soFar', head: 'So far', ...money, strong: true },
    ],
    rows: data.years.map(({ year, flow }) => {
      soFar += flow;
      return { id: String(year), cells: { year: String(year), flow, soFar } };
    }),
  };
}

/** Island: the chart in its frame. */
export function CashFlowFigure({ finding, reading, fileName, ...data }: CashFlowData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={cashFlowTable(data)}
      heightOf={(w) => (w < narrowBelow ? 240 : 220)}
    >
      {(size) => <CashFlowChart {...data} {...size} />}
    </ChartFigure>
  );
}
