import { Words, type Plot } from './kit';
import type { Palette, Tone } from './palette';

/** Bill on the axis: "Aug", with the year beneath where it begins. */
export interface BillLabel {
  label: string;
  /** Second line, where it helps: the year. */
  year?: string;
}

/** Rectangle of a bar between two values, upright whichever is greater. */
export function barBox(plot: Plot, x: number, width: number, from: number, to: number) {
  const y1 = plot.y(from);
  const y2 = plot.y(to);
  return { x: x - width / 2, y: Math.min(y1, y2), width, height: Math.abs(y2 - y1) };
}

/** Width of a bar when so many share the plot. */
export function barWidth(plot: Plot, count: number): number {
  return Math.max(6, Math.min(64, ((plot.right - plot.left) / Math.max(1, count)) * 0.6));
}

/** Names beneath the bars; every second one where there is no room. */
export function BarNames({ plot, bills, palette }: { plot: Plot; bills: BillLabel[]; palette: Palette }) {
  const room = (plot.right - plot.left) / Math.max(1, bills.length);
  const every = room < 28 ? Math.ceil(28 / room) : 1;
  return bills.map((bill, index) =>
    index % every === 0 ? (
      <g key={index}>
        <Words x={plot.x(index)} y={plot.bottom + 16} palette={palette} tone="ink2" anchor="middle">
          {bill.label}
        </Words>
        {bill.year && (
          <Words x={plot.x(index)} y={plot.bottom + 30} palette={palette} tone="ink2" anchor="middle">
            {bill.year}
          </Words>
        )}
      </g>
    ) : null,
  );
}

/** Figure above a bar; left out where neighbours would touch. */
export function BarFigure(props: {
  plot: Plot;
  index: number;
  count: number;
  y: number;
  palette: Palette;
  tone?: Tone;
  bold?: boolean;
  children: string;
}) {
  const { plot, index, count, y, palette, tone, bold, children } = props;
  const room = (plot.right - plot.left) / Math.max(1, count);
  if (children.length * 6.6 > room) return null;
  return (
    <Words x={plot.x(index)} y={y - 6} palette={palette} tone={tone} bold={bold} anchor="middle" halo>
      {children}
    </Words>
  );
}
