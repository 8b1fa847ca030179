import { Bar, ComposedChart, XAxis, YAxis } from 'recharts';
import { barBox, BarNames, barWidth, type BillLabel } from '../charts/bars';
import { ChartFigure, type FigureText } from '../charts/ChartFigure';
import { HatchDefs, useHatch } from '../charts/HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, Words, type ChartSize, type Plot } from '../charts/kit';
import { pagePalette, type Palette } from '../charts/palette';
import { domainOf, moneyScale, niceTicks } from '../charts/scale';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

export interface MonthsChartData {
  currency: string;
  bills: BillLabel[];
  /** The standing schedule first; amounts by bill, in major units. */
  schedules: { name: string; amounts: number[] }[];
}

interface Look {
  fill: string;
  stroke: string;
}

/** Solid ink for the standing schedule, then outlined, hatched, solid grey, faint. */
function looksOf(palette: Palette, hatch: string): Look[] {
  return [
    { fill: palette.ink, stroke: palette.ink },
    { fill: palette.ground, stroke: palette.ink },
    { fill: `url(#${hatch})`, stroke: palette.rule2 },
    { fill: palette.rule2, stroke: palette.rule2 },
    { fill: palette.grid, stroke: palette.ink2 },
  ];
}

function Bars({ data, divisor, plot, looks }: { data: MonthsChartData; divisor: number; plot: Plot; looks: Look[] }) {
  const { bills, schedules } = data;
  const whole = Math.max(barWidth(plot, bills.length), schedules.length * 3);
  const each = whole / schedules.length;
  return bills.map((_, index) => (
    <g key={index}>
      {schedules.map(({ name, amounts }, place) => {
        const x = plot.x(index) - whole / 2 + each * (place + 0.5);
        const box = barBox(plot, x, Math.max(2, each - 2), 0, (amounts[index] ?? 0) / divisor);
        return <rect key={name} {...box} {...looks[place % looks.length]} />;
      })}
    </g>
  ));
}

/** Which bar is which, above the first bill's bars. */
function Key({ data, plot, palette, looks }: { data: MonthsChartData; plot: Plot; palette: Palette; looks: Look[] }) {
  const widths = data.schedules.map(({ name }) => 26 + name.length * 6.6);
  return data.schedules.map(({ name }, place) => {
    const x = plot.left + 8 + widths.slice(0, place).reduce((sum, width) => sum + width, 0);
    return (
      <g key={name}>
        <rect x={x} y={plot.top + 1} width={10} height={10} {...looks[place % looks.length]} />
        <Words x={x + 15} y={plot.top + 10} palette={palette} halo>
          {name}
        </Words>
      </g>
    );
  });
}

/** Every bill of the year under several schedules, side by side. */
export function MonthsChart({ width, height, palette = pagePalette, ...data }: MonthsChartData & ChartSize) {
  const hatch = useHatch();
  const looks = looksOf(palette, hatch.neutral);
  const greatest = Math.max(1, ...data.schedules.flatMap(({ amounts }) => amounts));
  const scale = moneyScale(greatest);
  const yTicks = niceTicks(0, (greatest * 1.16) / scale.divisor, width < narrowBelow ? 3 : 4);
  const rows = data.bills.map((_, index) => ({
    index,
    amount: (data.schedules[0]?.amounts[index] ?? 0) / scale.divisor,
  }));
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 2, bottom: 16, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label="Bills of the year under each schedule"
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
      <PlotFrame bars palette={palette} xTicks={[]} yTicks={yTicks} yName={`${scale.word}${data.currency} a bill`} />
      <Bar dataKey="amount" fill="none" isAnimationActive={false} />
      <OnPlot at="over">
        {(plot) => (
          <>
            <Bars data={data} divisor={scale.divisor} plot={plot} looks={looks} />
            <BarNames plot={plot} bills={data.bills} palette={palette} />
            <Key data={data} plot={plot} palette={palette} looks={looks} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** Island: the chart in its frame; its table is the ledger of the months. */
export function MonthsFigure({
  table,
  finding,
  reading,
  fileName,
  ...data
}: MonthsChartData & FigureText & { table: LedgerData }) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={table}
      heightOf={(width) => (width < narrowBelow ? 250 : 230)}
    >
      {(size) => <MonthsChart {...data} {...size} />}
    </ChartFigure>
  );
}
