import { ComposedChart, Scatter, XAxis, YAxis } from 'recharts';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, type ChartSize } from './kit';
import { pagePalette } from './palette';
import { ticksWithin } from './scale';
import { vCurveTable, type VCurveData } from './v-curve';
import { VCurveGrounds, VCurveLimits, VCurveLines, VCurveMarks, VCurveNames, type VCurveParts } from './VCurveParts';

/** Family of V-curves: armature over field current at several loads, with the limits of stator, field and pull-out. */
export function VCurveChart({ width, height, palette = pagePalette, ...data }: VCurveData & ChartSize) {
  const hatch = useHatch();
  const narrow = width < 380;
  const all = data.curves.flatMap((curve) => curve.points);
  const fields = all.map((p) => p.fieldA);
  const ends: VCurveParts['ends'] = {
    field: [Math.floor(Math.min(...fields)), Math.ceil(Math.max(...fields, data.limits.fieldA * 1.1))],
    armature: [0, Math.ceil(data.limits.armatureA * 1.2)],
  };
  const xTicks = ticksWithin(...ends.field, narrow ? 5 : 9);
  const yTicks = ticksWithin(...ends.armature, narrow ? 4 : 6);
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
                <VCurveGrounds {...parts} hatch={hatch} />
                <VCurveLines {...parts} />
                <VCurveLimits {...parts} />
              </g>
            </>
          );
        }}
      </OnPlot>
      <OnPlot at="words">
        {(plot) => (
          <>
            <VCurveNames data={data} plot={plot} palette={palette} ends={ends} narrow={narrow} />
            <VCurveMarks data={data} plot={plot} palette={palette} ends={ends} narrow={narrow} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
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
