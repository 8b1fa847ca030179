import type { ReactNode } from 'react';
import { ComposedChart, Scatter, XAxis, YAxis } from 'recharts';
import { HatchDefs, type Hatch } from './HatchDefs';
import { axisLook, OnPlot, PlotFrame, type Plot } from './kit';
import type { Palette } from './palette';

export interface PlaneAxis {
  ends: [number, number];
  ticks: number[];
  /** With its unit. */
  name?: string;
  /** Words of a tick; for axes that say "delivers" and "absorbs" instead of a sign. */
  tickWords?: (value: number) => string;
}

/** Room round the plot, in pixels; kept in one place since what lies over a chart has to know it. */
const room = { left: 46, right: 10, top: 28, bottom: 44 };
const tickHeight = 20;

/** The plot rectangle of a plane of that size. */
export const planeBox = ({ width, height }: { width: number; height: number }) => ({
  left: room.left,
  top: room.top,
  width: width - room.left - room.right,
  height: height - room.top - room.bottom,
});

interface NumericPlaneProps {
  width: number;
  height: number;
  palette: Palette;
  hatch: Record<Hatch, string>;
  label: string;
  x: PlaneAxis;
  y: PlaneAxis;
  /** Cut at the frame. */
  drawn: (plot: Plot) => ReactNode;
  /** Over everything, not cut. */
  words: (plot: Plot) => ReactNode;
}

/** Two numeric axes in a closed frame, with what is drawn between them. */
export function NumericPlane({ width, height, palette, hatch, label, x, y, drawn, words }: NumericPlaneProps) {
  const clip = `${hatch.limit}-clip`;
  return (
    <ComposedChart
      width={width}
      height={height}
      data={[{ x: x.ends[0], y: y.ends[0] }]}
      margin={{ top: room.top, right: room.right, bottom: room.bottom - tickHeight, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={label}
    >
      <XAxis
        dataKey="x"
        type="number"
        domain={x.ends}
        ticks={x.ticks}
        tickFormatter={x.tickWords}
        height={tickHeight}
        allowDataOverflow
        {...axisLook(palette)}
      />
      <YAxis
        dataKey="y"
        type="number"
        domain={y.ends}
        ticks={y.ticks}
        tickFormatter={y.tickWords}
        width={room.left}
        allowDataOverflow
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <PlotFrame palette={palette} xTicks={x.ticks} yTicks={y.ticks} xName={x.name} yName={y.name} />
      <Scatter dataKey="y" fill="none" isAnimationActive={false} shape={() => <g />} />
      <OnPlot at="ground">
        {(plot) => (
          <>
            <clipPath id={clip}>
              <rect x={plot.left} y={plot.top} width={plot.right - plot.left} height={plot.bottom - plot.top} />
            </clipPath>
            <g clipPath={`url(#${clip})`}>{drawn(plot)}</g>
          </>
        )}
      </OnPlot>
      <OnPlot at="words">{words}</OnPlot>
    </ComposedChart>
  );
}
