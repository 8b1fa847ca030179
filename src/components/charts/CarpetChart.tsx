import { ComposedChart, Scatter, XAxis, YAxis } from 'recharts';
import { formatDate, formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { carpetRuns, thresholdDecimals, type CarpetData, type CarpetMark, type CarpetRun } from './carpet';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { axisLook, narrowBelow, OnPlot, PlotFrame, Words, type ChartSize, type Plot } from './kit';
import { pagePalette, type Palette } from './palette';

/** One ink in seven steps: the lowest is the bare ground. */
const inkSteps = [0, 0.1, 0.24, 0.4, 0.56, 0.74, 0.94];

interface Parts {
  data: CarpetData;
  plot: Plot;
  palette: Palette;
}

/** All runs of one step as a single path: the picture has eight nodes, whatever the number of readings. */
function runsPath(runs: CarpetRun[], plot: Plot, dayCount: number, stepMinutes: number): string {
  const column = (plot.right - plot.left) / Math.max(1, dayCount);
  const interval = ((plot.bottom - plot.top) * stepMinutes) / 1440;
  return runs
    .map(({ day, from, length }) => {
      const x = plot.left + day * column;
      const y = Math.max(plot.top, plot.bottom - (from + length) * interval);
      const height = plot.bottom - from * interval - y;
      return `M${x.toFixed(2)} ${y.toFixed(2)}h${(column + 0.05).toFixed(2)}v${height.toFixed(2)}h${(-column - 0.05).toFixed(2)}z`;
    })
    .join('');
}

function Carpet({ data, plot, palette, hatchId }: Parts & { hatchId: string }) {
  const runs = carpetRuns(data.days);
  return [...runs].map(([step, found]) => {
    const d = runsPath(found, plot, data.days.length, data.stepMinutes);
    if (step === '-')
      return <path key={step} d={d} fill={`url(#${hatchId})`} stroke={palette.madder} strokeWidth={0.75} />;
    return <path key={step} d={d} fill={palette.ink} fillOpacity={inkSteps[Number(step)] ?? 1} />;
  });
}

/** Names of the months where they begin; fewer on a phone. */
function Months({ data, plot, palette }: Parts) {
  const column = (plot.right - plot.left) / Math.max(1, data.days.length);
  const firsts = data.days.map((day, index) => ({ index, date: day.date })).filter(({ date }) => date.endsWith('-01'));
  const every = Math.max(1, Math.ceil((firsts.length * 44) / (plot.right - plot.left)));
  return firsts.map(({ index, date }, order) => {
    const x = plot.left + index * column;
    const name = new Date(`${date}T00:00:00Z`).toLocaleString('en-US', { month: 'short', timeZone: 'UTC' });
    return (
      <g key={date}>
        <path d={`M${x} ${plot.bottom}v5`} stroke={palette.ink} shapeRendering="crispEdges" />
        {order % every === 0 && (
          <Words x={x + 4} y={plot.bottom + 16} palette={palette} tone="ink2">
            {date.includes('-01-01') && every === 1 ? `${name} ${date.slice(0, 4)}` : name}
          </Words>
        )}
      </g>
    );
  });
}

function Marks({ data, plot, palette, marks }: Parts & { marks: CarpetMark[] }) {
  const column = (plot.right - plot.left) / Math.max(1, data.days.length);
  const height = (plot.bottom - plot.top) / 1440;
  return marks.map((mark) => {
    const day = data.days.findIndex((entry) => entry.date === mark.date);
    if (day < 0) return null;
    const tone = mark.kind === 'missing' ? 'madder' : 'ochre';
    const x = plot.left + (day + 0.5) * column;
    const top = plot.bottom - mark.toMinute * height;
    return (
      <g key={mark.label}>
        <path d={`M${x} ${plot.top - 6}V${top}`} stroke={palette[tone]} strokeWidth={1.25} />
        <rect
          x={x - 3}
          y={top}
          width={6}
          height={Math.max(4, (mark.toMinute - mark.fromMinute) * height)}
          fill="none"
          stroke={palette[tone]}
          strokeWidth={1.5}
        />
        <Words x={x} y={plot.top - 9} palette={palette} tone={tone} bold anchor="middle">
          {mark.label}
        </Words>
      </g>
    );
  });
}

/** The steps named at the foot, with what is missing. */
function Key({ data, plot, palette, hatchId, narrow }: Parts & { hatchId: string; narrow: boolean }) {
  const y = plot.bottom + 36;
  const pitch = Math.min(96, (plot.right - plot.left - 60) / (narrow ? 4 : 8));
  const shown = narrow ? [1, 3, 5] : [1, 2, 3, 4, 5, 6];
  const decimals = thresholdDecimals(data.thresholds);
  const threshold = (index: number) => formatNumber(data.thresholds[index] ?? 0, { decimals });
  const box = { y: y - 9, width: 14, height: 10, stroke: palette.rule2, strokeWidth: 0.75 };
  return (
    <>
      <Words x={plot.left} y={y} palette={palette} tone="ink2">
        {narrow ? data.unit : `below ${threshold(0)}`}
      </Words>
      {shown.map((step, index) => {
        const x = plot.left + (narrow ? 30 : 84) + index * pitch;
        const last = index === shown.length - 1;
        return (
          <g key={step}>
            <rect x={x} {...box} fill={palette.ink} fillOpacity={inkSteps[step]} />
            <Words x={x + 19} y={y} palette={palette} tone="ink2">
              {`${threshold(step - 1)}${last && !narrow ? ` and above, ${data.unit}` : ''}`}
            </Words>
          </g>
        );
      })}
      <rect x={plot.right - 64} {...box} fill={`url(#${hatchId})`} stroke={palette.madder} />
      <Words x={plot.right} y={y} palette={palette} tone="ink2" anchor="end">
        missing
      </Words>
    </>
  );
}

const hourTicks = [0, 360, 720, 1080, 1440];
const hourName = (minute: number) => `${String(minute / 60).padStart(2, '0')}:00`;

/** A day a column, midnight at the foot, one ink in seven steps, what is missing hatched in madder. */
export function CarpetChart({ width, height, palette = pagePalette, ...data }: CarpetData & ChartSize) {
  const hatch = useHatch();
  const missingHatch = hatch.limit;
  const rows = [{ day: 0, minute: 0 }];
  const name = `Carpet picture of ${data.days.length} days: one column a day, ${data.unit}`;
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 24, right: 10, bottom: 26, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={name}
    >
      <XAxis
        dataKey="day"
        type="number"
        domain={[0, Math.max(1, data.days.length)]}
        height={20}
        {...axisLook(palette)}
        tick={false}
      />
      <YAxis
        dataKey="minute"
        type="number"
        domain={[0, 1440]}
        ticks={hourTicks}
        width={46}
        tickFormatter={hourName}
        {...axisLook(palette)}
      />
      <HatchDefs ids={hatch} palette={palette} />
      <Scatter dataKey="minute" fill="none" isAnimationActive={false} shape={() => <g />} />
      <OnPlot at="ground">
        {(plot) => <Carpet data={data} plot={plot} palette={palette} hatchId={missingHatch} />}
      </OnPlot>
      <PlotFrame palette={palette} xTicks={[]} yTicks={hourTicks} />
      <OnPlot at="words">
        {(plot) => (
          <>
            <Months data={data} plot={plot} palette={palette} />
            <Marks data={data} plot={plot} palette={palette} marks={data.marks ?? []} />
            <Key data={data} plot={plot} palette={palette} hatchId={missingHatch} narrow={width < narrowBelow} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: least, mean and greatest of every day, and what is missing. */
export function carpetTable(data: CarpetData): LedgerData {
  const figure = { kind: 'number', decimals: 1, unit: data.unit } as const;
  return {
    columns: [
      { key: 'date', head: 'Day' },
      { key: 'least', head: 'Least', ...figure },
      { key: 'mean', head: 'Mean', ...figure },
      { key: 'greatest', head: 'Greatest', ...figure },
      { key: 'missing', head: 'Missing', unit: 'readings', kind: 'number' },
    ],
    rows: data.days.map(({ date, least, mean, greatest, missing }) => ({
      id: date,
      cells: { date: formatDate(date), least, mean, greatest, missing },
    })),
  };
}

/** Island: the picture in its frame. */
export function CarpetFigure({ finding, reading, fileName, ...data }: CarpetData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={carpetTable(data)}
      heightOf={(w) => (w < narrowBelow ? 220 : 240)}
    >
      {(size) => <CarpetChart {...data} {...size} />}
    </ChartFigure>
  );
}
