import { useEffect, useRef, useState, type ReactNode } from 'react';
import type { LedgerData } from '../ui/ledger';
import { ChartFrame } from './ChartFrame';

/** Words of a figure, given by the page. */
export interface FigureText {
  /** The finding, in bold. */
  finding: string;
  /** How to read the picture. */
  reading?: string;
  /** Name of exported files, without ending. */
  fileName: string;
}

export interface ChartFigureProps extends FigureText {
  table: LedgerData;
  /** Choice of the reader above the picture. */
  choice?: ReactNode;
  /** Height for a width; a chart is drawn anew for every width, never stretched. */
  heightOf: (width: number) => number;
  children: (size: { width: number; height: number }) => ReactNode;
}

/** A chart in its frame, drawn to the width there is. */
export function ChartFigure({ heightOf, children, ...frame }: ChartFigureProps) {
  const holder = useRef<HTMLDivElement>(null);
  const [width, setWidth] = useState<number | null>(null);
  useEffect(() => {
    const element = holder.current;
    if (!element) return;
    const measure = () => {
      const measured = Math.floor(element.clientWidth);
      if (measured > 0) setWidth(Math.max(280, measured));
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return (
    <ChartFrame {...frame}>
      <div ref={holder} style={{ minHeight: heightOf(width ?? 592) }}>
        {width !== null && children({ width, height: heightOf(width) })}
      </div>
    </ChartFrame>
  );
}
