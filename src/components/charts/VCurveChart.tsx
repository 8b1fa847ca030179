import { ChartFigure, type FigureText } from './ChartFigure';
import { DragAlong, type Drag } from './DragAlong';
import { useHatch } from './HatchDefs';
import { narrowBelow, type ChartSize } from './kit';
import { NumericPlane } from './NumericPlane';
import { pagePalette } from './palette';
import { tickDecimals, ticksWithin } from './scale';
import { vCurveEnds, vCurveTable, type VCurveData } from './v-curve';
import { VCurveGrounds, VCurveLimits, VCurveLines, VCurveMarks, VCurveNames } from './VCurveParts';

/** Family of V-curves: armature over field current at several loads, with the limits of stator, field and pull-out. */
export function VCurveChart({ width, height, palette = pagePalette, ...data }: VCurveData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const ends = vCurveEnds(data);
  const xTicks = ticksWithin(...ends.field, narrow ? 5 : 9);
  return (
    <NumericPlane
      width={width}
      height={height}
      palette={palette}
      hatch={hatch}
      label={`V-curves of ${data.motorName} with stator, field and pull-out limits`}
      x={{
        ends: ends.field,
        ticks: xTicks,
        name: `${data.fieldName ?? 'Field current'}, A`,
        tickWords: (value) => value.toFixed(tickDecimals(xTicks)),
      }}
      y={{ ends: ends.armature, ticks: ticksWithin(...ends.armature, narrow ? 4 : 6), name: 'Armature current, A' }}
      drawn={(plot) => {
        const parts = { data, plot, palette, ends, narrow };
        return (
          <>
            <VCurveGrounds {...parts} hatch={hatch} />
            <VCurveLines {...parts} />
            <VCurveLimits {...parts} />
          </>
        );
      }}
      words={(plot) => {
        const parts = { data, plot, palette, ends, narrow };
        return (
          <>
            <VCurveNames {...parts} />
            <VCurveMarks {...parts} />
          </>
        );
      }}
    />
  );
}

/** Where the setting's mark stands, as a share of the plot from its top. */
function markShare({ plan, today, ...data }: VCurveData): number {
  const { armature } = vCurveEnds({ ...data });
  const amperes = (plan ?? today)?.armatureA ?? armature[1] / 2;
  return 1 - amperes / armature[1];
}

/** Island: the chart in its frame. With `drag` the field current is set on the curves themselves. */
export function VCurveFigure({ finding, reading, fileName, drag, ...data }: VCurveData & FigureText & { drag?: Drag }) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={vCurveTable(data)}
      heightOf={(w) => (w < narrowBelow ? Math.round(w * 0.95) : Math.round(Math.min(460, w * 0.89)))}
    >
      {(size) => (
        <>
          <VCurveChart {...data} {...size} />
          {drag && <DragAlong drag={drag} size={size} ends={vCurveEnds(data).field} share={markShare(data)} />}
        </>
      )}
    </ChartFigure>
  );
}
