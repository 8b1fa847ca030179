import { formatNumber, formatQuantity } from '../ui/format';
import { ChartFigure, type FigureText } from './ChartFigure';
import { useHatch } from './HatchDefs';
import { linePath, narrowBelow, PointMark, Words, type ChartSize, type Plot } from './kit';
import { lossTable, type KvarCost, type LossData } from './loss-per-kvar';
import { NumericPlane } from './NumericPlane';
import { pagePalette, type Palette } from './palette';
import { ticksWithin } from './scale';

interface Parts {
  data: LossData;
  plot: Plot;
  palette: Palette;
}

const marginal = (plot: Plot) => (p: KvarCost) => ({ x: plot.x(p.kvarDelivered), y: plot.y(p.marginalWPerKvar) });
const average = (plot: Plot) => (p: KvarCost) => ({ x: plot.x(p.kvarDelivered), y: plot.y(p.averageWPerKvar) });

function Lines({ data, plot, palette, hatchId }: Parts & { hatchId: string }) {
  const limit = data.most && plot.x(data.most.kvarDelivered);
  const gained = data.points.filter((p) => p.kvarDelivered >= data.today.kvarDelivered);
  return (
    <>
      {limit !== null && limit < plot.right && (
        <>
          <rect
            x={limit}
            y={plot.top}
            width={plot.right - limit}
            height={plot.bottom - plot.top}
            fill={`url(#${hatchId})`}
          />
          <path d={`M${limit} ${plot.top}V${plot.bottom}`} stroke={palette.madder} strokeWidth={1.5} />
        </>
      )}
      <path d={`M${plot.left} ${plot.y(0)}H${plot.right}`} stroke={palette.ink} shapeRendering="crispEdges" />
      <path d={`M${plot.x(0)} ${plot.top}V${plot.bottom}`} stroke={palette.ink2} strokeDasharray="1 3" />
      <path d={linePath(data.points.map(marginal(plot)))} fill="none" stroke={palette.ink} strokeWidth={2} />
      <path
        d={linePath(gained.map(average(plot)))}
        fill="none"
        stroke={palette.ink}
        strokeWidth={1.4}
        strokeDasharray="6 3"
      />
    </>
  );
}

/** Names of both lines near the right end, where they stand apart. */
function LineNames({ data, plot, palette }: Parts) {
  const inside = data.points.filter((p) => plot.x(p.kvarDelivered) < plot.right - 40);
  const at = inside.at(-1) ?? data.points.at(-1);
  if (!at) return null;
  const { x, y } = marginal(plot)(at);
  return (
    <>
      <Words x={x - 8} y={y - 2} palette={palette} bold anchor="end" halo>
        the next kvar
      </Words>
      <Words x={x - 4} y={average(plot)(at).y + 18} palette={palette} anchor="end" halo>
        mean since today
      </Words>
    </>
  );
}

function Marks({ data, plot, palette, narrow }: Parts & { narrow: boolean }) {
  const place = marginal(plot);
  const { today, tried, least } = data;
  const watts = (point: KvarCost) => formatQuantity(point.marginalWPerKvar, 'W', { decimals: 1 });
  const low = place(least);
  return (
    <>
      <path
        d={`M${low.x} ${low.y - 7}V${low.y + 7}M${low.x - 7} ${low.y}H${low.x + 7}`}
        stroke={palette.ink}
        strokeWidth={1.5}
      />
      <Words x={low.x + 6} y={low.y + 18} palette={palette} tone="ink2" halo>
        {narrow ? 'least loss' : `least loss, ${formatQuantity(least.lossKw, 'kW', { decimals: 1 })}`}
      </Words>
      <PointMark {...place(today)} shape="circle" palette={palette} />
      <Words x={place(today).x - 4} y={place(today).y - 12} palette={palette} bold halo anchor="end">
        {`today ${watts(today)}`}
      </Words>
      {tried && (
        <>
          <PointMark {...place(tried)} shape="diamond" palette={palette} />
          <Words x={place(tried).x - 10} y={place(tried).y - 10} palette={palette} bold halo anchor="end">
            {`${tried.name} ${watts(tried)}`}
          </Words>
        </>
      )}
    </>
  );
}

function SideNames({ data, plot, palette }: Parts) {
  const nought = plot.x(0);
  const limit = data.most && plot.x(data.most.kvarDelivered);
  return (
    <>
      {nought - plot.left > 70 && (
        <Words x={(plot.left + nought) / 2} y={plot.bottom + 38} palette={palette} tone="copper" bold anchor="middle">
          absorbs kvar
        </Words>
      )}
      <Words x={(nought + plot.right) / 2} y={plot.bottom + 38} palette={palette} tone="verdigris" bold anchor="middle">
        delivers kvar, leading
      </Words>
      {limit !== null && limit < plot.right && (
        <Words x={limit - 6} y={plot.bottom - 8} palette={palette} tone="madder" bold upward halo>
          {data.most?.name}
        </Words>
      )}
    </>
  );
}

/** What each further kvar costs the motor in losses. */
export function LossChart({ width, height, palette = pagePalette, ...data }: LossData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const kvars = data.points.map((p) => p.kvarDelivered);
  const xEnds: [number, number] = [Math.min(...kvars), Math.max(...kvars)];
  const watts = data.points.map((p) => p.marginalWPerKvar);
  const yEnds: [number, number] = [Math.min(-2, 1.1 * Math.min(...watts)), 1.1 * Math.max(...watts)];
  const parts = (plot: Plot): Parts => ({ data, plot, palette });
  return (
    <NumericPlane
      width={width}
      height={height}
      palette={palette}
      hatch={hatch}
      label={`Loss per kvar of ${data.motorName} over the reactive power it delivers`}
      x={{
        ends: xEnds,
        ticks: ticksWithin(...xEnds, narrow ? 4 : 7),
        tickWords: (value) => formatNumber(Math.abs(value)),
      }}
      y={{
        ends: yEnds,
        ticks: ticksWithin(...yEnds, narrow ? 4 : 6),
        name: 'Loss, W per kvar',
        tickWords: (value) => formatNumber(value),
      }}
      drawn={(plot) => <Lines {...parts(plot)} hatchId={hatch.limit} />}
      words={(plot) => (
        <>
          <LineNames {...parts(plot)} />
          <Marks {...parts(plot)} narrow={narrow} />
          <SideNames {...parts(plot)} />
        </>
      )}
    />
  );
}

/** Island: the chart in its frame. */
export function LossFigure({ finding, reading, fileName, ...data }: LossData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={lossTable(data)}
      heightOf={(w) => (w < narrowBelow ? Math.round(w * 0.95) : Math.round(Math.min(460, w * 0.89)))}
    >
      {(size) => <LossChart {...data} {...size} />}
    </ChartFigure>
  );
}
