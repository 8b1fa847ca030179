import { formatNumber, formatQuantity } from '../ui/format';
import { ChartFigure, type FigureText } from './ChartFigure';
import {
  fieldControlTable,
  kvarAt,
  limitNames,
  stretches,
  type ControlLine,
  type FieldControlData,
  type KvarPoint,
} from './field-control';
import { useHatch } from './HatchDefs';
import { linePath, narrowBelow, PointMark, Words, type ChartSize, type Plot } from './kit';
import { NumericPlane } from './NumericPlane';
import { pagePalette, type Palette } from './palette';
import { spreadLabels, ticksWithin } from './scale';

interface Parts {
  data: FieldControlData;
  plot: Plot;
  palette: Palette;
}

const toPixels = (plot: Plot) => (p: KvarPoint) => ({ x: plot.x(p.loadPercent), y: plot.y(p.kvarDelivered) });

/** Ground above the most and below the least that may be delivered. */
function Grounds({ data, plot, palette, hatch }: Parts & { hatch: { limit: string; pullOut: string } }) {
  const at = toPixels(plot);
  const edges = [
    { points: data.most, end: plot.top, fill: hatch.limit },
    { points: data.least, end: plot.bottom, fill: hatch.pullOut },
  ];
  return edges.map(({ points, end, fill }) => {
    const first = points[0];
    const last = points.at(-1);
    if (!first || !last) return null;
    return (
      <g key={end}>
        <path d={`${linePath(points.map(at))}V${end}H${at(first).x}Z`} fill={`url(#${fill})`} />
        <rect
          x={at(last).x}
          y={plot.top}
          width={Math.max(0, plot.right - at(last).x)}
          height={plot.bottom - plot.top}
          fill={`url(#${fill})`}
        />
        {stretches(points).map((part, index) => {
          const colour = part.binding === 'pull-out' ? palette.ochre : palette.madder;
          return <path key={index} d={linePath(part.points.map(at))} fill="none" stroke={colour} strokeWidth={1.5} />;
        })}
      </g>
    );
  });
}

function LimitNames({ data, plot, palette }: Parts) {
  const at = toPixels(plot);
  const names = limitNames(data.fieldBy);
  const parts = [
    ...stretches(data.most).map((part) => ({ ...part, lift: -8 })),
    ...stretches(data.least).map((part) => ({ ...part, lift: 16 })),
  ];
  return parts.map(({ binding, points, lift }, index) => {
    if (points.length < 4) return null;
    const { x, y } = at(points[Math.floor(points.length / (lift < 0 ? 2 : 3))]!);
    const tone = binding === 'pull-out' ? 'ochre' : 'madder';
    const inside = Math.min(plot.bottom - 6, Math.max(plot.top + 14, y + lift));
    return (
      <Words key={index} x={x} y={inside} palette={palette} tone={tone} bold anchor="middle" halo>
        {names[binding]}
      </Words>
    );
  });
}

/** What is held is no sense of kvar: lines in ink, told apart by their dashes and names. */
function Lines({ data, plot, palette }: Parts) {
  const at = toPixels(plot);
  return data.lines.map((line) => (
    <path
      key={line.name}
      d={linePath(line.points.map(at))}
      fill="none"
      stroke={palette.ink}
      strokeWidth={line.strong ? 2.2 : 1.4}
      strokeDasharray={line.dash}
    />
  ));
}

/** Names of the lines at the load where they stand farthest apart, beside each other's heights. */
function LineNames({ data, plot, palette, narrow }: Parts & { narrow: boolean }) {
  const loads = data.loadPercents;
  const at = loads[Math.round(loads.length * 0.04)] ?? 0;
  const found = data.lines.flatMap((line): { line: ControlLine; y: number }[] => {
    const kvar = kvarAt(line.points, at) ?? line.points[0]?.kvarDelivered;
    return kvar === undefined ? [] : [{ line, y: plot.y(kvar) }];
  });
  const gap = narrow ? 14 : 15;
  const placed = spreadLabels(
    found.map(({ y }) => y - 4),
    gap,
    plot.top + 16,
    plot.bottom - 8,
  );
  return found.map(({ line }, index) => (
    <Words key={line.name} x={plot.left + 8} y={placed[index]!} palette={palette} bold={line.strong} halo>
      {line.name}
    </Words>
  ));
}

function UsualLoad({ data, plot, palette }: Parts) {
  const x = plot.x(data.usualLoadPercent);
  const right = x > plot.right - 150;
  return (
    <>
      <path d={`M${x} ${plot.top}V${plot.bottom}`} stroke={palette.ink2} strokeDasharray="4 3" />
      <Words
        x={right ? x - 5 : x + 5}
        y={plot.bottom - 8}
        palette={palette}
        tone="ink2"
        anchor={right ? 'end' : 'start'}
        halo
      >
        {`usual load, ${formatQuantity(data.usualLoadPercent, '%')}`}
      </Words>
      {data.marks.map(({ name, shape, kvarDelivered }) => (
        <g key={shape}>
          <PointMark x={x} y={plot.y(kvarDelivered)} shape={shape} palette={palette} />
          <Words
            x={x + (right ? -12 : 12)}
            y={plot.y(kvarDelivered) - 8}
            palette={palette}
            bold
            halo
            anchor={right ? 'end' : 'start'}
          >
            {`${name} ${kvarDelivered < 0 ? 'absorbs' : 'delivers'} ${formatNumber(Math.abs(kvarDelivered))}`}
          </Words>
        </g>
      ))}
    </>
  );
}

function kvarEnds(data: FieldControlData): [number, number] {
  const drawn = [...data.most, ...data.lines.flatMap((line) => line.points)].map((p) => p.kvarDelivered);
  const most = Math.max(1, ...drawn);
  const low = Math.min(0, ...data.lines.flatMap((line) => line.points.map((p) => p.kvarDelivered)));
  return [Math.min(1.15 * low, -0.12 * most), 1.14 * most];
}

/** Reactive power over the shaft load, for each thing a regulator may hold, within the limits. */
export function FieldControlChart({ width, height, palette = pagePalette, ...data }: FieldControlData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const yEnds = kvarEnds(data);
  const loads: [number, number] = [data.loadPercents[0] ?? 0, data.loadPercents.at(-1) ?? 100];
  const parts = (plot: Plot): Parts => ({ data, plot, palette });
  return (
    <NumericPlane
      width={width}
      height={height}
      palette={palette}
      hatch={hatch}
      label={`Reactive power of ${data.motorName} over its shaft load, by what is held`}
      x={{ ends: loads, ticks: ticksWithin(...loads, narrow ? 4 : 6), name: 'Shaft load, % of rated' }}
      y={{
        ends: yEnds,
        ticks: ticksWithin(...yEnds, narrow ? 5 : 7),
        name: 'Delivers, kvar; absorbs below nought',
        tickWords: (value) => formatNumber(Math.abs(value)),
      }}
      drawn={(plot) => (
        <>
          <Grounds {...parts(plot)} hatch={hatch} />
          <path d={`M${plot.left} ${plot.y(0)}H${plot.right}`} stroke={palette.ink} shapeRendering="crispEdges" />
          <Lines {...parts(plot)} />
        </>
      )}
      words={(plot) => (
        <>
          <LimitNames {...parts(plot)} />
          <LineNames {...parts(plot)} narrow={narrow} />
          <UsualLoad {...parts(plot)} />
        </>
      )}
    />
  );
}

/** Island: the chart in its frame. */
export function FieldControlFigure({ finding, reading, fileName, ...data }: FieldControlData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={fieldControlTable(data)}
      heightOf={(w) => (w < narrowBelow ? Math.round(w * 0.95) : Math.round(Math.min(460, w * 0.89)))}
    >
      {(size) => <FieldControlChart {...data} {...size} />}
    </ChartFigure>
  );
}
