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

export function VCurveNames({ data, plot, palette, ends, narrow }: VCurveParts) {
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
          {`field, ${formatQuantity(fieldA, 'A')}`}
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

export function VCurveMarks({ data, plot, palette, narrow }: VCurveParts) {
  const { today, plan, nameplate } = data;
  const at = toPixels(plot);
  const marks: { at: CurrentPoint; shape: MarkShape; words: string; above?: boolean }[] = [];
  if (nameplate) marks.push({ at: nameplate, shape: 'square', words: narrow ? '' : 'nameplate', above: true });
  if (today)
    marks.push({ at: today, shape: 'circle', words: `today ${formatQuantity(today.fieldA, 'A', { upTo: 1 })}` });
  if (plan) {
    const near = today && Math.abs(at(plan).x - at(today).x) < 104 && Math.abs(at(plan).y - at(today).y) < 30;
    const words = `${data.planName ?? 'plan'} ${formatQuantity(plan.fieldA, 'A', { upTo: 1 })}`;
    marks.push({ at: plan, shape: 'diamond', words, above: Boolean(near) });
  }
  return marks.map((mark) => {
    const { x, y } = at(mark.at);
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
