import { ComposedChart, Scatter, XAxis, YAxis } from 'recharts';
import { formatDate, formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { carpetRuns, thresholdDecimals, type CarpetData, type CarpetMark, type CarpetRun } from './carpet';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch, type Hatch } from './HatchDefs';
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
    return <path key={step} d={d} {...inkOf(step, data.channel, palette)} />;
  });
}

/** Colour and strength of a step. */
function inkOf(step: string, channel: CarpetData['channel'], palette: Palette) {
  const lead = 'abcdefg'.indexOf(step);
  if (lead >= 0) return { fill: palette.verdigris, fillOpacity: inkSteps[lead] };
  return { fill: channel === 'kw' ? palette.ink : palette.copper, fillOpacity: inkSteps[Number(step)] ?? 1 };
}

/** Hatching over what is not plain: the leading intervals in verdigris, so that colour is not their only sign, and the estimated in ochre. */
function Hatchings({ data, plot, palette, hatch }: Parts & { hatch: Record<Hatch, string> }) {
  const leading: CarpetRun[] = [];
  for (const [step, runs] of carpetRuns(data.days)) if ('bcdefg'.includes(step)) leading.push(...runs);
  const estimated = data.days.flatMap((one, day) =>
    (one.estimated ?? []).map(([from, length]): CarpetRun => ({ day, from, length })),
  );
  const pathOf = (runs: CarpetRun[]) => runsPath(runs, plot, data.days.length, data.stepMinutes);
  return (
    <>
      {leading.length > 0 && <path d={pathOf(leading)} fill={`url(#${hatch.saving})`} />}
      {estimated.length > 0 && (
        <path d={pathOf(estimated)} fill={`url(#${hatch.pullOut})`} stroke={palette.ochre} strokeWidth={0.75} />
      )}
    </>
  );
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

/** The steps named at the foot, with the senses, what is estimated and what is missing. */
function Key({ data, plot, palette, hatch, narrow }: Parts & { hatch: Record<Hatch, string>; narrow: boolean }) {
  const { channel = 'kw' } = data;
  const y = plot.bottom + 36;
  const senses = keySigns(data, palette, hatch);
  const reserved = 12 + senses.reduce((sum, { word }) => sum + signWidth(word), 0);
  const shown = narrow ? [1, 3, 5] : [1, 2, 3, 4, 5, 6];
  const pitch = Math.min(96, (plot.right - plot.left - 84 - (narrow ? 0 : reserved)) / shown.length);
  const decimals = channel === 'pf' ? 2 : thresholdDecimals(data.thresholds);
  const threshold = (index: number) => formatNumber(data.thresholds[index] ?? 0, { decimals });
  const [under, beyond] = channel === 'pf' ? ['above', 'and below'] : ['below', 'and above'];
  const box = { y: y - 9, width: 14, height: 10, stroke: palette.rule2, strokeWidth: 0.75 };
  let right = plot.right;
  return (
    <>
      <Words x={plot.left} y={y} palette={palette} tone="ink2">
        {narrow ? data.unit : `${under} ${threshold(0)}`}
      </Words>
      {shown.map((step, index) => {
        const x = plot.left + (narrow ? 34 : 84) + index * (narrow ? 56 : pitch);
        const last = index === shown.length - 1;
        return (
          <g key={step}>
            <rect x={x} {...box} {...inkOf(String(step), channel, palette)} />
            <Words x={x + 19} y={y} palette={palette} tone="ink2">
              {`${threshold(step - 1)}${last && !narrow && pitch > 90 ? ` ${beyond}, ${data.unit}` : ''}`}
            </Words>
          </g>
        );
      })}
      {senses.map(({ word, ...sign }) => {
        const at = narrow ? y + 18 : y;
        const end = right;
        right -= signWidth(word);
        return (
          <g key={word}>
            <rect x={end - signWidth(word) + 14} {...box} y={at - 9} {...sign.ground} />
            {sign.over && <rect x={end - signWidth(word) + 14} {...box} y={at - 9} fill={sign.over} />}
            <Words x={end} y={at} palette={palette} tone="ink2" anchor="end">
              {word}
            </Words>
          </g>
        );
      })}
    </>
  );
}

const signWidth = (word: string) => 34 + word.length * 6.2;

/** What the key names besides the steps, from the right. */
function keySigns({ channel = 'kw', days }: CarpetData, palette: Palette, hatch: Record<Hatch, string>) {
  const signs: { word: string; ground: { fill: string; fillOpacity?: number; stroke?: string }; over?: string }[] = [
    { word: 'missing', ground: { fill: `url(#${hatch.limit})`, stroke: palette.madder } },
  ];
  if (days.some(({ estimated }) => estimated)) {
    signs.push({ word: 'estimated', ground: { fill: `url(#${hatch.pullOut})`, stroke: palette.ochre } });
  }
  if (channel !== 'kw') {
    const verdigris = { fill: palette.verdigris, fillOpacity: inkSteps[4] };
    signs.push({ word: 'leading', ground: verdigris, over: `url(#${hatch.saving})` });
    signs.push({ word: 'lagging', ground: { fill: palette.copper, fillOpacity: inkSteps[4] } });
  }
  return signs;
}

const hourTicks = [0, 360, 720, 1080, 1440];
const hourName = (minute: number) => `${String(minute / 60).padStart(2, '0')}:00`;

/** A day a column, midnight at the foot, one ink in seven steps, what is missing hatched in madder. */
export function CarpetChart({ width, height, palette = pagePalette, ...data }: CarpetData & ChartSize) {
  const hatch = useHatch();
  const rows = [{ day: 0, minute: 0 }];
  const name = `Carpet picture of ${data.days.length} days: one column a day, ${data.unit}`;
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 24, right: 10, bottom: width < narrowBelow ? 44 : 26, left: 0 }}
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
        {(plot) => (
          <>
            <Carpet data={data} plot={plot} palette={palette} hatchId={hatch.limit} />
            <Hatchings data={data} plot={plot} palette={palette} hatch={hatch} />
          </>
        )}
      </OnPlot>
      <PlotFrame palette={palette} xTicks={[]} yTicks={hourTicks} />
      <OnPlot at="words">
        {(plot) => (
          <>
            <Months data={data} plot={plot} palette={palette} />
            <Marks data={data} plot={plot} palette={palette} marks={data.marks ?? []} />
            <Key data={data} plot={plot} palette={palette} hatch={hatch} narrow={width < narrowBelow} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

/** The same as a table: least, mean and greatest of every day, and what is missing or estimated. */
export function carpetTable(data: CarpetData): LedgerData {
  const isFactor = data.channel === 'pf';
  const figure = { kind: 'number', decimals: isFactor ? 3 : 1, unit: isFactor ? undefined : data.unit } as const;
  const sense = (value: number | null) =>
    value === null || data.channel === 'kw' ? value : ({ value, tone: value < 0 ? 'leading' : 'lagging' } as const);
  const count = (key: string, head: string) => ({ key, head, unit: 'readings', kind: 'number' as const });
  const anyEstimated = data.days.some(({ estimated }) => estimated);
  return {
    columns: [
      { key: 'date', head: 'Day' },
      { key: 'least', head: 'Least', ...figure },
      { key: 'mean', head: 'Mean', ...figure },
      { key: 'greatest', head: 'Greatest', ...figure },
      count('missing', 'Missing'),
      ...(anyEstimated ? [count('estimated', 'Estimated')] : []),
    ],
    rows: data.days.map(({ date, least, mean, greatest, missing, estimated = [] }) => ({
      id: date,
      cells: {
        date: formatDate(date),
        least: sense(least),
        mean: sense(mean),
        greatest: sense(greatest),
        missing,
        estimated: estimated.reduce((sum, [, length]) => sum + length, 0),
      },
    })),
  };
}

/** Island: the picture in its frame. */
export function CarpetFigure({ finding, reading, fileName, ...data }: CarpetData & FigureText) {
  return (
    <ChartFigure finding={finding} reading={reading} fileName={fileName} table={carpetTable(data)} heightOf={() => 240}>
      {(size) => <CarpetChart {...data} {...size} />}
    </ChartFigure>
  );
}
