import { formatMajor, formatNumber } from '../ui/format';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { narrowBelow, Words, type ChartSize } from './kit';
import { pagePalette, type Palette } from './palette';
import {
  paybackRangeWords,
  rangeWords,
  rankingFinding,
  rankingTable,
  type RankingData,
  type RankingRow,
} from './ranking';
import { moneyScale, niceTicks } from './scale';

/** Where things stand, from the width there is. */
function layoutOf(width: number) {
  const narrow = width < narrowBelow;
  return narrow
    ? { narrow, left: 20, right: width - 20, top: 30, rowHeight: 68, barTop: 38, barHeight: 16 }
    : { narrow, left: 236, right: width - 128, top: 36, rowHeight: 42, barTop: 8, barHeight: 18 };
}
type Layout = ReturnType<typeof layoutOf>;

const axisHeight = 44;

/** Height of the picture for its rows. */
export function rankingHeight(width: number, rows: number): number {
  const { top, rowHeight } = layoutOf(width);
  return top + rows * rowHeight + axisHeight;
}

interface RowProps {
  row: RankingRow;
  y: number;
  layout: Layout;
  width: number;
  x: (npv: number) => number;
  npv: number;
  palette: Palette;
  hatchId: string;
}

function Row({ row, y, layout, width, x, npv, palette, hatchId }: RowProps) {
  const { narrow, barTop, barHeight } = layout;
  const [worst, best] = [row.low.npv, row.high.npv].sort((a, b) => a - b) as [number, number];
  const split = Math.min(Math.max(npv, worst), best);
  const box = (from: number, to: number) => ({
    x: x(from),
    width: Math.max(0, x(to) - x(from)),
    y: y + barTop,
    height: barHeight,
  });
  return (
    <g>
      <Words x={0} y={y + 16} palette={palette} bold halo>
        {row.name}
      </Words>
      <Words x={0} y={y + 31} palette={palette} tone="ink2" halo>
        {rangeWords(row)}
      </Words>
      <rect {...box(worst, split)} fill={palette.ink2} stroke={palette.ink2} />
      <rect {...box(split, best)} fill={`url(#${hatchId})`} stroke={palette.verdigris} />
      <Words x={width} y={narrow ? y + 31 : y + 22} palette={palette} anchor="end" halo>
        {paybackRangeWords(row)}
      </Words>
    </g>
  );
}

/** What moves the present value, the widest first: solid below the figure as reckoned, hatched above it; paybacks beside. */
export function RankingChart({ width, height, palette = pagePalette, ...data }: RankingData & ChartSize) {
  const hatch = useHatch();
  const layout = layoutOf(width);
  const { left, right, top, rowHeight, narrow } = layout;
  const values = [data.npv, ...data.rows.flatMap(({ low, high }) => [low.npv, high.npv])];
  const scale = moneyScale(Math.max(1, ...values.map(Math.abs)));
  const ticks = niceTicks(Math.min(...values) / scale.divisor, Math.max(...values) / scale.divisor, narrow ? 4 : 6);
  const [first = 0, last = 1] = [ticks[0], ticks.at(-1)];
  const x = (npv: number) => left + ((right - left) * (npv / scale.divisor - first)) / (last - first);
  const bottom = top + data.rows.length * rowHeight;
  const at = (tick: number) => x(tick * scale.divisor);
  return (
    <svg width={width} height={height} role="img" aria-label={rankingFinding(data)}>
      <HatchDefs ids={hatch} palette={palette} />
      <path
        d={ticks.map((tick) => `M${at(tick)} ${top}V${bottom}`).join('')}
        stroke={palette.grid}
        shapeRendering="crispEdges"
      />
      <path d={`M${left} ${bottom}H${right}`} stroke={palette.ink} shapeRendering="crispEdges" />
      {first < 0 && last > 0 && (
        <path d={`M${x(0)} ${top}V${bottom}`} stroke={palette.ink} shapeRendering="crispEdges" />
      )}
      <path d={`M${x(data.npv)} ${top - 8}V${bottom}`} stroke={palette.ink} strokeWidth={2} />
      {data.rows.map((row, index) => (
        <Row
          key={row.name}
          {...{ row, layout, width, x, palette }}
          y={top + index * rowHeight}
          npv={data.npv}
          hatchId={hatch.saving}
        />
      ))}
      <Words
        x={x(data.npv)}
        y={top - 14}
        palette={palette}
        bold
        anchor={x(data.npv) > (left + right) / 2 ? 'end' : 'start'}
      >
        {`as reckoned ${formatMajor(data.npv, data.currency, { whole: true })}`}
      </Words>
      {!narrow && (
        <Words x={width} y={top - 14} palette={palette} tone="ink2" anchor="end">
          paid back in
        </Words>
      )}
      {ticks.map((tick) => (
        <Words key={tick} x={at(tick)} y={bottom + 16} palette={palette} tone="ink2" anchor="middle">
          {formatNumber(tick, { upTo: 2 })}
        </Words>
      ))}
      <Words x={right} y={bottom + 36} palette={palette} anchor="end">
        {`${scale.word}${data.currency}, present value`}
      </Words>
    </svg>
  );
}

/** Island: the chart in its frame, with table twin and exports. */
export function RankingFigure({ fileName, ...data }: RankingData & Pick<FigureText, 'fileName'>) {
  return (
    <ChartFigure
      finding={rankingFinding(data)}
      reading="Each bar moves one figure between the values it lies between eight of ten times, all others as reckoned."
      fileName={fileName}
      table={rankingTable(data)}
      heightOf={(width) => rankingHeight(width, data.rows.length)}
    >
      {(size) => <RankingChart {...data} {...size} />}
    </ChartFigure>
  );
}
