import { ComposedChart, Line, XAxis, YAxis } from 'recharts';
import { formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, PointMark, Words, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';
import { domainOf, moneyScale, niceTicks, tickDecimals, ticksWithin } from './scale';

export interface CostPoint {
  fieldA: number;
  /** Bills of the year, major units. */
  yearCost: number;
}

export interface CostCurveData {
  currency: string;
  /** Priced points in order of field current. */
  points: CostPoint[];
  chosen: CostPoint;
  /** The plant as it runs now, if it lies on the picture. */
  standing?: CostPoint | null;
  standingName?: string;
  /** Field limit, and the lower one after the reserve. */
  limitFieldA: number;
  reserveFieldA?: number;
  /** Bills of the year that no admissible kvar in any interval can beat; absent: not known. */
  boundCost?: number;
  /** "Field current of M-1, A (M-2 at 104 A)". */
  axisName: string;
}

interface Parts {
  data: CostCurveData;
  plot: Plot;
  palette: Palette;
  divisor: number;
}

function Limits({ data, plot, palette, hatchId }: Omit<Parts, 'divisor'> & { hatchId: string }) {
  const from = data.reserveFieldA ?? data.limitFieldA;
  const clamp = (value: number) => Math.min(plot.right, Math.max(plot.left, plot.x(value)));
  const upward = (fieldA: number, name: string) => (
    <Words x={clamp(fieldA) - 5} y={plot.top + 92} palette={palette} tone="madder" bold upward halo>
      {`${name}, ${formatQuantity(fieldA, 'A')}`}
    </Words>
  );
  return (
    <>
      <rect
        x={clamp(from)}
        y={plot.top}
        width={plot.right - clamp(from)}
        height={plot.bottom - plot.top}
        fill={`url(#${hatchId})`}
      />
      <path d={`M${clamp(data.limitFieldA)} ${plot.top}V${plot.bottom}`} stroke={palette.madder} strokeWidth={1.5} />
      {upward(data.limitFieldA, 'field limit')}
      {data.reserveFieldA !== undefined && (
        <>
          <path
            d={`M${clamp(data.reserveFieldA)} ${plot.top}V${plot.bottom}`}
            stroke={palette.madder}
            strokeWidth={1.5}
            strokeDasharray="4 2"
          />
          {upward(data.reserveFieldA, 'reserve')}
        </>
      )}
    </>
  );
}

/** Today's setting; its words go to the side away from the chosen one where the two lie close together. */
function StandingMark({ data, plot, palette, divisor }: Parts) {
  const { standing, chosen, standingName } = data;
  if (!standing) return null;
  const words = standingName ?? `today ${formatQuantity(standing.fieldA, 'A', { upTo: 1 })}`;
  const x = plot.x(standing.fieldA);
  const y = plot.y(standing.yearCost / divisor);
  const room = words.length * 6.4 + 70;
  const toChosen = plot.x(chosen.fieldA) - x;
  const crowded = toChosen > 0 && toChosen < room;
  const fitsLeft = x - room + 60 > plot.left;
  const place = !crowded
    ? { x: x + 10, y: y - 3, anchor: 'start' as const }
    : fitsLeft
      ? { x: x - 10, y: y + 14, anchor: 'end' as const }
      : { x: plot.left + 6, y: y + 20, anchor: 'start' as const };
  return (
    <>
      <PointMark x={x} y={y} shape="circle" palette={palette} />
      <Words {...place} palette={palette} halo>
        {words}
      </Words>
    </>
  );
}

function Marks({ data, plot, palette, divisor }: Parts) {
  const { chosen, standing } = data;
  const x = plot.x(chosen.fieldA);
  const y = plot.y(chosen.yearCost / divisor);
  const above = y - 56 > plot.top;
  return (
    <>
      {standing && <StandingMark data={data} plot={plot} palette={palette} divisor={divisor} />}
      <path d={`M${x} ${y}v${above ? -34 : 34}`} stroke={palette.ink} />
      <PointMark x={x} y={y} shape="diamond" palette={palette} />
      <Words x={x} y={above ? y - 54 : y + 48} palette={palette} bold anchor="middle" halo>
        {`chosen ${formatQuantity(chosen.fieldA, 'A', { upTo: 1 })}`}
      </Words>
      <Words x={x} y={above ? y - 40 : y + 62} palette={palette} anchor="middle" halo>
        {formatNumber(chosen.yearCost)}
      </Words>
    </>
  );
}

/** The line no finer control can get below. */
function Bound({ cost, plot, palette, divisor }: Parts & { cost: number }) {
  const y = plot.y(cost / divisor);
  return (
    <>
      <path d={`M${plot.left} ${y}H${plot.right}`} stroke={palette.ink} strokeDasharray="6 3" />
      <Words x={plot.left + 8} y={y + 15} palette={palette} bold halo>
        {`bound, every interval its own best kvar: ${formatNumber(cost)}`}
      </Words>
    </>
  );
}

/** The year's bills over the field current. The axis of money is cut and says so. */
export function CostCurveChart({ width, height, palette = pagePalette, ...data }: CostCurveData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < narrowBelow;
  const { boundCost } = data;
  const costs = [
    ...[...data.points, data.chosen, ...(data.standing ? [data.standing] : [])].map((p) => p.yearCost),
    ...(boundCost === undefined ? [] : [boundCost]),
  ];
  const lowest = Math.min(...costs);
  const scale = moneyScale(Math.max(...costs));
  const divisor = Math.min(scale.divisor, 1000);
  const yTicks = niceTicks(
    (lowest - (Math.max(...costs) - lowest) * 0.12) / divisor,
    Math.max(...costs) / divisor,
    narrow ? 4 : 5,
  );
  const fields = [...data.points.map((p) => p.fieldA), data.limitFieldA];
  const fieldEnds = [Math.min(...fields), Math.max(...fields) * 1.02] as const;
  const xTicks = ticksWithin(...fieldEnds, narrow ? 5 : 10);
  const decimals = tickDecimals(yTicks);
  const rows = data.points.map((p) => ({ fieldA: p.fieldA, cost: p.yearCost / divisor }));
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 8, bottom: 24, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label="Bills of the year against the field current"
    >
      <XAxis dataKey="fieldA" type="number" domain={[...fieldEnds]} ticks={xTicks} height={20} {...axisLook(palette)} />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={52}
        tickFormatter={(v: number) => formatNumber(v, { decimals })}
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <PlotFrame
        palette={palette}
        xTicks={xTicks}
        yTicks={yTicks}
        xName={narrow ? 'Field current, A' : data.axisName}
        yName={`Bills of the year, ${divisor === 1 ? '' : 'thousand '}${data.currency}, axis cut`}
      />
      <OnPlot at="ground">
        {(plot) => <Limits data={data} plot={plot} palette={palette} hatchId={hatch.limit} />}
      </OnPlot>
      <Line
        dataKey="cost"
        type="linear"
        dot={false}
        activeDot={false}
        isAnimationActive={false}
        stroke={palette.ink}
        strokeWidth={1.75}
      />
      {boundCost !== undefined && (
        <OnPlot at="over">
          {(plot) => <Bound cost={boundCost} data={data} plot={plot} palette={palette} divisor={divisor} />}
        </OnPlot>
      )}
      <OnPlot at="words">{(plot) => <Marks data={data} plot={plot} palette={palette} divisor={divisor} />}</OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: every priced setting. */
export function costCurveTable(data: CostCurveData): LedgerData {
  return {
    columns: [
      { key: 'field', head: 'Field', unit: 'A', kind: 'number', decimals: 1, align: 'left' },
      { key: 'cost', head: 'Bills of the year', unit: data.currency, kind: 'number', decimals: 2 },
      { key: 'more', head: 'Above the chosen', unit: data.currency, kind: 'number', decimals: 2 },
      { key: 'note', head: 'Note' },
    ],
    rows: data.points.map((p) => {
      const notes = [
        p.fieldA === data.chosen.fieldA && 'chosen',
        data.standing && p.fieldA === data.standing.fieldA && (data.standingName ?? 'today'),
        p.fieldA > data.limitFieldA
          ? 'beyond the field limit'
          : data.reserveFieldA !== undefined && p.fieldA > data.reserveFieldA && 'within the reserve',
      ].filter((note) => typeof note === 'string');
      const cells = {
        field: p.fieldA,
        cost: p.yearCost,
        more: p.yearCost - data.chosen.yearCost,
        note: notes.join(', '),
      };
      return {
        id: String(p.fieldA),
        cells,
        kind: p.fieldA === data.chosen.fieldA ? ('chosen' as const) : ('plain' as const),
      };
    }),
  };
}

/** Island: the chart in its frame. */
export function CostCurveFigure({ finding, reading, fileName, ...data }: CostCurveData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={costCurveTable(data)}
      heightOf={() => 300}
    >
      {(size) => <CostCurveChart {...data} {...size} />}
    </ChartFigure>
  );
}
