import type { ReactNode } from 'react';
import { useChartWidth, usePlotArea, useXAxisScale, useYAxisScale, ZIndexLayer } from 'recharts';
import type { Palette, Tone } from './palette';

export const chartFont = 'Lato, "Helvetica Neue", Arial, sans-serif';

/** What every chart takes besides its data. */
export interface ChartSize {
  width: number;
  height: number;
  palette?: Palette;
}

/** Below this width a chart is drawn anew for a phone: fewer ticks, fewer words. */
export const narrowBelow = 480;

/** Layers, from the ground up, among the library's own. */
const layers = { ground: 50, over: 450, words: 1900 };

export function Layer({ at, children }: { at: keyof typeof layers; children: ReactNode }) {
  return <ZIndexLayer zIndex={layers[at]}>{children}</ZIndexLayer>;
}

/** Plot rectangle and scales of the surrounding chart; null until it has measured itself. */
export interface Plot {
  left: number;
  right: number;
  top: number;
  bottom: number;
  x: (value: unknown) => number;
  y: (value: unknown) => number;
}

export function usePlot(): Plot | null {
  const area = usePlotArea();
  const xScale = useXAxisScale();
  const yScale = useYAxisScale();
  if (!area || !xScale || !yScale) return null;
  return {
    left: area.x,
    right: area.x + area.width,
    top: area.y,
    bottom: area.y + area.height,
    x: (value) => xScale(value, { position: 'middle' }) ?? area.x,
    y: (value) => yScale(value) ?? area.y,
  };
}

/** Part of a chart drawn with its scales. */
export function OnPlot({ at, children }: { at: keyof typeof layers; children: (plot: Plot) => ReactNode }) {
  const plot = usePlot();
  return plot ? <Layer at={at}>{children(plot)}</Layer> : null;
}

export interface WordsProps {
  x: number;
  y: number;
  children: ReactNode;
  palette: Palette;
  tone?: Tone;
  bold?: boolean;
  anchor?: 'start' | 'middle' | 'end';
  size?: number;
  /** Ground behind the letters, for text on lines and hatching. */
  halo?: boolean;
  /** Turned to read upward. */
  upward?: boolean;
}

/** Text of a chart, with its font written out, since pictures made on the server read no page styles. */
export function Words(props: WordsProps) {
  const { x, y, children, palette, tone = 'ink', bold, anchor = 'start', size = 12, halo = false, upward } = props;
  return (
    <text
      x={x}
      y={y}
      fill={palette[tone]}
      fontFamily={chartFont}
      fontSize={size}
      fontWeight={bold ? 700 : 400}
      textAnchor={anchor}
      transform={upward ? `rotate(-90 ${x} ${y})` : undefined}
      {...(halo ? { stroke: palette.ground, strokeWidth: 4, strokeLinejoin: 'round', paintOrder: 'stroke' } : {})}
    >
      {children}
    </text>
  );
}

/** Settings shared by both axes: bare figures in ink-2, the frame is drawn by PlotFrame. */
export function axisLook(palette: Palette) {
  return {
    axisLine: false,
    tickLine: false,
    interval: 0,
    tick: { fontFamily: chartFont, fontSize: 12, fill: palette.ink2 },
    tickMargin: 6,
  } as const;
}

/** Closed frame, inward ticks on all four sides, light grid, and the names of both axes with their units. */
export function PlotFrame(props: {
  palette: Palette;
  xTicks: (number | string)[];
  yTicks: number[];
  xName?: string;
  yName?: string;
  /** Only a base line and horizontal grid: for bars. */
  bars?: boolean;
}) {
  const { palette, xTicks, yTicks, xName, yName, bars = false } = props;
  const width = useChartWidth() ?? 0;
  const plot = usePlot();
  if (!plot) return null;
  const { left, right, top, bottom } = plot;
  const columns = bars ? [] : xTicks.map((tick) => plot.x(tick));
  const rows = yTicks.map((tick) => plot.y(tick));
  const grid = [...columns.map((x) => `M${x} ${top}V${bottom}`), ...rows.map((y) => `M${left} ${y}H${right}`)].join('');
  const ticks = [
    ...columns.map((x) => `M${x} ${bottom}v-5M${x} ${top}v5`),
    ...rows.map((y) => `M${left} ${y}h5M${right} ${y}h-5`),
  ].join('');
  const line = { fill: 'none', shapeRendering: 'crispEdges' as const };
  return (
    <>
      <path d={grid} stroke={palette.grid} {...line} />
      <Layer at="over">
        {bars ? (
          <path d={`M${left} ${plot.y(0)}H${right}`} stroke={palette.ink} {...line} />
        ) : (
          <path d={`M${left} ${top}H${right}V${bottom}H${left}Z${ticks}`} stroke={palette.ink} {...line} />
        )}
      </Layer>
      <Layer at="words">
        {yName && (
          <Words x={2} y={top - 12} palette={palette}>
            {yName}
          </Words>
        )}
        {xName && (
          <Words x={Math.min(right, width - 2)} y={bottom + 38} palette={palette} anchor="end">
            {xName}
          </Words>
        )}
      </Layer>
    </>
  );
}

export type MarkShape = 'circle' | 'diamond' | 'square';

/** Today = open circle, proposed = filled diamond, nameplate = filled square; the same in every chart. */
export function PointMark({ x, y, shape, palette }: { x: number; y: number; shape: MarkShape; palette: Palette }) {
  if (shape === 'circle')
    return <circle cx={x} cy={y} r={5} fill={palette.ground} stroke={palette.ink} strokeWidth={2} />;
  const outline = { fill: palette.ink, stroke: palette.ground, strokeWidth: 1.5 };
  if (shape === 'diamond') return <path d={`M${x} ${y - 7}l7 7l-7 7l-7 -7z`} {...outline} />;
  return <path d={`M${x - 4.5} ${y - 4.5}h9v9h-9z`} {...outline} />;
}

/** SVG path through points in pixels. */
export function linePath(points: { x: number; y: number }[]): string {
  return points.map((p, index) => `${index ? 'L' : 'M'}${p.x.toFixed(1)} ${p.y.toFixed(1)}`).join('');
}
