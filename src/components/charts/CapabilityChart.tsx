import { ComposedChart, Line, XAxis, YAxis } from 'recharts';
import { formatDelivered, formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, linePath, narrowBelow, OnPlot, PlotFrame, PointMark, Words, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { ticksWithin, valueAt } from './scale';

export type BindingLimit = 'armature' | 'field' | 'pull-out';

export interface CapabilityPoint {
  loadPercent: number;
  /** Most it may deliver; negative: least it must absorb; null: nothing is admissible. */
  kvarDelivered: number | null;
  binding: BindingLimit;
}

export interface KvarPoint {
  loadPercent: number;
  /** Delivered positive, absorbed negative. */
  kvarDelivered: number;
}

export interface CapabilityData {
  motorName: string;
  capability: CapabilityPoint[];
  /** At the present field over the loads, and at the plan's. */
  today?: KvarPoint[];
  plan?: KvarPoint[];
  planName?: string;
  usualLoadPercent?: number;
}

interface Known {
  loadPercent: number;
  kvarDelivered: number;
  binding: BindingLimit;
}

const isKnown = (p: CapabilityPoint): p is Known => p.kvarDelivered !== null;
const load = (p: KvarPoint) => p.loadPercent;
const kvar = (p: KvarPoint) => p.kvarDelivered;
const limitNames: Record<BindingLimit, string> = { armature: 'stator', field: 'field', 'pull-out': 'pull-out' };

/** Stretches of the limit with one cause each, sharing their ends. */
function stretches(points: Known[]): { binding: BindingLimit; points: Known[] }[] {
  const found: { binding: BindingLimit; points: Known[] }[] = [];
  for (const point of points) {
    const current = found.at(-1);
    if (current && current.binding === point.binding) current.points.push(point);
    else {
      current?.points.push(point);
      found.push({ binding: point.binding, points: [point] });
    }
  }
  return found;
}

interface Parts {
  data: CapabilityData;
  plot: Plot;
  palette: Palette;
}

function Limit({ data, plot, palette, hatchId }: Parts & { hatchId: string }) {
  const known = data.capability.filter(isKnown);
  const at = (p: KvarPoint) => ({ x: plot.x(p.loadPercent), y: plot.y(p.kvarDelivered) });
  const [first, last] = [known[0], known.at(-1)];
  if (!first || !last) return null;
  return (
    <>
      <path d={`${linePath(known.map(at))}V${plot.top}H${plot.x(first.loadPercent)}Z`} fill={`url(#${hatchId})`} />
      {stretches(known).map((part, index) => {
        const colour = part.binding === 'pull-out' ? palette.ochre : palette.madder;
        return <path key={index} d={linePath(part.points.map(at))} fill="none" stroke={colour} strokeWidth={1.75} />;
      })}
    </>
  );
}

function LimitNames({ data, plot, palette }: Parts) {
  return stretches(data.capability.filter(isKnown)).map((part, index) => {
    const middle = part.points[Math.floor(part.points.length / 2)]!;
    if (part.points.length < 3) return null;
    return (
      <Words
        key={index}
        x={plot.x(middle.loadPercent)}
        y={plot.y(middle.kvarDelivered) - 8}
        palette={palette}
        tone={part.binding === 'pull-out' ? 'ochre' : 'madder'}
        bold
        anchor="middle"
        halo
      >
        {limitNames[part.binding]}
      </Words>
    );
  });
}

/** Marks at the usual load: what it does today and in the plan, in words instead of signs. */
function UsualLoad({ data, plot, palette }: Parts) {
  const at = data.usualLoadPercent;
  if (at === undefined) return null;
  const x = plot.x(at);
  const right = x > plot.right - 150;
  const points = [
    { name: 'today', shape: 'circle' as const, found: data.today && valueAt(data.today, at, load, kvar) },
    {
      name: data.planName ?? 'plan',
      shape: 'diamond' as const,
      found: data.plan && valueAt(data.plan, at, load, kvar),
    },
  ];
  return (
    <>
      <path d={`M${x} ${plot.top}V${plot.bottom}`} stroke={palette.ink} strokeDasharray="4 3" />
      <Words
        x={right ? x - 5 : x + 5}
        y={plot.bottom - 8}
        palette={palette}
        tone="ink2"
        anchor={right ? 'end' : 'start'}
        halo
      >
        {`usual load, ${formatQuantity(at, '%')}`}
      </Words>
      {points.map(({ name, shape, found }) =>
        found == null ? null : (
          <g key={name}>
            <PointMark x={x} y={plot.y(found)} shape={shape} palette={palette} />
            <Words
              x={right ? x - 12 : x + 12}
              y={plot.y(found) + 4}
              palette={palette}
              bold
              halo
              anchor={right ? 'end' : 'start'}
            >
              {`${name} ${found < 0 ? 'absorbs' : 'delivers'} ${formatNumber(Math.abs(found))}`}
            </Words>
          </g>
        ),
      )}
    </>
  );
}

/** Reactive power a motor may deliver over its load, with the limit that binds at each. */
export function CapabilityChart({ width, height, palette = pagePalette, ...data }: CapabilityData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const known = data.capability.filter(isKnown);
  const values = [...known, ...(data.today ?? []), ...(data.plan ?? [])].map(kvar);
  const kvarEnds = [Math.min(0, ...values) * 1.12, Math.max(0, ...values) * 1.14] as const;
  const yTicks = ticksWithin(...kvarEnds, narrow ? 5 : 7);
  const loads = data.capability.map((p) => p.loadPercent);
  const loadEnds = [Math.min(...loads), Math.max(...loads)] as const;
  const xTicks = ticksWithin(...loadEnds, narrow ? 4 : 6);
  const rows = data.capability.map((p) => ({
    loadPercent: p.loadPercent,
    today: data.today && valueAt(data.today, p.loadPercent, load, kvar),
    plan: data.plan && valueAt(data.plan, p.loadPercent, load, kvar),
  }));
  const line = { dot: false, activeDot: false, isAnimationActive: false, type: 'linear', strokeWidth: 1.75 } as const;
  const nought = yTicks.some((tick) => tick < 0);
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 10, bottom: 24, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={`Reactive power ${data.motorName} may deliver over its load`}
    >
      <XAxis
        dataKey="loadPercent"
        type="number"
        domain={[...loadEnds]}
        ticks={xTicks}
        height={20}
        {...axisLook(palette)}
      />
      <YAxis
        domain={[...kvarEnds]}
        ticks={yTicks}
        width={48}
        tickFormatter={(v: number) => formatNumber(Math.abs(v))}
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <PlotFrame
        palette={palette}
        xTicks={xTicks}
        yTicks={yTicks}
        xName="Shaft load, % of rated"
        yName={nought ? 'kvar; above the line delivered, below absorbed' : 'Delivered, kvar'}
      />
      <OnPlot at="ground">
        {(plot) => (
          <>
            <Limit data={data} plot={plot} palette={palette} hatchId={hatch.limit} />
            {nought && (
              <path d={`M${plot.left} ${plot.y(0)}H${plot.right}`} stroke={palette.ink} shapeRendering="crispEdges" />
            )}
          </>
        )}
      </OnPlot>
      <Line dataKey="plan" {...line} stroke={palette.verdigris} strokeDasharray="6 3" />
      <Line dataKey="today" {...line} stroke={palette.copper} />
      <OnPlot at="words">
        {(plot) => (
          <>
            <LimitNames data={data} plot={plot} palette={palette} />
            <UsualLoad data={data} plot={plot} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

const inWords = (value: number | null | undefined) => (value == null ? 'not admissible' : formatDelivered(value));

/** The same as a table: a line per load, in words instead of signs. */
export function capabilityTable(data: CapabilityData): LedgerData {
  const series = [
    { key: 'today', head: 'Today', points: data.today },
    { key: 'plan', head: data.planName ?? 'Plan', points: data.plan },
  ].filter((entry) => entry.points !== undefined);
  return {
    columns: [
      { key: 'load', head: 'Shaft load', unit: '% of rated', kind: 'number', align: 'left' },
      { key: 'most', head: 'Most it may deliver', unit: 'kvar', align: 'right', strong: true },
      { key: 'limit', head: 'Limit met first' },
      ...series.map(({ key, head }) => ({ key, head, unit: 'kvar', align: 'right' as const })),
    ],
    rows: data.capability.map((p) => ({
      id: String(p.loadPercent),
      cells: {
        load: p.loadPercent,
        most: inWords(p.kvarDelivered),
        limit: limitNames[p.binding],
        ...Object.fromEntries(
          series.map(({ key, points }) => [key, inWords(valueAt(points ?? [], p.loadPercent, load, kvar))]),
        ),
      },
    })),
  };
}

/** Island: the chart in its frame. */
export function CapabilityFigure({ finding, reading, fileName, ...data }: CapabilityData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={capabilityTable(data)}
      heightOf={(w) => (w < narrowBelow ? Math.round(w * 0.95) : Math.round(Math.min(460, w * 0.89)))}
    >
      {(size) => <CapabilityChart {...data} {...size} />}
    </ChartFigure>
  );
}
