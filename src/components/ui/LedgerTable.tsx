import { Fragment, useCallback, useRef, useState, type ReactNode } from 'react';
import {
  cellText,
  columnAlign,
  columnUnit,
  isNought,
  toCell,
  type LedgerCell,
  type LedgerColumn,
  type LedgerData,
  type LedgerRow,
  type LedgerValue,
} from './ledger';
import { Mark } from './Mark';
import { WhyPanel } from './WhyPanel';

export interface LedgerTableProps extends LedgerData {
  /** What the table is, for readers; also names the scrolling region. */
  label: string;
  /** 28 px rows, for tables with actions. */
  roomy?: boolean;
  /** On a phone each row becomes a block; otherwise the table scrolls sideways. */
  stack?: boolean;
  /** Islands only: actions at the row's end. */
  renderActions?: (row: LedgerRow) => ReactNode;
  /** Islands only: what opens under a row where a cell `opens`. */
  renderPanel?: (row: LedgerRow, close: () => void) => ReactNode;
  /** Islands only: the picture beside an opened reasoning. */
  renderPicture?: (row: LedgerRow, columnKey: string) => ReactNode;
}

interface OpenWhy {
  rowId: string;
  columnKey: string;
}

const classes = (...names: (string | false | undefined)[]) => names.filter(Boolean).join(' ') || undefined;

function cellClass(column: LedgerColumn, cell: LedgerCell): string | undefined {
  return classes(
    columnAlign(column) !== 'right' && columnAlign(column),
    column.wrap && 'wrap',
    column.spare && 'spare',
    (column.strong || cell.strong) && 'strong',
    column.picked && 'picked',
    column.quiet && !cell.tone && 'quiet',
    cell.tone,
  );
}

function Figure({ column, cell }: { column: LedgerColumn; cell: LedgerCell }) {
  const text = cellText(column, cell.value);
  const figure = cell.href ? (
    <a className="text-link" href={cell.href}>
      {text}
    </a>
  ) : (
    text
  );
  return (
    <>
      {cell.prefix && <span className="quiet">{cell.prefix} </span>}
      {cell.mark && <Mark {...cell.mark} />}
      {cell.assumed ? (
        <span className="assumed" title="assumed, not from a nameplate">
          {figure}
          <span className="unseen"> (assumed)</span>
        </span>
      ) : isNought(column, cell.value) ? (
        <span className="nil">{figure}</span>
      ) : (
        figure
      )}
      {cell.note && <small>{cell.note}</small>}
    </>
  );
}

function Head({ columns, tail }: { columns: LedgerColumn[]; tail: string | null }) {
  return (
    <thead>
      <tr>
        {columns.map((column) => (
          <th
            key={column.key}
            scope="col"
            className={classes(columnAlign(column) !== 'right' && columnAlign(column), column.picked && 'picked')}
            style={column.width ? { width: column.width } : undefined}
          >
            {column.headUnseen ? <span className="unseen">{column.head}</span> : column.head}
            {columnUnit(column) && <span className="unit">{columnUnit(column)}</span>}
          </th>
        ))}
        {tail && (
          <th scope="col" className="left">
            <span className="unseen">{tail}</span>
          </th>
        )}
      </tr>
    </thead>
  );
}

/** Cells of one row; the first column is the row's heading. */
function Cells(props: {
  columns: LedgerColumn[];
  cells: Record<string, LedgerValue>;
  children?: ReactNode;
  figure?: (column: LedgerColumn, cell: LedgerCell) => ReactNode;
  /** Holds the cell's parts together where its name stands before them. */
  stack?: boolean;
}) {
  return (
    <>
      {props.columns.map((column, index) => {
        const cell = toCell(props.cells[column.key]);
        const content = props.figure?.(column, cell) ?? <Figure column={column} cell={cell} />;
        const className = cellClass(column, cell);
        if (index === 0) {
          return (
            <th key={column.key} scope="row" className={className}>
              {content}
            </th>
          );
        }
        const unit = columnUnit(column);
        const name = unit ? `${column.head}, ${unit}` : column.head;
        return (
          <td key={column.key} className={className} data-name={column.headUnseen ? undefined : name}>
            {cell.value === null && !cell.mark && !cell.note ? null : props.stack ? <span>{content}</span> : content}
          </td>
        );
      })}
      {props.children}
    </>
  );
}

/**
 * Ledger table from plain JSON. Renders statically in .astro pages; as an island (`client:load`) figures with a
 * `why` open their reasoning under the row.
 */
export function LedgerTable(props: LedgerTableProps) {
  const { columns, rows, total, label, roomy, stack, renderActions, renderPanel, renderPicture } = props;
  const [open, setOpen] = useState<OpenWhy | null>(null);
  const origin = useRef<HTMLButtonElement>(null);
  const close = useCallback(() => setOpen(null), []);
  const hasFindings = rows.some((row) => row.finding);
  const tail = renderActions ? 'Actions' : hasFindings ? 'Finding' : null;
  const width = columns.length + (tail ? 1 : 0);
  const figureOf = (row: LedgerRow) => (column: LedgerColumn, cell: LedgerCell) => {
    if (!cell.why && !cell.opens) return undefined;
    const expanded = open?.rowId === row.id && open.columnKey === column.key;
    return (
      <button
        type="button"
        className={classes('why-figure', cell.opens && 'opens-figure')}
        aria-expanded={expanded}
        ref={expanded ? origin : undefined}
        onClick={() => setOpen(expanded ? null : { rowId: row.id, columnKey: column.key })}
      >
        <Figure column={column} cell={cell} />
      </button>
    );
  };
  return (
    <div className="ledger-scroll" role="region" aria-label={label} tabIndex={0}>
      <table className={classes('ledger', roomy && 'ledger-roomy', stack && 'ledger-stack')} aria-label={label}>
        <Head columns={columns} tail={tail} />
        <tbody>
          {rows.map((row) => {
            const opened = open?.rowId === row.id ? open : null;
            const openedCell = opened && toCell(row.cells[opened.columnKey]);
            const why = openedCell?.why;
            const panel = openedCell?.opens ? renderPanel?.(row, close) : null;
            return (
              <Fragment key={row.id}>
                {row.group && (
                  <tr className="group">
                    <th colSpan={width} scope="rowgroup">
                      {row.group}
                    </th>
                  </tr>
                )}
                <tr className={opened ? 'chosen' : row.kind}>
                  <Cells columns={columns} cells={row.cells} figure={figureOf(row)} stack={stack}>
                    {tail && (
                      <td className={renderActions ? 'row-actions' : 'left'}>
                        {row.finding && (
                          <span className={classes('finding-letter', row.caution && 'finding-letter-caution')}>
                            {row.finding}
                          </span>
                        )}
                        {renderActions?.(row)}
                      </td>
                    )}
                  </Cells>
                </tr>
                {panel && (
                  <tr className="why-row">
                    <td colSpan={width}>{panel}</td>
                  </tr>
                )}
                {opened && why && (
                  <tr className="why-row">
                    <td colSpan={width}>
                      <WhyPanel
                        key={opened.columnKey}
                        content={why}
                        origin={origin}
                        picture={renderPicture?.(row, opened.columnKey)}
                        onClose={close}
                      />
                    </td>
                  </tr>
                )}
              </Fragment>
            );
          })}
        </tbody>
        {total && (
          <tfoot>
            <tr>
              <Cells columns={columns} cells={total} stack={stack}>
                {tail && <td />}
              </Cells>
            </tr>
          </tfoot>
        )}
      </table>
    </div>
  );
}
