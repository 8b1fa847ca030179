import { formatNumber } from '../ui/format';
import { ChartFigure, type FigureText } from './ChartFigure';
import { useHatch } from './HatchDefs';
import { linePath, narrowBelow, PointMark, Words, type ChartSize, type Plot } from './kit';
import { NumericPlane } from './NumericPlane';
import { pagePalette, type Palette } from './palette';
import { deliveryEdge, pqEnds, pqPlaneTable, type PqCloud, type PqPlaneData, type PqPoint } from './pq-plane';
import { ticksWithin } from './scale';

interface Parts {
  data: PqPlaneData;
  plot: Plot;
  palette: Palette;
}

/** Delivered stands on the left, as leading does on the V-curves' right: absorbed is the axis' value. */
const toPixels = (plot: Plot) => (p: PqPoint) => ({ x: plot.x(-p.kvarDelivered), y: plot.y(p.kw) });

/** Ground beyond the limits: outside the delivering edge and the armature's circle, and below the pull-out margin. */
function Grounds({ data, plot, palette, hatch }: Parts & { hatch: { limit: string; pullOut: string } }) {
  const at = toPixels(plot);
  const { armature, pullOut } = data.limits;
  const absorbing = armature.filter((p) => p.kvarDelivered <= 0);
  const inside = [...deliveryEdge(data.limits), ...absorbing].map(at);
  const frame = `M${plot.left} ${plot.top}H${plot.right}V${plot.bottom}H${plot.left}Z`;
  const margin = pullOut.map(at);
  const [first, last] = [margin[0], margin.at(-1)];
  return (
    <>
      <path d={`${frame}${linePath(inside)}Z`} fillRule="evenodd" fill={`url(#${hatch.limit})`} />
      <path d={linePath(inside)} fill="none" stroke={palette.madder} strokeWidth={1.5} />
      {first && last && (
        <>
          <path d={`${linePath(margin)}H${plot.right}V${first.y}Z`} fill={`url(#${hatch.pullOut})`} />
          <path d={linePath(margin)} fill="none" stroke={palette.ochre} strokeWidth={1.5} />
        </>
      )}
    </>
  );
}

/** Squares whose area is their hours: filled where the motor absorbs, outlined where it delivers. */
function Cloud({ cloud, data, plot, palette }: Parts & { cloud: PqCloud }) {
  const longest = Math.max(...cloud.squares.map((square) => square.hours));
  const cell = Math.abs(plot.x(data.squareKvar) - plot.x(0));
  const most = Math.max(9, Math.min(14, 1.6 * cell));
  return cloud.squares.map((square, index) => {
    const { x, y } = toPixels(plot)(square);
    const side = Math.max(2, most * Math.sqrt(square.hours / longest));
    const leads = square.kvarDelivered >= 0;
    const look = leads
      ? { fill: palette.ground, stroke: palette.verdigris, strokeWidth: 1.3 }
      : { fill: palette.copper, stroke: palette.ground, strokeWidth: 0.5 };
    return <rect key={index} x={x - side / 2} y={y - side / 2} width={side} height={side} {...look} />;
  });
}

function CloudName({ cloud, plot, palette, lift }: Parts & { cloud: PqCloud; lift: number }) {
  const at = toPixels(plot);
  const spots = [...cloud.squares.map(at), at(cloud.usual)];
  const lowest = Math.max(...spots.map((spot) => spot.y));
  const leads = cloud.usual.kvarDelivered >= 0;
  const x = Math.min(plot.right - 62, Math.max(plot.left + 62, at(cloud.usual).x));
  const y = Math.min(plot.bottom - 28, lowest + 24) + lift;
  return (
    <>
      <PointMark {...at(cloud.usual)} shape={cloud.shape} palette={palette} />
      <Words x={x} y={y} palette={palette} bold halo anchor="middle">
        {cloud.name}
      </Words>
      <Words x={x} y={y + 14} palette={palette} bold halo anchor="middle" tone={leads ? 'verdigris' : 'copper'}>
        {`${leads ? 'delivers' : 'absorbs'} ${formatNumber(Math.abs(cloud.usual.kvarDelivered))}`}
      </Words>
    </>
  );
}

/** Names of two clouds that stand close are set under each other. */
function CloudNames(parts: Parts) {
  const { data, plot } = parts;
  const [first, second] = data.clouds;
  const apart =
    first && second ? Math.abs(plot.x(first.usual.kvarDelivered) - plot.x(second.usual.kvarDelivered)) : 200;
  return data.clouds.map((cloud, index) => (
    <CloudName key={cloud.shape} {...parts} cloud={cloud} lift={index > 0 && apart < 110 ? 32 : 0} />
  ));
}

function LimitNames({ data, plot, palette, narrow }: Parts & { narrow: boolean }) {
  const at = toPixels(plot);
  const { armature, field, fieldBy, pullOut, pullOutName } = data.limits;
  const circle = at(armature[Math.round(armature.length * 0.4)]!);
  const low = at(field[Math.round(field.length * 0.3)] ?? field[0]!);
  const margin = at(pullOut[Math.round(pullOut.length * 0.75)] ?? pullOut.at(-1)!);
  return (
    <>
      <Words
        x={circle.x}
        y={Math.max(plot.top + 14, circle.y + 18)}
        palette={palette}
        tone="madder"
        bold
        halo
        anchor="middle"
      >
        stator
      </Words>
      <Words x={Math.max(plot.left + 4, low.x - 8)} y={low.y} palette={palette} tone="madder" bold halo>
        {fieldBy}
      </Words>
      {pullOut.length > 0 && (
        <Words
          x={plot.right - 6}
          y={Math.max(plot.top + 30, margin.y)}
          palette={palette}
          tone="ochre"
          bold
          halo
          anchor="end"
        >
          {narrow ? 'pull-out' : pullOutName}
        </Words>
      )}
    </>
  );
}

function UsualLoad({ data, plot, palette }: Parts) {
  const y = plot.y(data.usualKw);
  return (
    <>
      <path d={`M${plot.left} ${y}H${plot.right}`} stroke={palette.ink2} strokeDasharray="4 3" />
      <Words x={plot.right - 6} y={y - 5} palette={palette} tone="ink2" anchor="end" halo>
        {data.usualName}
      </Words>
    </>
  );
}

function SideNames({ plot, palette }: Omit<Parts, 'data'>) {
  const nought = plot.x(0);
  return (
    <>
      <Words x={(plot.left + nought) / 2} y={plot.bottom + 38} palette={palette} tone="verdigris" bold anchor="middle">
        delivers kvar, leading
      </Words>
      <Words x={(nought + plot.right) / 2} y={plot.bottom + 38} palette={palette} tone="copper" bold anchor="middle">
        absorbs kvar
      </Words>
    </>
  );
}

/** Capability in the plane of active and reactive power, with the year's operating points as clouds. */
export function PqPlaneChart({ width, height, palette = pagePalette, ...data }: PqPlaneData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const ends = pqEnds(data);
  const parts = (plot: Plot): Parts => ({ data, plot, palette });
  return (
    <NumericPlane
      width={width}
      height={height}
      palette={palette}
      hatch={hatch}
      label={`Where ${data.motorName} runs over the year, and its limits, in active and reactive power`}
      x={{
        ends: ends.absorbed,
        ticks: ticksWithin(...ends.absorbed, narrow ? 4 : 6),
        tickWords: (value) => formatNumber(Math.abs(value)),
      }}
      y={{
        ends: ends.kw,
        ticks: ticksWithin(...ends.kw, narrow ? 4 : 5),
        name: 'Armature power, kW',
        tickWords: (value) => formatNumber(value),
      }}
      drawn={(plot) => (
        <>
          <Grounds {...parts(plot)} hatch={hatch} />
          <path d={`M${plot.x(0)} ${plot.top}V${plot.bottom}`} stroke={palette.ink} shapeRendering="crispEdges" />
          <UsualLoad {...parts(plot)} />
          {data.clouds.map((cloud) => (
            <Cloud key={cloud.shape} {...parts(plot)} cloud={cloud} />
          ))}
        </>
      )}
      words={(plot) => (
        <>
          <LimitNames {...parts(plot)} narrow={narrow} />
          <PointMark {...toPixels(plot)(data.nameplate)} shape="square" palette={palette} />
          {!narrow && (
            <Words
              x={toPixels(plot)(data.nameplate).x + 9}
              y={toPixels(plot)(data.nameplate).y + 4}
              palette={palette}
              bold
              halo
            >
              nameplate
            </Words>
          )}
          <CloudNames {...parts(plot)} />
          <SideNames plot={plot} palette={palette} />
        </>
      )}
    />
  );
}

/** Island: the chart in its frame. */
export function PqPlaneFigure({ finding, reading, fileName, ...data }: PqPlaneData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={pqPlaneTable(data)}
      heightOf={(w) => (w < narrowBelow ? Math.round(w * 0.95) : Math.round(Math.min(460, w * 0.89)))}
    >
      {(size) => <PqPlaneChart {...data} {...size} />}
    </ChartFigure>
  );
}
