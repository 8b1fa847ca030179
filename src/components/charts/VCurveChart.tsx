import { ComposedChart, Scatter, XAxis, YAxis } from 'recharts';
import { formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch, type Hatch } from './HatchDefs';
import {
  axisLook,
  linePath,
  narrowBelow,
  OnPlot,
  PlotFrame,
  PointMark,
  Words,
  type ChartSize,
  type MarkShape,
  type Plot,
} from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, niceTicks, valueAt } from './scale';

/** A point of the plane: amperes of field and armature. */
export interface CurrentPoint {
  fieldA: number;
  armatureA: number;
}

export interface VCurve {
  /** Shaft load, per cent of rated. */
  loadPercent: number;
  /** In order of field current. */
  points: (CurrentPoint & { leading: boolean })[];
}

export interface VCurveData {
  motorName: string;
  curves: VCurve[];
  /** Unity power factor over the loads, from no load upward. */
  unity: CurrentPoint[];
  /** Drawn stronger. */
  usualLoadPercent?: number;
  limits: {
    armatureA: number;
    fieldA: number;
    /** Least admissible field over the loads; the ground above and left of it is hatched. */
    pullOut?: CurrentPoint[];
    /** "pull-out below 1.5". */
    pullOutName?: string;
  };
  today?: CurrentPoint | null;
  plan?: CurrentPoint | null;
  planName?: string;
  nameplate?: CurrentPoint | null;
}

interface Parts {
  data: VCurveData;
  plot: Plot;
  palette: Palette;
  ends: { field: [number, number]; armature: [number, number] };
  narrow: boolean;
}

const toPixels = (plot: Plot) => (p: CurrentPoint) => ({ x: plot.x(p.fieldA), y: plot.y(p.armatureA) });

/** Ground beyond the three limits. */
function Grounds({ data, plot, palette, ends, hatch }: Parts & { hatch: Record<Hatch, string> }) {
  const { armatureA, fieldA, pullOut } = data.limits;
  const stator = plot.y(Math.min(armatureA, ends.armature[1]));
  const field = plot.x(Math.min(fieldA, ends.field[1]));
  const edge = pullOut?.map(toPixels(plot)) ?? [];
  const first = edge[0];
  const last = edge.at(-1);
  return (
    <>
      <rect
        x={plot.left}
        y={plot.top}
        width={plot.right - plot.left}
        height={Math.max(0, stator - plot.top)}
        fill={`url(#${hatch.limit})`}
      />
      <rect
        x={field}
        y={stator}
        width={Math.max(0, plot.right - field)}
        height={plot.bottom - stator}
        fill={`url(#${hatch.limit})`}
      />
      {first && last && (
        <>
          <path
            d={`M${plot.left} ${first.y}${linePath(edge).replace('M', 'L')}V${plot.top}H${plot.left}Z`}
            fill={`url(#${hatch.pullOut})`}
          />
          <path d={linePath(edge)} fill="none" stroke={palette.ochre} strokeWidth={1.5} />
        </>
      )}
    </>
  );
}

function Curves({ data, plot, palette }: Parts) {
  const at = toPixels(plot);
  return (
    <>
      <path d={linePath(data.unity.map(at))} fill="none" stroke={palette.ink} strokeDasharray="1 3" />
      {data.curves.map((curve) => {
        const turn = curve.points.findIndex((p) => p.leading);
        const split = turn < 0 ? curve.points.length : turn;
        const strokeWidth = curve.loadPercent === data.usualLoadPercent ? 1.9 : 1.1;
        const lagging = curve.points.slice(0, split + 1);
        const leading = curve.points.slice(Math.max(0, split));
        return (
          <g key={curve.loadPercent} fill="none" strokeWidth={strokeWidth}>
            {lagging.length > 1 && <path d={linePath(lagging.map(at))} stroke={palette.copper} />}
            {leading.length > 1 && (
              <path d={linePath(leading.map(at))} stroke={palette.verdigris} strokeDasharray="6 3" />
            )}
          </g>
        );
      })}
    </>
  );
}

function LimitLines({ data, plot, palette, ends }: Parts) {
  const { armatureA, fieldA } = data.limits;
  const y = plot.y(armatureA);
  const x = plot.x(fieldA);
  return (
    <>
      {armatureA <= ends.armature[1] && (
        <path d={`M${plot.left} ${y}H${plot.right}`} stroke={palette.madder} strokeWidth={1.5} />
      )}
      {fieldA <= ends.field[1] && (
        <path d={`M${x} ${plot.top}V${plot.bottom}`} stroke={palette.madder} strokeWidth={1.5} />
      )}
    </>
  );
}

function Names({ data, plot, palette, ends, narrow }: Parts) {
  const { armatureA, fieldA, pullOut, pullOutName } = data.limits;
  const loads = narrow ? data.curves.filter((_, index) => index % 2 === 0) : data.curves;
  const unityAt = (index: number) => data.unity[index];
  const edge = pullOut?.[0];
  const low = plot.bottom - 24;
  return (
    <>
      {loads.map((curve) => {
        const bottom = unityAt(data.curves.indexOf(curve));
        if (!bottom) return null;
        const usual = curve.loadPercent === data.usualLoadPercent;
        return (
          <Words
            key={curve.loadPercent}
            x={plot.x(bottom.fieldA) + 6}
            y={plot.y(bottom.armatureA) - 5}
            palette={palette}
            bold={usual}
            halo
          >
            {`${formatNumber(curve.loadPercent)} %${curve === data.curves.at(-1) ? ' load' : ''}`}
          </Words>
        );
      })}
      <Words
        x={(plot.left + plot.right) / 2}
        y={plot.y(armatureA) - 5}
        palette={palette}
        tone="madder"
        bold
        anchor="middle"
        halo
      >
        {`stator, ${formatQuantity(armatureA, 'A')}`}
      </Words>
      {fieldA <= ends.field[1] && (
        <Words
          x={plot.x(fieldA) + (plot.right - plot.x(fieldA) > 20 ? 14 : -6)}
          y={plot.bottom - 8}
          palette={palette}
          tone="madder"
          bold
          upward
          halo
        >
          {`field, ${formatQuantity(fieldA, 'A')}`}
        </Words>
      )}
      {edge && (
        <Words
          x={plot.left + 8}
          y={Math.max(plot.y(armatureA) + 18, plot.y(edge.armatureA) - 22)}
          palette={palette}
          tone="ochre"
          bold
          halo
        >
          {pullOutName ?? 'pull-out'}
        </Words>
      )}
      <Words x={plot.left + (plot.right - plot.left) * 0.1} y={low} palette={palette} tone="copper" bold halo>
        lagging
      </Words>
      <Words x={plot.left + (plot.right - plot.left) * 0.62} y={low} palette={palette} tone="verdigris" bold halo>
        leading
      </Words>
    </>
  );
}

function Marks({ data, plot, palette }: Parts) {
  const marks: { at: CurrentPoint; shape: MarkShape; words: string; above?: boolean }[] = [];
  if (data.nameplate) marks.push({ at: data.nameplate, shape: 'square', words: 'nameplate', above: true });
  if (data.today)
    marks.push({
      at: data.today,
      shape: 'circle',
      words: `today ${formatQuantity(data.today.fieldA, 'A', { upTo: 1 })}`,
    });
  if (data.plan) {
    marks.push({
      at: data.plan,
      shape: 'diamond',
      words: `${data.planName ?? 'plan'} ${formatQuantity(data.plan.fieldA, 'A', { upTo: 1 })}`,
    });
  }
  return marks.map((mark) => {
    const { x, y } = toPixels(plot)(mark.at);
    const right = x > plot.right - 60;
    return (
      <g key={mark.shape}>
        <PointMark x={x} y={y} shape={mark.shape} palette={palette} />
        <Words
          x={right ? x - 10 : x}
          y={mark.above ? y - 12 : y + 20}
          palette={palette}
          bold
          halo
          anchor={right ? 'end' : 'middle'}
        >
          {mark.words}
        </Words>
      </g>
    );
  });
}

/** Family of V-curves: armature over field current at several loads, with the limits of stator, field and pull-out. */
export function VCurveChart({ width, height, palette = pagePalette, ...data }: VCurveData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const all = data.curves.flatMap((curve) => curve.points);
  const fields = all.map((p) => p.fieldA);
  const xTicks = niceTicks(Math.min(...fields), Math.max(...fields, data.limits.fieldA * 1.08), narrow ? 5 : 9);
  const yTicks = niceTicks(0, data.limits.armatureA * 1.15, narrow ? 4 : 6);
  const ends = { field: domainOf(xTicks), armature: domainOf(yTicks) };
  const clip = `${hatch.limit}-clip`;
  return (
    <ComposedChart
      width={width}
      height={height}
      data={all}
      margin={{ top: 28, right: 10, bottom: 24, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={`V-curves of ${data.motorName} with stator, field and pull-out limits`}
    >
      <XAxis
        dataKey="fieldA"
        type="number"
        domain={ends.field}
        ticks={xTicks}
        height={20}
        allowDataOverflow
        {...axisLook(palette)}
      />
      <YAxis
        dataKey="armatureA"
        type="number"
        domain={ends.armature}
        ticks={yTicks}
        width={42}
        allowDataOverflow
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <PlotFrame
        palette={palette}
        xTicks={xTicks}
        yTicks={yTicks}
        xName="Field current, A"
        yName="Armature current, A"
      />
      <Scatter dataKey="armatureA" fill="none" isAnimationActive={false} shape={() => <g />} />
      <OnPlot at="ground">
        {(plot) => {
          const parts = { data, plot, palette, ends, narrow };
          return (
            <>
              <clipPath id={clip}>
                <rect x={plot.left} y={plot.top} width={plot.right - plot.left} height={plot.bottom - plot.top} />
              </clipPath>
              <g clipPath={`url(#${clip})`}>
                <Grounds {...parts} hatch={hatch} />
                <Curves {...parts} />
                <LimitLines {...parts} />
              </g>
            </>
          );
        }}
      </OnPlot>
      <OnPlot at="words">
        {(plot) => (
          <>
            <Names data={data} plot={plot} palette={palette} ends={ends} narrow={narrow} />
            <Marks data={data} plot={plot} palette={palette} ends={ends} narrow={narrow} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: a line per field current, a column per load; beyond a curve's ends the cell is empty. */
export function vCurveTable(data: VCurveData): LedgerData {
  const fields = data.curves.flatMap((curve) => curve.points.map((p) => p.fieldA));
  const steps = niceTicks(Math.min(...fields), Math.max(...fields), 16);
  const armature = (curve: VCurve, fieldA: number) =>
    valueAt(
      curve.points,
      fieldA,
      (p) => p.fieldA,
      (p) => p.armatureA,
    );
  return {
    columns: [
      { key: 'field', head: 'Field', unit: 'A', kind: 'number', decimals: 0, align: 'left' },
      ...data.curves.map((curve) => ({
        key: `load-${curve.loadPercent}`,
        head: `${formatNumber(curve.loadPercent)} % load`,
        unit: 'A',
        kind: 'number' as const,
        decimals: 1,
        strong: curve.loadPercent === data.usualLoadPercent,
      })),
    ],
    rows: steps.map((fieldA) => ({
      id: String(fieldA),
      cells: {
        field: fieldA,
        ...Object.fromEntries(data.curves.map((curve) => [`load-${curve.loadPercent}`, armature(curve, fieldA)])),
      },
    })),
  };
}

/** Island: the chart in its frame. */
export function VCurveFigure({ finding, reading, fileName, ...data }: VCurveData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={vCurveTable(data)}
      heightOf={(w) => (w < narrowBelow ? Math.round(w * 0.95) : Math.round(Math.min(460, w * 0.89)))}
    >
      {(size) => <VCurveChart {...data} {...size} />}
    </ChartFigure>
  );
}
