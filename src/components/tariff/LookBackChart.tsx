import { Bar, ComposedChart, XAxis, YAxis } from 'recharts';
import type { LookBackBar, LookBackPicture } from '../../schemas/tariff-why';
import { barBox, BarNames, barWidth } from '../charts/bars';
import { ChartFigure } from '../charts/ChartFigure';
import { HatchDefs, useHatch } from '../charts/HatchDefs';
import { axisLook, OnPlot, PlotFrame, Words, type ChartSize, type Plot } from '../charts/kit';
import { pagePalette, type Palette } from '../charts/palette';
import { domainOf, niceTicks } from '../charts/scale';
import { formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

function stateOf(bar: LookBackBar): string {
  if (bar.used) return 'counted, sets the value';
  if (bar.current) return bar.counted ? 'this bill, counted' : 'this bill';
  return bar.counted ? 'counted' : 'no longer counted';
}

interface DrawnBars {
  picture: LookBackPicture;
  plot: Plot;
  palette: Palette;
  hatch: string;
}

function Bars({ picture, plot, palette, hatch }: DrawnBars) {
  const width = barWidth(plot, picture.bars.length);
  return picture.bars.map((bar, index) => {
    const x = plot.x(index);
    const fill = bar.used ? palette.ink : bar.current ? palette.ground : bar.counted ? palette.rule2 : `url(#${hatch})`;
    const labelled = bar.used || bar.current;
    return (
      <g key={bar.name}>
        <rect {...barBox(plot, x, width, 0, bar.value)} fill={fill} stroke={bar.used ? palette.ink : palette.rule2} />
        {labelled && (
          <Words x={x} y={plot.y(bar.value) - 6} palette={palette} bold anchor={index > 1 ? 'end' : 'start'} halo>
            {formatNumber(bar.value)}
          </Words>
        )}
      </g>
    );
  });
}

/** Bracket over the periods the look-back reaches. */
function Reach({ picture, plot, palette }: Omit<DrawnBars, 'hatch'>) {
  const counted = picture.bars.flatMap((bar, index) => (bar.counted ? [index] : []));
  const [first] = counted;
  const last = counted.at(-1);
  if (first === undefined || last === undefined) return null;
  const half = barWidth(plot, picture.bars.length) / 2;
  const from = plot.x(first) - half;
  const to = plot.x(last) + half;
  return (
    <>
      <path d={`M${from} ${plot.top - 2}v-6H${to}v6`} fill="none" stroke={palette.ink} />
      <Words x={(from + to) / 2} y={plot.top - 14} palette={palette} bold anchor="middle">
        {`${counted.length} counted`}
      </Words>
    </>
  );
}

/** Earlier values a ratchet looks back at: which count, which sets the value, and this bill's own. */
export function LookBackChart({
  width,
  height,
  palette = pagePalette,
  picture,
}: { picture: LookBackPicture } & ChartSize) {
  const hatches = useHatch();
  const yTicks = niceTicks(0, Math.max(1, ...picture.bars.map((bar) => bar.value)) * 1.12, 3);
  const rows = picture.bars.map((bar, index) => ({ index, value: bar.value }));
  const names = picture.bars.map(({ name }, index) => {
    const [month = '', year] = name.split(' ');
    return { label: month, year: index === 0 || month === 'Jan' ? year : undefined };
  });
  return (
    <ComposedChart
      width={width}
      height={height}
      data={rows}
      margin={{ top: 34, right: 4, bottom: 18, left: 0 }}
      role="img"
      accessibilityLayer={false}
      aria-label={picture.title}
    >
      <HatchDefs ids={hatches} palette={palette} />
      <XAxis dataKey="index" height={20} {...axisLook(palette)} tick={false} />
      <YAxis
        domain={domainOf(yTicks)}
        ticks={yTicks}
        width={46}
        tickFormatter={(v: number) => formatNumber(v)}
        {...axisLook(palette)}
      />
      <PlotFrame bars palette={palette} xTicks={[]} yTicks={yTicks} />
      <Bar dataKey="value" fill="none" isAnimationActive={false} />
      <OnPlot at="over">
        {(plot) => (
          <>
            <Bars picture={picture} plot={plot} palette={palette} hatch={hatches.neutral} />
            <Reach picture={picture} plot={plot} palette={palette} />
            <BarNames plot={plot} bills={names} palette={palette} />
          </>
        )}
      </OnPlot>
    </ComposedChart>
  );
}

export function lookBackTable({ bars, unit }: LookBackPicture): LedgerData {
  return {
    columns: [
      { key: 'name', head: 'Bill of' },
      { key: 'value', head: 'Value', unit, kind: 'number', decimals: 1 },
      { key: 'state', head: 'In the look-back' },
    ],
    rows: bars.map((bar) => ({
      id: bar.name,
      kind: bar.used ? ('chosen' as const) : ('plain' as const),
      cells: { name: bar.name, value: bar.value, state: stateOf(bar) },
    })),
  };
}

/** The look-back in its frame. */
export function LookBackFigure({ picture, fileName }: { picture: LookBackPicture; fileName: string }) {
  const used = picture.bars.find((bar) => bar.used);
  const value = formatQuantity(picture.usedValue, picture.unit);
  return (
    <ChartFigure
      finding={used ? `${used.name} sets ${value}.` : `No bill that counts sets ${value}.`}
      reading={`${picture.title}. Ink: sets the value. Solid: counted. Hatched: no longer counted. Outlined: this bill.`}
      fileName={fileName}
      table={lookBackTable(picture)}
      heightOf={() => 176}
    >
      {(size) => <LookBackChart picture={picture} {...size} />}
    </ChartFigure>
  );
}
