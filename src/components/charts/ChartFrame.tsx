import { useRef, useState, type KeyboardEvent, type ReactNode } from 'react';
import { ledgerCsv, type LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { saveCsv, saveSvgAsPng } from './export';

export interface ChartFrameProps {
  finding: string;
  reading?: string;
  /** Name of exported files, without ending. */
  fileName: string;
  /** The table twin; also the CSV. */
  table: LedgerData;
  /** What of it is shown, chosen by the reader: above the picture. */
  choice?: ReactNode;
  children: ReactNode;
}

/** Whether a key belongs to something typed into. */
const isTyping = (target: EventTarget) => target instanceof HTMLElement && target.closest('input, textarea, select');

/**
 * Caption, picture, foot line. `t` shows the table twin in the same place while the frame has focus, Escape goes
 * back to the picture; the foot keeps its place.
 */
export function ChartFrame({ finding, reading, fileName, table, choice, children }: ChartFrameProps) {
  const [asTable, setAsTable] = useState(false);
  const [trouble, setTrouble] = useState<string | null>(null);
  const picture = useRef<HTMLDivElement>(null);
  const handleKey = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target)) return;
    if (event.key === 't') setAsTable(!asTable);
    else if (event.key === 'Escape' && asTable) setAsTable(false);
    else return;
    event.preventDefault();
    event.stopPropagation();
  };
  const exportPng = async () => {
    const svg = picture.current?.querySelector('svg');
    if (!svg) return setTrouble('The picture is not drawn yet; show the chart first.');
    setTrouble(null);
    await saveSvgAsPng(svg, fileName).catch(() =>
      setTrouble('This browser could not make the picture. The CSV holds the same figures.'),
    );
  };
  return (
    <figure className="chart" tabIndex={0} onKeyDown={handleKey} aria-label={finding}>
      <figcaption>
        {finding}
        {reading && <span>{reading}</span>}
      </figcaption>
      {choice}
      <div className="chart-picture" ref={picture} hidden={asTable}>
        {children}
      </div>
      {asTable && (
        <div className="chart-table">
          <LedgerTable {...table} label={`${finding} As a table.`} />
        </div>
      )}
      <div className="chart-foot" role="group" aria-label="View and export">
        <button type="button" aria-pressed={!asTable} onClick={() => setAsTable(false)}>
          Chart
        </button>
        <button type="button" aria-pressed={asTable} aria-keyshortcuts="t" onClick={() => setAsTable(true)}>
          Table <kbd>t</kbd>
        </button>
        <span className="spring" role="status">
          {trouble}
        </span>
        <button type="button" onClick={() => void exportPng()} disabled={asTable}>
          PNG
        </button>
        <button type="button" onClick={() => saveCsv(ledgerCsv(table), fileName)}>
          CSV
        </button>
      </div>
    </figure>
  );
}
