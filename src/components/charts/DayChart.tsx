import { ComposedChart, Line, XAxis, YAxis } from 'recharts';
import { formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { ChartFigure, type FigureText } from './ChartFigure';
import { axisLook, OnPlot, PlotFrame, Words, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, niceTicks } from './scale';

export interface DayPoint {
  /** Minutes after local midnight at which the interval begins. */
  minute: number;
  /** Means over the interval; null where the reading is missing. */
  kw: number | null;
  kvarLagging: number | null;
  kvarLeading?: number | null;
}

export interface DayData {
  /** "Mon 4 Aug 2025". */
  dayName: string;
  stepMinutes: number;
  points: DayPoint[];
  /** Interval that set the billed peak. */
  peak?: { minute: number; kw: number; kvarLagging?: number; powerFactor?: number } | null;
}

const clock = (minute: number) =>
  `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;

/** Height beneath everything drawn between two places, or above it, where a label of a line lies free. */
function freeHeight(
  values: { minute: number; value: number | null | undefined }[],
  plot: Plot,
  [from, to]: [number, number],
  side: 'above' | 'below',
) {
  const heights = values
    .filter(({ minute, value }) => value != null && plot.x(minute) >= from && plot.x(minute) <= to)
    .map(({ value }) => plot.y(value ?? 0));
  return side === 'above' ? Math.min(...heights) - 8 : Math.max(...heights) + 18;
}

function PeakMark({ data, plot, palette }: { data: DayData; plot: Plot; palette: Palette }) {
  const { peak } = data;
  if (!peak) return null;
  const middle = peak.minute + data.stepMinutes / 2;
  const x = plot.x(middle);
  const left = x > (plot.left + plot.right) / 2;
  const place = {
    x: left ? x - 10 : x + 10,
    palette,
    bold: true,
    halo: true,
    anchor: left ? ('end' as const) : ('start' as const),
  };
  const ring = (y: number, stroke: string) => (
    <circle cx={x} cy={y} r={4} fill={palette.ground} stroke={stroke} strokeWidth={2} />
  );
  const kvar = peak.kvarLagging;
  const factor = peak.powerFactor === undefined ? '' : `, pf ${formatNumber(peak.powerFactor, { decimals: 2 })}`;
  const width = Math.max(2, plot.x(data.stepMinutes) - plot.x(0));
  const peakWords = `${formatQuantity(peak.kw, 'kW')}, ${clock(peak.minute)} to ${clock(peak.minute + data.stepMinutes)}`;
  const kvarWords = `${formatQuantity(kvar ?? 0, 'kvar')} lagging${factor}`;
  const spanOf = (words: string): [number, number] => {
    const length = words.length * 6.6 + 10;
    return left ? [x - length, x + 2] : [x - 2, x + length];
  };
  const middleOf = (minute: number) => minute + data.stepMinutes / 2;
  const active = data.points.map((p) => ({ minute: middleOf(p.minute), value: p.kw }));
  const lagging = data.points.map((p) => ({ minute: middleOf(p.minute), value: p.kvarLagging }));
  return (
    <>
      <rect
        x={x - width / 2}
        y={plot.top}
        width={width}
        height={plot.bottom - plot.top}
        fill={palette.rule2}
        fillOpacity={0.4}
      />
      {ring(plot.y(peak.kw), palette.ink)}
      <Words {...place} y={Math.max(plot.top + 12, freeHeight(active, plot, spanOf(peakWords), 'above'))}>
        {peakWords}
      </Words>
      {kvar !== undefined && (
        <>
          {ring(plot.y(kvar), palette.copper)}
          <Words
            {...place}
            y={Math.min(plot.bottom - 6, freeHeight(lagging, plot, spanOf(kvarWords), 'below'))}
            tone="copper"
          >
            {kvarWords}
          </Words>
        </>
      )}
    </>
  );
}

/** Names of the lines, where there is no peak to say them. */
function LineNames({ data, plot, palette }: { data: DayData; plot: Plot; palette: Palette }) {
  const at = data.points[Math.floor(data.points.length * 0.12)];
  if (!at) return null;
  const names = [
    { key: 'kW', y: at.kw, tone: 'ink' as const },
    { key: 'kvar lagging', y: at.kvarLagging, tone: 'copper' as const },
    { key: 'kvar leading', y: at.kvarLeading ? at.kvarLeading : null, tone: 'verdigris' as const },
  ];
  return names.map(({ key, y, tone }) =>
    y == null ? null : (
      <Words key={key} x={plot.x(at.minute)} y={plot.y(y) - 7} palette={palette} tone={tone} bold halo>
        {key}
      </Words>
    ),
  );
}

/** kW and kvar of one day, with the interval that set the peak. */
export function DayChart({ width, height, palette = pagePalette, ...data }: DayData & ChartSize) {
  const greatest = Math.max(1, ...data.points.flatMap((p) => [p.kw ?? 0, p.kvarLagging ?? 0, p.kvarLeading ?? 0]));
  const yTicks = niceTicks(0, greatest * 1.14, 3);
  const lastMinute = Math.max(1440, (data.points.at(-1)?.minute ?? 0) + data.stepMinutes);
  const xTicks = [0, 240, 480, 720, 960, 1200, 1440];
  const rows = data.points.map((p) => ({ ...p, minute: p.minute + data.stepMinutes / 2 }));
  const line = { type: 'linear', dot: false, activeDot: false, isAnimationActive: false, strokeWidth: 1.5 } as const;
  const hasLeading = data.points.some((p) => (p.kvarLeading ?? 0) > 0);
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 26, right: 18, bottom: 4, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={`Load of ${data.dayName}`}
    >
      <XAxis
        dataKey="minute"
        type="number"
        domain={[0, lastMinute]}
        ticks={xTicks}
        height={20}
        tickFormatter={clock}
        {...axisLook(palette)}
      />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={46}
        tickFormatter={(v: number) => formatNumber(v)}
        {...axisLook(palette)}
      />
      <PlotFrame
        palette={palette}
        xTicks={xTicks}
        yTicks={yTicks}
        yName={`kW and kvar, ${data.stepMinutes}-minute means, ${data.dayName}`}
      />
      <Line dataKey="kvarLagging" {...line} stroke={palette.copper} />
      {hasLeading && <Line dataKey="kvarLeading" {...line} stroke={palette.verdigris} strokeDasharray="6 3" />}
      <Line dataKey="kw" {...line} stroke={palette.ink} />
      <OnPlot at="words">
        {(plot) => (
          <>
            {(!data.peak || hasLeading) && <LineNames data={data} plot={plot} palette={palette} />}
            <PeakMark data={data} plot={plot} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: every interval. */
export function dayTable(data: DayData): LedgerData {
  const reading = (value: number | null | undefined) => value ?? 'missing';
  const figure = (head: string, key: string, unit: string) =>
    ({ key, head, unit, kind: 'number', decimals: 1 }) as const;
  return {
    columns: [
      { key: 'time', head: 'From' },
      figure('Active', 'kw', 'kW'),
      figure('Lagging', 'lagging', 'kvar'),
      figure('Leading', 'leading', 'kvar'),
    ],
    rows: data.points.map((p) => ({
      id: String(p.minute),
      kind: p.minute === data.peak?.minute ? ('chosen' as const) : ('plain' as const),
      cells: {
        time: clock(p.minute),
        kw: reading(p.kw),
        lagging: reading(p.kvarLagging),
        leading: reading(p.kvarLeading ?? 0),
      },
    })),
  };
}

/** Island: the chart in its frame. */
export function DayFigure({ finding, reading, fileName, ...data }: DayData & FigureText) {
  return (
    <ChartFigure finding={finding} reading={reading} fileName={fileName} table={dayTable(data)} heightOf={() => 200}>
      {(size) => <DayChart {...data} {...size} />}
    </ChartFigure>
  );
}
