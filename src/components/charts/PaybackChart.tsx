import { Area, ComposedChart, Line, XAxis, YAxis } from 'recharts';
import { formatMajor, formatNumber, formatPayback } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { ChartFigure, type FigureText } from './ChartFigure';
import { axisLook, linePath, narrowBelow, OnPlot, PlotFrame, PointMark, Words, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, moneyScale, niceTicks, spreadLabels, ticksWithin, valueAt } from './scale';

/** One point of the cumulative cash: years after the work is done, money in major units. */
export interface PaybackPoint {
  year: number;
  cumulative: number;
  /** One in ten samples lies below, one in ten above. Both or neither. */
  p10?: number;
  p90?: number;
  /** The same with the reader's own figures. */
  yours?: number;
}

export interface PaybackData {
  currency: string;
  /** Paid once at year 0, major units. */
  capitalCost: number;
  points: PaybackPoint[];
  paybackYears: number | null;
  /** Eight in ten samples pay back between these. */
  paybackRange?: { fromYears: number; toYears: number } | null;
  /** "edition 2". */
  editionName: string;
  /** Words at the end of the reader's own line. */
  yoursName?: string;
}

type Point = PaybackPoint;
const byYear = (p: Point) => p.year;
const cumulative = (p: Point) => p.cumulative;

/** Rows with the band as a pair and the line split where it crosses nought: ink below, verdigris above. */
function chartRows(data: PaybackData, divisor: number) {
  const crossing = data.paybackYears;
  const points = [...data.points];
  if (crossing !== null && !points.some((p) => p.year === crossing)) {
    const at = (get: (p: Point) => number | undefined) => valueAt(data.points, crossing, byYear, (p) => get(p) ?? NaN);
    const optional = (get: (p: Point) => number | undefined) => {
      const found = at(get);
      return found === null || Number.isNaN(found) ? undefined : found;
    };
    points.push({
      year: crossing,
      cumulative: at(cumulative) ?? 0,
      p10: optional((p) => p.p10),
      p90: optional((p) => p.p90),
      yours: optional((p) => p.yours),
    });
    points.sort((a, b) => a.year - b.year);
  }
  const scaled = (value: number | undefined) => (value === undefined ? undefined : value / divisor);
  return points.map((p) => ({
    year: p.year,
    before: crossing === null || p.year <= crossing ? p.cumulative / divisor : undefined,
    after: crossing !== null && p.year >= crossing ? p.cumulative / divisor : undefined,
    band: p.p10 !== undefined && p.p90 !== undefined ? [p.p10 / divisor, p.p90 / divisor] : undefined,
    p10: scaled(p.p10),
    p90: scaled(p.p90),
    yours: scaled(p.yours),
  }));
}

function EndWords({
  data,
  divisor,
  plot,
  palette,
}: {
  data: PaybackData;
  divisor: number;
  plot: Plot;
  palette: Palette;
}) {
  const end = data.points.at(-1);
  if (!end) return null;
  const labels = [
    end.p90 !== undefined && { at: end.p90, words: '1 in 10 above' },
    { at: end.cumulative, words: data.editionName, tone: 'verdigris' as const, bold: true },
    end.yours !== undefined && { at: end.yours, words: data.yoursName ?? 'your figures', bold: true },
    end.p10 !== undefined && { at: end.p10, words: '1 in 10 below' },
  ].filter((label) => label !== false);
  const places = spreadLabels(
    labels.map((label) => plot.y(label.at / divisor) + 4),
    15,
    plot.top + 6,
    plot.bottom,
  );
  return labels.map((label, index) => (
    <Words key={label.words} x={plot.right + 7} y={places[index]!} palette={palette} {...label}>
      {label.words}
    </Words>
  ));
}

/** The spread of the payback in the longest words the room holds; null where none fits. */
function spreadWords({ fromYears, toYears }: { fromYears: number; toYears: number }, narrow: boolean, room: number) {
  const months = (years: number) => formatNumber(Math.round(years * 12));
  const span = `${months(fromYears)} to ${months(toYears)}`;
  const wordings = [`8 in 10: ${span}`];
  if (!narrow) wordings.unshift(`8 in 10 samples: ${span} months`, `8 in 10: ${span} months`);
  return wordings.find((words) => words.length * 5.9 <= room) ?? null;
}

function PaybackMark({
  data,
  plot,
  palette,
  narrow,
}: {
  data: PaybackData;
  plot: Plot;
  palette: Palette;
  narrow: boolean;
}) {
  if (data.paybackYears === null) return null;
  const x = plot.x(data.paybackYears);
  const y = plot.y(0);
  const below = plot.bottom - y > 62;
  const textY = below ? y + 44 : y + 19;
  const flip = x > (plot.left + plot.right) / 2 + 40;
  const range = data.paybackRange;
  const whiskers = range
    ? [range.fromYears, range.toYears].map((years) => `M${plot.x(years)} ${y - 4}v8`).join('')
    : '';
  const aside = below ? 4 : 12;
  const place = {
    x: flip ? x - aside : x + aside,
    palette,
    anchor: flip ? ('end' as const) : ('start' as const),
    halo: true,
  };
  const spreadX = below ? place.x : place.x + (narrow ? 74 : 172);
  const spread =
    range && (below || !flip) ? spreadWords(range, narrow, flip ? Infinity : plot.right - spreadX - 4) : null;
  return (
    <>
      <path d={`${whiskers}M${x} ${y}V${below ? y + 34 : y}`} stroke={palette.ink} fill="none" />
      <PointMark x={x} y={y} shape="circle" palette={palette} />
      <Words {...place} y={textY} bold size={narrow ? 12 : 13.5}>
        {narrow || data.paybackYears === 0
          ? formatPayback(data.paybackYears)
          : `paid back after ${formatPayback(data.paybackYears)}`}
      </Words>
      {spread && (
        <Words {...place} x={spreadX} y={below ? textY + 15 : textY}>
          {spread}
        </Words>
      )}
    </>
  );
}

function Notes({
  data,
  divisor,
  plot,
  palette,
  narrow,
}: {
  data: PaybackData;
  divisor: number;
  plot: Plot;
  palette: Palette;
  narrow: boolean;
}) {
  const low = plot.y(-data.capitalCost / divisor);
  const last = data.points.at(-1);
  const aheadYear = last && data.paybackYears !== null ? (data.paybackYears + last.year) / 2 : null;
  const aheadAt = aheadYear === null ? null : valueAt(data.points, aheadYear, byYear, (p) => p.p90 ?? p.cumulative);
  return (
    <>
      <Words
        x={plot.left + 8}
        y={narrow ? plot.bottom - 7 : Math.min(low + 18, plot.bottom - 7)}
        palette={palette}
        bold
        halo
      >
        {`${formatMajor(data.capitalCost, data.currency, { whole: true })} paid once`}
      </Words>
      {aheadYear !== null && aheadAt !== null && (
        <Words
          x={plot.x(aheadYear) - 14}
          y={plot.y(aheadAt / divisor) - 12}
          palette={palette}
          tone="verdigris"
          bold
          anchor="end"
          halo
        >
          ahead
        </Words>
      )}
      {!narrow && data.paybackYears !== null && plot.x(data.paybackYears * 0.66) - plot.left > 110 && (
        <Words x={plot.x(data.paybackYears * 0.66)} y={plot.y(0) - 10} palette={palette} tone="ink2" anchor="end" halo>
          still paying back
        </Words>
      )}
    </>
  );
}

/** Cumulative cash after the work, with the point where it is paid back. Give 592 or 900 wide, 358 on a phone. */
export function PaybackChart({ width, height, palette = pagePalette, ...data }: PaybackData & ChartSize) {
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
        {(plot) => (
          <>
            <Notes data={data} divisor={scale.divisor} plot={plot} palette={palette} narrow={narrow} />
            <PaybackMark data={data} plot={plot} palette={palette} narrow={narrow} />
            {!narrow && <EndWords data={data} divisor={scale.divisor} plot={plot} palette={palette} />}
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: whole years only, last point included. */
export function paybackTable(data: PaybackData): LedgerData {
  const places = { kind: 'number', decimals: 0, unit: data.currency } as const;
  const has = (key: 'p10' | 'p90' | 'yours') => data.points.some((p) => p[key] !== undefined);
  return {
    columns: [
      { key: 'year', head: 'After year', kind: 'number', align: 'left' },
      ...(has('p10') ? [{ key: 'p10', head: '1 in 10 below', ...places }] : []),
      { key: 'cumulative', head: `So far, ${data.editionName}`, ...places, strong: true },
      ...(has('p90') ? [{ key: 'p90', head: '1 in 10 above', ...places }] : []),
      ...(has('yours') ? [{ key: 'yours', head: data.yoursName ?? 'Your figures', ...places }] : []),
    ],
    rows: data.points
      .filter((p, index) => Number.isInteger(p.year) || index === data.points.length - 1)
      .map((p) => ({ id: String(p.year), cells: { ...p, year: p.year } })),
  };
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
