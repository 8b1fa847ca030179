import { useRef, type KeyboardEvent, type PointerEvent } from 'react';
import { planeBox } from './NumericPlane';

/** A value of the horizontal axis that is set on the chart itself. */
export interface Drag {
  value: number;
  least: number;
  most: number;
  step: number;
  /** What is set: "Field current of M-1". */
  label: string;
  /** The value in words: "164 A, delivers 637 kvar". */
  words: string;
  onChange: (value: number) => void;
}

interface DragAlongProps {
  drag: Drag;
  size: { width: number; height: number };
  /** Ends of the horizontal axis. */
  ends: [number, number];
  /** Height of the mark within the plot, as a share from its top. */
  share: number;
}

const stepsOf: Record<string, number> = {
  ArrowRight: 1,
  ArrowUp: 1,
  ArrowLeft: -1,
  ArrowDown: -1,
  PageUp: 10,
  PageDown: -10,
};

/**
 * Lies over a plane: a press or drag anywhere in the plot sets the value under the pointer, and the mark takes arrow
 * keys, Page up and down, Home and End. Outside the picture itself, so that exports hold the chart alone.
 */
export function DragAlong({ drag, size, ends, share }: DragAlongProps) {
  const handle = useRef<HTMLDivElement>(null);
  const box = planeBox(size);
  const { least, most, step, value } = drag;
  const set = (wanted: number) => {
    const stepped = Math.round(wanted / step) * step;
    drag.onChange(Number(Math.min(most, Math.max(least, stepped)).toPrecision(12)));
  };
  const toPointer = (event: PointerEvent<HTMLDivElement>) => {
    const { left, width } = event.currentTarget.getBoundingClientRect();
    set(ends[0] + ((event.clientX - left) / width) * (ends[1] - ends[0]));
  };
  const press = (event: PointerEvent<HTMLDivElement>) => {
    if (event.button !== 0) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    handle.current?.focus({ preventScroll: true });
    event.preventDefault();
    toPointer(event);
  };
  const handleKey = (event: KeyboardEvent) => {
    const steps = stepsOf[event.key];
    if (steps !== undefined) set(value + steps * step);
    else if (event.key === 'Home') set(least);
    else if (event.key === 'End') set(most);
    else return;
    event.preventDefault();
  };
  const at = (value - ends[0]) / (ends[1] - ends[0]);
  return (
    <div
      className="drag-along"
      style={{ left: box.left, top: box.top, width: box.width, height: box.height }}
      onPointerDown={press}
      onPointerMove={(event) => event.currentTarget.hasPointerCapture(event.pointerId) && toPointer(event)}
    >
      <div
        ref={handle}
        className="drag-mark"
        role="slider"
        tabIndex={0}
        aria-label={drag.label}
        aria-valuemin={least}
        aria-valuemax={most}
        aria-valuenow={value}
        aria-valuetext={drag.words}
        style={{ left: `${100 * Math.min(1, Math.max(0, at))}%`, top: `${100 * Math.min(1, Math.max(0, share))}%` }}
        onKeyDown={handleKey}
      />
    </div>
  );
}
