import { useEffect, useRef, useState } from 'react';

interface Wire {
  from: { x: number; y: number };
  to: { x: number; y: number };
}

/** The box of the focused field's place and its row, in the measure of the drawing; null where one of them is out of sight. */
function wireOf(drawing: SVGSVGElement, path: string): Wire | null {
  const mark = drawing.parentElement?.querySelector('[data-page-mark]');
  const frame = drawing.parentElement?.querySelector('[data-page-frame]');
  const row = document.getElementsByName(path)[0]?.closest('.form-row');
  if (!mark || !frame || !row) return null;
  const own = drawing.getBoundingClientRect();
  const box = mark.getBoundingClientRect();
  const edge = frame.getBoundingClientRect();
  const line = row.getBoundingClientRect();
  const y = box.top + box.height / 2;
  if (y < edge.top || y > edge.bottom || box.right < edge.left || line.left < edge.right) return null;
  return {
    from: { x: Math.min(box.right, edge.right) - own.left, y: y - own.top },
    to: { x: line.left - own.left, y: line.top + line.height / 2 - own.top },
  };
}

/** A copper line from the place on the page to the field it was taken into. */
export function PlaceWire({ path, shown }: { path: string | null; shown: unknown }) {
  const drawing = useRef<SVGSVGElement>(null);
  const [wire, setWire] = useState<Wire | null>(null);
  useEffect(() => {
    const svg = drawing.current;
    if (!svg || path === null) return setWire(null);
    let frame = 0;
    const measure = () => {
      cancelAnimationFrame(frame);
      frame = requestAnimationFrame(() => setWire(wireOf(svg, path)));
    };
    measure();
    const observer = new MutationObserver(measure);
    if (svg.parentElement)
      observer.observe(svg.parentElement, { childList: true, subtree: true, attributeFilter: ['style'] });
    window.addEventListener('resize', measure);
    document.addEventListener('scroll', measure, true);
    return () => {
      cancelAnimationFrame(frame);
      observer.disconnect();
      window.removeEventListener('resize', measure);
      document.removeEventListener('scroll', measure, true);
    };
  }, [path, shown]);
  const bend = wire ? wire.to.x - 16 : 0;
  return (
    <svg ref={drawing} className="page-wire" aria-hidden="true">
      {wire && <path d={`M${wire.from.x} ${wire.from.y}H${bend}V${wire.to.y}H${wire.to.x}`} />}
    </svg>
  );
}
