import { Area, ComposedChart, Line, XAxis, YAxis } from 'recharts';
import { formatNumber, formatPayback } from '../ui/format';
import { ChartFigure, type FigureText } from './ChartFigure';
import { axisLook, linePath, narrowBelow, OnPlot, PlotFrame, type ChartSize } from './kit';
import { pagePalette } from './palette';
import { chartRows, drawnPart, paybackTable, type PaybackData } from './payback';
import { EndWords, PaybackMark, PaybackNotes, WorkDrop, YoursMark } from './PaybackParts';
import { domainOf, moneyScale, niceTicks, ticksWithin } from './scale';

/** Cumulative cash after the work, with the point where it is paid back. Give 592 or 900 wide, 358 on a phone. */
export function PaybackChart({ width, height, palette = pagePalette, ...all }: PaybackData & ChartSize) {
  const data = drawnPart(all);
  const narrow = width < narrowBelow;
  const values = data.points.flatMap((p) => [
    p.cumulative,
    p.p10 ?? p.cumulative,
    p.p90 ?? p.cumulative,
    p.yours ?? p.cumulative,
  ]);
  const scale = moneyScale(Math.max(...values.map(Math.abs)));
  const yTicks = niceTicks(
    Math.min(...values, 0) / scale.divisor,
    Math.max(...values, 0) / scale.divisor,
    narrow ? 5 : 8,
  );
  const lastYear = data.points.at(-1)?.year ?? 1;
  const xTicks = ticksWithin(0, lastYear, Math.min(lastYear, narrow ? 6 : 10));
  const line = { dot: false, isAnimationActive: false, type: 'linear', activeDot: false } as const;
  const dotted = { ...line, stroke: palette.verdigris, strokeWidth: 1, strokeDasharray: '2 3' };
  return (
    <ComposedChart
      width={width}
      height={height}
      data={chartRows(data, scale.divisor)}
      margin={{ top: 26, right: narrow ? 8 : 92, bottom: 24, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={`Cumulative cash; paid back: ${formatPayback(data.paybackYears)}`}
    >
      <XAxis dataKey="year" type="number" domain={[0, lastYear]} ticks={xTicks} height={20} {...axisLook(palette)} />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={44}
        tickFormatter={(v: number) => formatNumber(v)}
        {...axisLook(palette)}
      />
      <PlotFrame
        palette={palette}
        xTicks={xTicks}
        yTicks={yTicks}
        yName={`${scale.word}${data.currency}, all paid and saved so far`}
        xName="Years after the work is done"
      />
      <Area
        dataKey="band"
        type="linear"
        stroke="none"
        fill={palette.verdigrisWash}
        fillOpacity={0.9}
        isAnimationActive={false}
        activeDot={false}
      />
      <Line dataKey="p10" {...dotted} />
      <Line dataKey="p90" {...dotted} />
      <Line dataKey="before" {...line} stroke={palette.ink} strokeWidth={2} />
      <Line dataKey="after" {...line} stroke={palette.verdigris} strokeWidth={2} />
      <Line dataKey="yours" {...line} stroke={palette.ink} strokeWidth={1.25} strokeDasharray="6 3" />
      <OnPlot at="over">
        {(plot) => (
          <path
            d={linePath([
              { x: plot.left, y: plot.y(0) },
              { x: plot.right, y: plot.y(0) },
            ])}
            stroke={palette.ink}
            shapeRendering="crispEdges"
          />
        )}
      </OnPlot>
      <OnPlot at="words">
        {(plot) => {
          const parts = { data, divisor: scale.divisor, plot, palette, narrow };
          return (
            <>
              <WorkDrop {...parts} />
              <PaybackNotes {...parts} />
              <YoursMark {...parts} />
              <PaybackMark {...parts} />
              {!narrow && <EndWords {...parts} />}
            </>
          );
        }}
      </OnPlot>
    </ComposedChart>
  );
}

/** Island: the chart in its frame, with table twin and exports. */
export function PaybackFigure({ finding, reading, fileName, ...data }: PaybackData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={paybackTable(data)}
      heightOf={(w) => (w < narrowBelow ? 300 : Math.round(Math.min(474, Math.max(300, w * 0.6))))}
    >
      {(size) => <PaybackChart {...data} {...size} />}
    </ChartFigure>
  );
}
