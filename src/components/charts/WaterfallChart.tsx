import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { ChartFigure, type FigureText } from './ChartFigure';
import { HatchDefs, useHatch } from './HatchDefs';
import { narrowBelow, Words, type ChartSize } from './kit';
import { pagePalette, type Palette } from './palette';
import { moneyScale, ticksWithin } from './scale';

/** One step of the way from a total to another. Major units. */
export interface WaterfallStep {
  label: string;
  change: number;
}

export interface WaterfallData {
  currency: string;
  from: { label: string; total: number };
  steps: WaterfallStep[];
  to: { label: string; total: number };
}

const rowHeight = 32;
const top = 8;
const axisHeight = 40;

/** Height that all rows need. */
export const waterfallHeight = ({ steps }: WaterfallData) => top + (steps.length + 2) * rowHeight + axisHeight;

interface Row {
  label: string;
  /** Ends of the bar; a total begins at the cut axis. */
  from: number | null;
  to: number;
  figure: string;
  tone: 'ink' | 'verdigris';
}

function rowsOf({ from, steps, to }: WaterfallData): Row[] {
  let at = from.total;
  const moves = steps.map(({ label, change }): Row => {
    const begin = at;
    at += change;
    const figure = formatNumber(change, { signed: true });
    return { label, from: begin, to: at, figure, tone: change < 0 ? 'verdigris' : 'ink' };
  });
  const total = (end: { label: string; total: number }): Row => ({
    label: end.label,
    from: null,
    to: end.total,
    figure: formatNumber(end.total),
    tone: 'ink',
  });
  return [total(from), ...moves, total(to)];
}

/** The zigzag that says the bar does not begin at nought. */
function Cut({ x, y, palette }: { x: number; y: number; palette: Palette }) {
  return (
    <path
      d={`M${x + 8} ${y - 2}l-5 ${rowHeight - 10}M${x + 13} ${y - 2}l-5 ${rowHeight - 10}`}
      stroke={palette.ground}
      strokeWidth={2}
    />
  );
}

/** From one total to another, line by line: what falls hatched, what rises solid. The axis of money is cut and says so. */
export function WaterfallChart({ width, height, palette = pagePalette, ...data }: WaterfallData & ChartSize) {
  const hatch = useHatch();
  const rows = rowsOf(data);
  const left = width < narrowBelow ? 104 : 132;
  const right = width - 92;
  const ends = rows.flatMap(({ from, to }) => (from === null ? [to] : [from, to]));
  const [least, most] = [Math.min(...ends), Math.max(...ends)];
  const room = Math.max(1, most - least);
  const [low, high] = [least - room * 0.35, most + room * 0.05];
  const x = (amount: number) => left + ((amount - low) / (high - low)) * (right - left);
  const scale = Math.min(moneyScale(most).divisor, 1000);
  const ticks = ticksWithin(low / scale, high / scale, width < narrowBelow ? 2 : 4);
  const bottom = top + rows.length * rowHeight;
  return (
    <svg width={width} height={height} role="img" aria-label={`From ${data.from.label} to ${data.to.label}`}>
      <HatchDefs ids={hatch} palette={palette} />
      <path
        d={ticks.map((tick) => `M${x(tick * scale)} ${top}V${bottom}`).join('')}
        stroke={palette.grid}
        fill="none"
      />
      {rows.map((row, index) => {
        const y = top + index * rowHeight + 4;
        const from = row.from === null ? left : x(Math.min(row.from, row.to));
        const to = row.from === null ? x(row.to) : x(Math.max(row.from, row.to));
        const falls = row.tone === 'verdigris';
        return (
          <g key={index}>
            <Words x={left - 8} y={y + 16} palette={palette} anchor="end" bold={row.from === null}>
              {row.label}
            </Words>
            <rect
              x={from}
              y={y}
              width={Math.max(1, to - from)}
              height={rowHeight - 12}
              fill={falls ? `url(#${hatch.saving})` : palette.ink}
              stroke={falls ? palette.verdigris : palette.ink}
            />
            {row.from === null && <Cut x={from} y={y} palette={palette} />}
            <Words
              x={width - 2}
              y={y + 16}
              palette={palette}
              tone={row.tone}
              anchor="end"
              bold={row.from === null || falls}
            >
              {row.figure}
            </Words>
          </g>
        );
      })}
      <path d={`M${left} ${bottom}H${right}`} stroke={palette.ink} shapeRendering="crispEdges" />
      {ticks.map((tick) => (
        <Words key={tick} x={x(tick * scale)} y={bottom + 16} palette={palette} tone="ink2" anchor="middle">
          {formatNumber(tick, { upTo: 1 })}
        </Words>
      ))}
      <Words x={right} y={bottom + 34} palette={palette} anchor="end">
        {`${scale === 1 ? '' : 'Thousand '}${data.currency} a year, axis cut`}
      </Words>
    </svg>
  );
}

/** The same as a table. */
export function waterfallTable({ currency, from, steps, to }: WaterfallData): LedgerData {
  const figures = { kind: 'number', decimals: 2 } as const;
  return {
    columns: [
      { key: 'line', head: `From ${from.label} to ${to.label}` },
      { key: 'change', head: 'Change a year', unit: currency, signed: true, ...figures },
      { key: 'total', head: 'Bills of the year', unit: currency, ...figures },
    ],
    rows: [
      { id: 'from', kind: 'subtotal', cells: { line: from.label, change: null, total: from.total } },
      ...steps.map(({ label, change }, index) => ({
        id: String(index),
        cells: { line: label, change: { value: change, tone: change < 0 ? ('leading' as const) : undefined } },
      })),
    ],
    total: { line: to.label, change: to.total - from.total, total: to.total },
  };
}

/** Island: the chart in its frame. */
export function WaterfallFigure({ finding, reading, fileName, ...data }: WaterfallData & FigureText) {
  return (
    <ChartFigure
      finding={finding}
      reading={reading}
      fileName={fileName}
      table={waterfallTable(data)}
      heightOf={() => waterfallHeight(data)}
    >
      {(size) => <WaterfallChart {...data} {...size} />}
    </ChartFigure>
  );
}
