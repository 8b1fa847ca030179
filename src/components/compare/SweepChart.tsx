import { ComposedChart, Line, XAxis, YAxis } from 'recharts';
import { ChartFigure, type FigureText } from '../charts/ChartFigure';
import { axisLook, narrowBelow, OnPlot, PlotFrame, PointMark, Words, type ChartSize, type Plot } from '../charts/kit';
import { pagePalette, type Palette } from '../charts/palette';
import { domainOf, moneyScale, niceTicks, spreadLabels, tickDecimals, ticksWithin, valueAt } from '../charts/scale';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

export interface SweepData {
  currency: string;
  /** Over the share of lagging kvarh taken away, or over a factor on the whole load. */
  over: 'share' | 'factor';
  /** The standing schedule first. */
  names: string[];
  points: { place: number; powerFactor: number; costs: number[] }[];
  /** Places at which the standing schedule and another cost the same. */
  marks: { place: number; cost: number }[];
  /** Energy of the year today. [kWh] */
  kwh: number;
}

/** What is drawn: the year's cost; over a load that grows, where all costs grow alike, the price of a kWh. */
const drawn = ({ over, kwh }: SweepData, place: number, cost: number) =>
  over === 'share' ? cost : cost / (kwh * place);

const dashes = [undefined, '7 4', '2 3', '10 3 2 3', '4 2'];
const axisNames = {
  share: {
    wide: "Share of today's lagging kvarh taken away, %; average power factor beneath",
    narrow: 'kvarh away, %; pf',
  },
  factor: { wide: "Load, times today's, power factor unchanged", narrow: "Load, times today's" },
};

const placeWords = (over: SweepData['over'], place: number) =>
  over === 'share' ? formatNumber(100 * place) : formatNumber(place, { upTo: 2 });

/** Power factor at a share: kvarh per kWh falls in a straight line between the points of the grid. */
const factorAt = ({ points }: SweepData, place: number) =>
  valueAt(
    points,
    place,
    (point) => point.place,
    (point) => point.powerFactor,
  );

/** Names at whichever end the lines lie further apart. */
function LineNames({ data, plot, palette, divisor }: Parts) {
  const { names, points } = data;
  const ends = [points[0]!, points.at(-1)!].map(({ place, costs }) => costs.map((cost) => drawn(data, place, cost)));
  const [first, last] = ends.map((values) => Math.max(...values) - Math.min(...values));
  const atStart = first! > last!;
  const wanted = ends[atStart ? 0 : 1]!.map((value) => plot.y(value / divisor) - 8);
  const placed = spreadLabels(wanted, 15, plot.top + 14, plot.bottom - 6);
  return names.map((name, index) => (
    <Words
      key={name}
      x={atStart ? plot.left + 10 : plot.right - 10}
      y={placed[index]!}
      anchor={atStart ? 'start' : 'end'}
      palette={palette}
      bold={index === 0}
      halo
    >
      {name}
    </Words>
  ));
}

interface Parts {
  data: SweepData;
  plot: Plot;
  palette: Palette;
  divisor: number;
}

/** Where two cost the same: a line down to the axis with its place. */
function Marks({ data, plot, palette, divisor }: Parts) {
  return data.marks.map(({ place, cost }, index) => {
    const [x, y] = [plot.x(place), plot.y(drawn(data, place, cost) / divisor)];
    const pf = factorAt(data, place);
    const words =
      data.over === 'share' && pf !== null
        ? `pf ${formatNumber(pf, { decimals: 2 })}`
        : formatNumber(place, { decimals: 2 });
    const isLeft = x > plot.right - 90;
    return (
      <g key={`${place}`}>
        <path d={`M${x} ${y}V${plot.bottom}`} stroke={palette.ink} strokeDasharray="1 3" />
        <path d={`M${x - 5} ${y}h10M${x} ${y - 5}v10`} stroke={palette.ink} strokeWidth={2} />
        <Words
          x={isLeft ? x - 6 : x + 6}
          y={plot.bottom - 8 - 14 * (index % 2)}
          anchor={isLeft ? 'end' : 'start'}
          palette={palette}
          bold
          halo
        >
          {words}
        </Words>
      </g>
    );
  });
}

/** Today's load on the standing schedule. */
function Today({ data, plot, palette, divisor }: Parts) {
  const place = data.over === 'share' ? 0 : 1;
  const cost = valueAt(
    data.points,
    place,
    (point) => point.place,
    (point) => drawn(data, point.place, point.costs[0]!),
  );
  if (cost === null) return null;
  const [x, y] = [plot.x(place), plot.y(cost / divisor)];
  const hasRoom = x - 50 > plot.left;
  return (
    <>
      <PointMark x={x} y={y} shape="circle" palette={palette} />
      <Words
        x={hasRoom ? x - 8 : plot.left + 8}
        y={y + 26 > plot.bottom ? y - 10 : y + 18}
        anchor={hasRoom ? 'end' : 'start'}
        palette={palette}
        halo
      >
        today
      </Words>
    </>
  );
}

function Ticks({ data, plot, palette, ticks }: Omit<Parts, 'divisor'> & { ticks: number[] }) {
  return ticks.map((tick) => {
    const pf = factorAt(data, tick);
    return (
      <g key={tick}>
        <Words x={plot.x(tick)} y={plot.bottom + 17} anchor="middle" palette={palette} tone="ink2">
          {placeWords(data.over, tick)}
        </Words>
        {data.over === 'share' && pf !== null && (
          <Words x={plot.x(tick)} y={plot.bottom + 32} anchor="middle" palette={palette} tone="ink2">
            {formatNumber(pf, { decimals: 2 })}
          </Words>
        )}
      </g>
    );
  });
}

/** Cost of the year over a varied load, a line a schedule. The axis of money is cut and says so. */
export function SweepChart({ width, height, palette = pagePalette, ...data }: SweepData & ChartSize) {
  const narrow = width < narrowBelow;
  const { points, names, over, currency } = data;
  const costs = points.flatMap((point) => point.costs.map((cost) => drawn(data, point.place, cost)));
  const [least, most] = [Math.min(...costs), Math.max(...costs)];
  const divisor = Math.min(moneyScale(most).divisor, 1000);
  const yTicks = niceTicks(least / divisor, most / divisor, narrow ? 4 : 5);
  const ends: [number, number] = [points[0]!.place, points.at(-1)!.place];
  const xTicks = ticksWithin(...ends, narrow ? 4 : 8);
  const rows = points.map((point) => ({
    place: point.place,
    ...Object.fromEntries(point.costs.map((cost, index) => [`c${index}`, drawn(data, point.place, cost) / divisor])),
  }));
  const decimals = over === 'share' ? tickDecimals(yTicks) : 4;
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 28, right: 14, bottom: over === 'share' ? 40 : 26, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={`Cost of the year on ${names.join(', ')}`}
    >
      <XAxis
        dataKey="place"
        type="number"
        domain={ends}
        ticks={xTicks}
        height={20}
        {...axisLook(palette)}
        tick={false}
      />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={52}
        tickFormatter={(v: number) => formatNumber(v, { decimals })}
        {...axisLook(palette)}
      />
      <PlotFrame
        palette={palette}
        xTicks={xTicks}
        yTicks={yTicks}
        yName={
          over === 'share'
            ? `Bills of the year, ${divisor === 1 ? '' : 'thousand '}${currency}, axis cut`
            : `Average price, ${currency}/kWh, axis cut`
        }
      />
      {names.map((name, index) => (
        <Line
          key={name}
          dataKey={`c${index}`}
          type="linear"
          dot={false}
          activeDot={false}
          isAnimationActive={false}
          stroke={palette.ink}
          strokeWidth={index === 0 ? 2 : 1.5}
          strokeDasharray={dashes[index % dashes.length]}
        />
      ))}
      <OnPlot at="words">
        {(plot) => (
          <>
            <Ticks data={data} plot={plot} palette={palette} ticks={xTicks} />
            <Words x={plot.right} y={plot.bottom + (over === 'share' ? 50 : 36)} anchor="end" palette={palette}>
              {axisNames[over][narrow ? 'narrow' : 'wide']}
            </Words>
            <LineNames data={data} plot={plot} palette={palette} divisor={divisor} />
            <Marks data={data} plot={plot} palette={palette} divisor={divisor} />
            <Today data={data} plot={plot} palette={palette} divisor={divisor} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: every place looked at. */
export function sweepTable(data: SweepData): LedgerData {
  const isShare = data.over === 'share';
  return {
    columns: [
      isShare
        ? { key: 'place', head: 'Lagging kvarh taken away', unit: '%', kind: 'number', decimals: 1 }
        : { key: 'place', head: 'Load', unit: "times today's", kind: 'number', decimals: 2 },
      { key: 'pf', head: 'Average pf', kind: 'number', decimals: 3 },
      ...data.names.map((name, index) => ({
        key: `c${index}`,
        head: name,
        unit: data.currency,
        kind: 'number' as const,
        decimals: 2,
      })),
    ],
    rows: data.points.map(({ place, powerFactor, costs }) => ({
      id: String(place),
      cells: {
        place: isShare ? 100 * place : place,
        pf: powerFactor,
        ...Object.fromEntries(costs.map((cost, index) => [`c${index}`, cost])),
      },
    })),
  };
}

/** Island: the chart in its frame. */
export function SweepFigure({ finding, reading, fileName, ...data }: SweepData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={sweepTable(data)}
      heightOf={(width) => (width < narrowBelow ? 290 : 300)}
    >
      {(size) => <SweepChart {...data} {...size} />}
    </ChartFigure>
  );
}
