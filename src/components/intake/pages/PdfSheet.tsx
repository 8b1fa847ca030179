import { useEffect, useRef, useState, type ReactNode } from 'react';
import type { OpenPdf, PdfPage } from './pdf';

export interface PdfSheetProps {
  pdf: OpenPdf;
  fileName: string;
  page: number;
  quarters: number;
  zoom: number;
  /** Told once the page is open. */
  onPage(page: PdfPage | null): void;
  children: ReactNode;
}

/** One page of a PDF on a canvas, with what is laid over it. */
export function PdfSheet({ pdf, fileName, page, quarters, zoom, onPage, children }: PdfSheetProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const sheet = useRef<HTMLDivElement>(null);
  const [open, setOpen] = useState<PdfPage | null>(null);
  const [fault, setFault] = useState(false);
  const [width, setWidth] = useState(0);

  useEffect(() => {
    let left = false;
    setFault(false);
    pdf.page(page).then(
      (opened) => {
        if (left) return;
        setOpen(opened);
        onPage(opened);
      },
      () => !left && setFault(true),
    );
    return () => {
      left = true;
    };
  }, [pdf, page, onPage]);

  useEffect(() => {
    if (!sheet.current) return;
    const observer = new ResizeObserver(([entry]) => setWidth(Math.round(entry?.contentRect.width ?? 0)));
    observer.observe(sheet.current);
    return () => observer.disconnect();
  }, []);

  useEffect(() => {
    if (!open || !canvas.current || width === 0) return;
    const drawing = open.draw(canvas.current, { width: width * window.devicePixelRatio, quarters });
    drawing.done.catch((error: Error) => error.name !== 'RenderingCancelledException' && setFault(true));
    return () => drawing.stop();
  }, [open, width, quarters]);

  const upright = quarters % 2 === 0;
  const ratio = open ? (upright ? open.width / open.height : open.height / open.width) : 0.707;
  return (
    <div ref={sheet} className="page-paper" style={{ width: `${zoom * 100}%`, aspectRatio: String(ratio) }}>
      <canvas ref={canvas} role="img" aria-label={`Page ${page} of ${fileName}`} key={quarters} />
      {fault ? (
        <p className="page-words">This page is damaged and cannot be drawn. The others may be whole.</p>
      ) : (
        children
      )}
    </div>
  );
}
