import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react';
import { turnedBox, type Box } from './box';
import type { PageFigure } from './page-text';

export interface LaidFigure extends PageFigure {
  /** What it is taken as; null where it is no number or date in the chosen style. */
  typed: string | null;
  /** Field of the form it went into. */
  usedIn: string | null;
}

export interface FigureLayerProps {
  label: string;
  figures: LaidFigure[];
  quarters: number;
  /** Place of the field that has the focus. */
  marked: Box | null;
  /** The figure looked at, by mouse or keys. */
  onLook(figure: LaidFigure | null): void;
  onTake(figure: LaidFigure): void;
  onDrag(figure: LaidFigure, data: DataTransfer): void;
  onLeave(): void;
}

const percent = (share: number) => `${share * 100}%`;
const placed = (box: Box, quarters: number) => {
  const [left, top, right, bottom] = turnedBox(box, quarters);
  return { left: percent(left), top: percent(top), width: percent(right - left), height: percent(bottom - top) };
};

/** Where the keys lead in a list. */
function stepped(key: string, at: number, last: number): number | null {
  const steps: Record<string, number> = {
    ArrowDown: at + 1,
    ArrowRight: at + 1,
    ArrowUp: at - 1,
    ArrowLeft: at - 1,
    PageDown: at + 10,
    PageUp: at - 10,
    Home: 0,
    End: last,
  };
  const step = steps[key];
  return step === undefined ? null : Math.min(last, Math.max(0, step));
}

/** Numbers and dates laid over the page: dragged with the mouse, or gone through with the keys in reading order. */
export function FigureLayer(props: FigureLayerProps) {
  const { label, figures, quarters, marked, onLook, onTake, onDrag, onLeave } = props;
  const id = useId();
  const list = useRef<HTMLDivElement>(null);
  const [at, setAt] = useState(0);
  const [inside, setInside] = useState(false);
  const sought = useRef({ text: '', when: 0 });
  const active = Math.min(at, figures.length - 1);
  const go = (index: number) => {
    setAt(index);
    onLook(figures[index] ?? null);
    list.current?.children[index]?.scrollIntoView({ block: 'nearest', inline: 'nearest' });
  };
  useEffect(() => setAt(0), [figures.length]);
  /** Digits typed one after another lead to the figure that begins with them. */
  const seek = (sign: string, when: number) => {
    const before = sought.current;
    const text = when - before.when < 1200 ? before.text + sign : sign;
    sought.current = { text, when };
    const found = figures.findIndex((figure) => figure.text.replace(/[^\d]/g, '').startsWith(text));
    if (found >= 0) go(found);
  };
  const handleKey = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const next = stepped(event.key, active, figures.length - 1);
    const figure = figures[active];
    if (next !== null) go(next);
    else if (event.key === 'Enter' && figure) onTake(figure);
    else if (event.key === 'Escape') onLeave();
    else if (/^\d$/.test(event.key)) seek(event.key, event.timeStamp);
    else return;
    event.preventDefault();
  };
  return (
    <>
      {marked && <div className="page-mark" style={placed(marked, quarters)} data-page-mark aria-hidden="true" />}
      <div
        ref={list}
        role="listbox"
        aria-label={label}
        aria-activedescendant={inside ? `${id}-${active}` : undefined}
        tabIndex={0}
        className="page-figures"
        onKeyDown={handleKey}
        onFocus={() => {
          setInside(true);
          onLook(figures[active] ?? null);
        }}
        onBlur={() => {
          setInside(false);
          onLook(null);
        }}
      >
        {figures.map((figure, index) => (
          <div
            key={index}
            id={`${id}-${index}`}
            role="option"
            aria-selected={inside && index === active}
            aria-label={nameOf(figure)}
            className="page-figure"
            data-used={figure.usedIn ? '' : undefined}
            data-none={figure.typed === null ? '' : undefined}
            style={placed(figure.box, quarters)}
            draggable={figure.typed !== null}
            onMouseEnter={() => onLook(figure)}
            onMouseLeave={() => onLook(null)}
            onClick={() => onTake(figure)}
            onDragStart={(event) => onDrag(figure, event.dataTransfer)}
          />
        ))}
      </div>
    </>
  );
}

/** The figure with its neighbours, as readers hear it. */
function nameOf({ text, line, typed, usedIn }: LaidFigure): string {
  const among = line === text ? '' : `, in the line ${line}`;
  const used = usedIn ? `, taken into ${usedIn}` : '';
  const meant = typed === null ? ', not read as a number' : typed === text ? '' : `, taken as ${typed}`;
  return text + meant + among + used;
}
