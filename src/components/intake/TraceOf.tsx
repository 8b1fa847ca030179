import { useId, useState } from 'react';
import { ApiError } from '../../client/api';
import { fetchTrace, originalPath } from '../../client/intake';
import type { Trace, TracePoint } from '../../core/intake';
import { Button } from '../ui/Button';
import { formatNumber } from '../ui/format';
import { Notice } from '../ui/Notice';

export type TraceOfProps = { intakeId: number } & TracePoint;

type Found = { trace: Trace } | { fault: string } | 'asked' | null;

/** Shows, when asked, the rows of the file behind an interval or a bill: "Row 12,345 of meter.csv: 07/10/2025 | 592.8". */
export function TraceOf({ intakeId, ...at }: TraceOfProps) {
  const [found, setFound] = useState<Found>(null);
  const [open, setOpen] = useState(false);
  const body = useId();
  const toggle = () => {
    setOpen(!open);
    if (open || (found && found !== 'asked' && 'trace' in found)) return;
    setFound('asked');
    fetchTrace(intakeId, at).then(
      (trace) => setFound({ trace }),
      (error: unknown) =>
        setFound({ fault: error instanceof ApiError ? error.message : 'The file could not be asked. Try again.' }),
    );
  };
  return (
    <div className="trace-of">
      <Button kind="quiet" aria-expanded={open} aria-controls={body} onClick={toggle}>
        {open ? 'Hide the rows of the file' : 'Show the rows of the file'}
      </Button>
      <div id={body} hidden={!open} role="status">
        {found === 'asked' && <p className="quiet">The original is read again to find the row.</p>}
        {found && found !== 'asked' && 'fault' in found && <Notice kind="fault" title={found.fault} />}
        {found && found !== 'asked' && 'trace' in found && <Rows intakeId={intakeId} trace={found.trace} />}
      </div>
    </div>
  );
}

function Rows({ intakeId, trace }: { intakeId: number; trace: Trace }) {
  const { fileName, sheet, unit, rows, more } = trace;
  const names = (rows[0]?.cells ?? []).map((cell) => cell.name);
  const place = sheet ? `${fileName}, sheet ${sheet}` : fileName;
  const heads = [unit === 'row' ? 'Row' : unit === 'line' ? 'Line' : 'Column', ...names];
  return (
    <>
      <div className="first-rows" role="region" aria-label={`Rows of ${place}`} tabIndex={0}>
        <table>
          <caption>
            <a className="text-link" href={originalPath(intakeId)} download>
              {place}
            </a>
          </caption>
          <thead>
            <tr>
              {heads.map((head, index) => (
                <th key={index} scope="col">
                  {head}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map((row, index) => (
              <tr key={index}>
                <th scope="row">{formatNumber(row.number)}</th>
                {row.cells.map((cell, at) => (
                  <td key={at}>{cell.text}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {more > 0 && <p className="quiet">and {formatNumber(more)} more</p>}
    </>
  );
}
