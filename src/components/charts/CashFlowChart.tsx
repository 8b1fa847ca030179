import { useState } from 'react';
import { Bar, ComposedChart, XAxis, YAxis } from 'recharts';
import { formatNumber } from '../ui/format';
import { barBox, BarFigure, BarNames, barWidth } from './bars';
import {
  barsReading,
  cashFlowTable,
  stackedParts,
  type CashFlowData,
  stepsOf,
  type CashFlowSpan,
  type CashFlowStep,
  type PartKind,
} from './cash-flow';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, moneyScale, niceTicks } from './scale';

type Hatch = ReturnType<typeof useHatch>;

/** How each part is filled: saving hatched, work solid, upkeep grey, tax and incentive open. */
function fillOf(kind: PartKind, palette: Palette, hatch: Hatch) {
  switch (kind) {
    case 'saving':
      return { fill: `url(#${hatch.saving})`, stroke: palette.verdigris };
    case 'incentive':
      return { fill: palette.verdigrisWash, stroke: palette.verdigris, strokeDasharray: '2 2' };
    case 'work':
      return { fill: palette.ink, stroke: palette.ink };
    case 'upkeep':
      return { fill: palette.rule2, stroke: palette.rule2 };
    case 'tax':
      return { fill: palette.ground, stroke: palette.ink };
  }
}

interface BarProps {
  step: CashFlowStep;
  index: number;
  count: number;
  divisor: number;
  plot: Plot;
  palette: Palette;
  hatch: Hatch;
}

function StackedBar({ step, index, count, divisor, plot, palette, hatch }: BarProps) {
  const parts = stackedParts(step);
  const width = barWidth(plot, count);
  const top = Math.max(0, ...parts.map(({ to }) => to)) / divisor;
  const bottom = Math.min(0, ...parts.map(({ to }) => to)) / divisor;
  const netY = plot.y(step.net / divisor);
  const figureAbove = step.net >= 0;
  return (
    <g>
      {parts.map(({ kind, from, to }) => (
        <rect
          key={kind}
          {...barBox(plot, plot.x(index), width, from / divisor, to / divisor)}
          {...fillOf(kind, palette, hatch)}
        />
      ))}
      {parts.length > 1 && (
        <path
          d={`M${plot.x(index) - width / 2 - 3} ${netY}h${width + 6}`}
          stroke={palette.ink}
          strokeWidth={2}
          shapeRendering="crispEdges"
        />
      )}
      <BarFigure
        plot={plot}
        index={index}
        count={count}
        y={figureAbove ? plot.y(top) : plot.y(bottom) + 20}
        palette={palette}
        tone={figureAbove ? 'verdigris' : 'ink'}
        bold
      >
        {formatNumber(step.net)}
      </BarFigure>
    </g>
  );
}

/** Cash of each year or month: what is saved above the line; work, upkeep and tax below it; a bar across at what remains. */
export function CashFlowChart(props: { steps: CashFlowStep[]; currency: string; by: CashFlowSpan } & ChartSize) {
  const { width, height, palette = pagePalette, steps, currency, by } = props;
  const hatch = useHatch();
  const ends = steps.flatMap((step) => stackedParts(step).map(({ to }) => to));
  const scale = moneyScale(Math.max(1, ...ends.map(Math.abs)));
  const yTicks = niceTicks(
    (Math.min(0, ...ends) * 1.12) / scale.divisor,
    (Math.max(0, ...ends) * 1.12) / scale.divisor,
    4,
  );
  const every = by === 'months' ? 6 : 1;
  const names = steps.map(({ step }) => ({ label: step % every === 0 ? String(step) : '' }));
  return (
    <ComposedChart
      width={width}
      height={height}
      data={steps.map((step, index) => ({ index, net: step.net / scale.divisor }))}
      margin={{ top: 28, right: 2, bottom: 4, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={by === 'years' ? 'Cash of each year' : 'Cash of each month'}
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
        yName={`${scale.word}${currency} a ${by === 'years' ? 'year' : 'month'}; ${by === 'years' ? 'year' : 'month'} 0 is the work`}
      />
      <Bar dataKey="net" fill="none" isAnimationActive={false} />
      <OnPlot at="over">
        {(plot) => (
          <>
            {steps.map((step, index) => (
              <StackedBar
                key={step.step}
                {...{ step, index, plot, palette, hatch }}
                count={steps.length}
                divisor={scale.divisor}
              />
            ))}
            <BarNames plot={plot} bills={names} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** Months that are drawn at most; the table holds all of them. */
const drawnMonths = 36;

/** Island: the chart in its frame, by year or by month. */
export function CashFlowFigure({ finding, fileName, ...data }: CashFlowData & Omit<FigureText, 'reading'>) {
  const [by, setBy] = useState<CashFlowSpan>('years');
  const all = stepsOf(data.years, by);
  const steps = by === 'years' ? all : all.slice(0, drawnMonths + 1);
  const cut = all.length > steps.length ? ` The first ${drawnMonths} months; the table holds them all.` : '';
  const choose = (span: CashFlowSpan, words: string) => (
    <button type="button" aria-pressed={by === span} onClick={() => setBy(span)}>
      {words}
    </button>
  );
  return (
    <ChartFigure
      finding={finding}
      reading={`${barsReading(steps)}${cut}`}
      fileName={`${fileName}-${by}`}
      table={cashFlowTable(data, by)}
      heightOf={(w) => (w < narrowBelow ? 250 : 240)}
      choice={
        <div className="chart-choice" role="group" aria-label="Years or months">
          {choose('years', 'By year')}
          {choose('months', 'By month')}
        </div>
      }
    >
      {(size) => <CashFlowChart steps={steps} by={by} currency={data.currency} {...size} />}
    </ChartFigure>
  );
}
