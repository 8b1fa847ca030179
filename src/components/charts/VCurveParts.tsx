import { formatNumber, formatQuantity } from '../ui/format';
import type { Hatch } from './HatchDefs';
import { linePath, PointMark, Words, type MarkShape, type Plot } from './kit';
import type { Palette } from './palette';
import type { CurrentPoint, VCurveData } from './v-curve';

export interface VCurveParts {
  data: VCurveData;
  plot: Plot;
  palette: Palette;
  ends: { field: [number, number]; armature: [number, number] };
  narrow: boolean;
}

const toPixels = (plot: Plot) => (p: CurrentPoint) => ({ x: plot.x(p.fieldA), y: plot.y(p.armatureA) });

/** Ground beyond the three limits. */
export function VCurveGrounds({ data, plot, palette, ends, hatch }: VCurveParts & { hatch: Record<Hatch, string> }) {
  const { armatureA, fieldA, leastFieldA, pullOut } = data.limits;
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
      {leastFieldA !== undefined && (
        <rect
          x={plot.left}
          y={plot.top}
          width={Math.max(0, plot.x(leastFieldA) - plot.left)}
          height={plot.bottom - plot.top}
          fill={`url(#${hatch.limit})`}
        />
      )}
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

export function VCurveLines({ data, plot, palette }: VCurveParts) {
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

export function VCurveLimits({ data, plot, palette, ends }: VCurveParts) {
  const { armatureA, fieldA, leastFieldA } = data.limits;
  const y = plot.y(armatureA);
  const upright = [fieldA, leastFieldA].filter((at) => at !== undefined && at >= ends.field[0] && at <= ends.field[1]);
  return (
    <>
      {armatureA <= ends.armature[1] && (
        <path d={`M${plot.left} ${y}H${plot.right}`} stroke={palette.madder} strokeWidth={1.5} />
      )}
      {upright.map((at) => (
        <path key={at} d={`M${plot.x(at)} ${plot.top}V${plot.bottom}`} stroke={palette.madder} strokeWidth={1.5} />
      ))}
    </>
  );
}

interface Mark {
  x: number;
  y: number;
  shape: MarkShape;
  words: string;
  /** Words over the mark, where another stands close beside it. */
  above: boolean;
  anchor: 'middle' | 'end';
}

/** Ground that words cover, in pixels. */
interface Box {
  left: number;
  right: number;
  top: number;
  bottom: number;
}

const letterWidth = 6.6;
const overlaps = (a: Box, b: Box) => a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom;

/** Box of a line of words whose baseline begins, ends or is centred at a place. */
function wordsBox(words: string, x: number, y: number, anchor: 'start' | 'middle' | 'end'): Box {
  const width = words.length * letterWidth;
  const left = anchor === 'start' ? x : anchor === 'end' ? x - width : x - width / 2;
  return { left, right: left + width, top: y - 12, bottom: y + 4 };
}

/** The settings marked on the curves, with where their words go. */
function marksOf({ data, plot, narrow }: VCurveParts): Mark[] {
  const { today, plan, nameplate } = data;
  const at = toPixels(plot);
  const mark = (point: CurrentPoint, shape: MarkShape, words: string, above: boolean): Mark => {
    const { x, y } = at(point);
    return { x, y, shape, words, above, anchor: x > plot.right - 60 ? 'end' : 'middle' };
  };
  const amperes = ({ fieldA }: CurrentPoint) => formatQuantity(fieldA, 'A', { upTo: data.fieldDecimals ?? 1 });
  const near = today && plan && Math.abs(at(plan).x - at(today).x) < 104 && Math.abs(at(plan).y - at(today).y) < 30;
  return [
    ...(nameplate ? [mark(nameplate, 'square', narrow ? '' : 'nameplate', true)] : []),
    ...(today ? [mark(today, 'circle', `today ${amperes(today)}`, false)] : []),
    ...(plan ? [mark(plan, 'diamond', `${data.planName ?? 'plan'} ${amperes(plan)}`, Boolean(near))] : []),
  ];
}

const markPlace = ({ x, y, above, anchor }: Mark) => ({ x: anchor === 'end' ? x - 10 : x, y: above ? y - 12 : y + 20 });

/** Everything a mark covers: the point itself and its words. */
function markBoxes(mark: Mark): Box[] {
  const { x, y } = markPlace(mark);
  const point = { left: mark.x - 8, right: mark.x + 8, top: mark.y - 8, bottom: mark.y + 8 };
  return mark.words ? [point, wordsBox(mark.words, x, y, mark.anchor)] : [point];
}

/** Names of the loads at the foot of their curves, moved or left out where a mark's words stand. */
function LoadNames(parts: VCurveParts) {
  const { data, plot, palette, narrow } = parts;
  const taken = marksOf(parts).flatMap(markBoxes);
  const loads = narrow ? data.curves.filter((_, index) => index % 2 === 0) : data.curves;
  return loads.map((curve) => {
    const foot = data.unity[data.curves.indexOf(curve)];
    if (!foot) return null;
    const { x, y } = toPixels(plot)(foot);
    const words = `${formatNumber(curve.loadPercent)} %${curve === data.curves.at(-1) ? ' load' : ''}`;
    const places = [
      { x: x + 6, y: y - 5, anchor: 'start' as const },
      { x: x - 8, y: y - 5, anchor: 'end' as const },
      { x: x + 6, y: y + 14, anchor: 'start' as const },
    ];
    const place = places.find(({ x: left, y: base, anchor }) => {
      const box = wordsBox(words, left, base, anchor);
      return !taken.some((other) => overlaps(box, other));
    });
    if (!place) return null;
    taken.push(wordsBox(words, place.x, place.y, place.anchor));
    return (
      <Words
        key={curve.loadPercent}
        {...place}
        palette={palette}
        bold={curve.loadPercent === data.usualLoadPercent}
        halo
      >
        {words}
      </Words>
    );
  });
}

export function VCurveNames(parts: VCurveParts) {
  const { data, plot, palette, ends, narrow } = parts;
  const { armatureA, fieldA, fieldBy, leastFieldA, pullOut, pullOutName } = data.limits;
  const style = { upTo: data.fieldDecimals ?? 0 };
  const edge = pullOut?.[0];
  const low = plot.bottom - 24;
  return (
    <>
      <LoadNames {...parts} />
      <Words
        x={narrow ? plot.left + 8 : (plot.left + plot.right) / 2}
        y={plot.y(armatureA) - 5}
        palette={palette}
        tone="madder"
        bold
        anchor={narrow ? 'start' : 'middle'}
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
          {`${fieldBy ?? 'field'}, ${formatQuantity(fieldA, 'A', style)}`}
        </Words>
      )}
      {leastFieldA !== undefined && leastFieldA > ends.field[0] && (
        <Words x={plot.x(leastFieldA) - 6} y={plot.bottom - 30} palette={palette} tone="madder" bold upward halo>
          {`least, ${formatQuantity(leastFieldA, 'A', style)}`}
        </Words>
      )}
      {edge && (
        <Words x={plot.left + 8} y={plot.y(armatureA) + 20} palette={palette} tone="ochre" bold halo>
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

export function VCurveMarks(parts: VCurveParts) {
  return marksOf(parts).map((mark) => (
    <g key={mark.shape}>
      <PointMark x={mark.x} y={mark.y} shape={mark.shape} palette={parts.palette} />
      <Words {...markPlace(mark)} palette={parts.palette} bold halo anchor={mark.anchor}>
        {mark.words}
      </Words>
    </g>
  ));
}
