import { Fragment, useCallback, useRef, useState, type RefObject } from 'react';
import { Queries } from '../../client/queries';
import type { SheetRow, TariffSheetView } from '../../schemas/tariff-sheet';
import { formatAmount, formatNumber, formatPeriod } from '../ui/format';
import { PairsTable } from './PairsTable';
import { TariffWhy } from './TariffWhy';

/** What is open under a row: its lines, or the reasoning of a figure and the figures it was reached through. */
type Opened = { billId: number; cell: 'lines' } | { billId: number; cell: string; trail: string[] };

interface FigureProps {
  row: SheetRow;
  cell: string;
  figure: string;
  text: string;
  isNought?: boolean;
  opened: Opened | null;
  origin: RefObject<HTMLButtonElement | null>;
  onPress: (opened: Opened | null) => void;
}

function Figure({ row, cell, figure, text, isNought = false, opened, origin, onPress }: FigureProps) {
  const expanded = opened?.billId === row.billId && opened.cell === cell;
  return (
    <button
      type="button"
      className={`why-figure${isNought ? ' nil' : ''}`}
      aria-expanded={expanded}
      ref={expanded ? origin : undefined}
      onClick={() => onPress(expanded ? null : { billId: row.billId, cell, trail: [figure] })}
    >
      {text}
    </button>
  );
}

const allGroups = [
  { key: 'energy', head: 'Energy' },
  { key: 'demand', head: 'Demand' },
  { key: 'reactive', head: 'Reactive' },
  { key: 'other', head: 'Other, tax' },
] as const;

const groupOf = (group: string | null) => (allGroups.some(({ key }) => key === group) ? group : 'other');

const hasGroup = (row: SheetRow, key: string) =>
  row.pairs.some((pair) => pair.lineId !== null && groupOf(pair.group) === key);

/** Groups that at least one bill has a line of. */
const groupsOf = (sheet: TariffSheetView) =>
  allGroups.filter(({ key }) => sheet.rows.some((row) => hasGroup(row, key)));

function Head({ sheet }: { sheet: TariffSheetView }) {
  const money = <span className="unit">{sheet.currency}</span>;
  return (
    <thead>
      <tr>
        <th scope="col" className="left">
          Bill of
        </th>
        <th scope="col" className="left">
          Period
        </th>
        {sheet.columns.map((column) => (
          <th key={column.key} scope="col">
            {column.head}
            <span className="unit">{column.unit || '\u00a0'}</span>
          </th>
        ))}
        {groupsOf(sheet).map((group) => (
          <th key={group.key} scope="col">
            {group.head}
            {money}
          </th>
        ))}
        <th scope="col">Priced{money}</th>
        <th scope="col">Billed{money}</th>
        <th scope="col">Difference{money}</th>
        <th scope="col" className="left">
          <span className="unseen">Findings</span>
        </th>
      </tr>
    </thead>
  );
}

interface RowProps {
  sheet: TariffSheetView;
  row: SheetRow;
  opened: Opened | null;
  origin: RefObject<HTMLButtonElement | null>;
  onPress: (opened: Opened | null) => void;
}

function QuantityCells({ sheet, row, ...press }: RowProps) {
  return sheet.columns.map((column) => {
    const quantity = row.quantities[column.key];
    return (
      <td key={column.key}>
        {!quantity && column.key === 'rate' && <span className="quiet">shared</span>}
        {quantity && (
          <>
            {column.key === 'billed' && row.ratchet && (
              <span className="quiet" title="set by the ratchet">
                r{' '}
              </span>
            )}
            <Figure
              row={row}
              cell={column.key}
              figure={quantity.figure}
              text={formatNumber(quantity.value, { decimals: column.decimals })}
              {...press}
            />
          </>
        )}
      </td>
    );
  });
}

function MoneyCells({ sheet, row, ...press }: RowProps) {
  const money = (minor: number, signed = false) => formatAmount(minor, sheet.currency, { signed });
  const figure = (cell: string, asked: string, minor: number, signed = false) => (
    <Figure row={row} cell={cell} figure={asked} text={money(minor, signed)} isNought={minor === 0} {...press} />
  );
  const { differenceMinor, billedMinor, findings } = row;
  return (
    <>
      {groupsOf(sheet).map(({ key }) => (
        <td key={key}>{hasGroup(row, key) && figure(`group-${key}`, `group:${key}`, row.groups[key])}</td>
      ))}
      <td className="strong">{figure('priced', 'total', row.pricedMinor)}</td>
      <td>
        {billedMinor === null ? <span className="quiet">no total</span> : figure('billed', 'billed', billedMinor)}
      </td>
      <td className={findings.length > 0 ? 'strong' : undefined}>
        {differenceMinor !== null && figure('difference', 'difference', differenceMinor, true)}
      </td>
      <td className="left">
        {findings.map((letter) => (
          <span key={letter} className="finding-letter">
            {letter}
          </span>
        ))}
      </td>
    </>
  );
}

function BillRow(props: RowProps) {
  const { row, opened, onPress } = props;
  const isOpen = opened?.billId === row.billId;
  const showsLines = isOpen && opened.cell === 'lines';
  return (
    <tr className={isOpen ? 'chosen' : undefined}>
      <th scope="row" className="left">
        <button
          type="button"
          className="why-figure"
          aria-expanded={showsLines}
          title={`Lines of the bill of ${row.name}`}
          onClick={() => onPress(showsLines ? null : { billId: row.billId, cell: 'lines' })}
        >
          {row.name}
        </button>
      </th>
      <td className="left quiet">{formatPeriod(row.from, row.to)}</td>
      <QuantityCells {...props} />
      <MoneyCells {...props} />
    </tr>
  );
}

function Totals({ sheet }: { sheet: TariffSheetView }) {
  const money = (minor: number) => formatAmount(minor, sheet.currency);
  const sum = (of: (row: SheetRow) => number | null) => sheet.rows.reduce((total, row) => total + (of(row) ?? 0), 0);
  return (
    <tfoot>
      <tr>
        <th scope="row" className="left">
          Year
        </th>
        <td />
        {sheet.columns.map(({ key }) => (
          <td key={key}>{key === 'energy' && formatNumber(sum((row) => row.quantities.energy?.value ?? 0))}</td>
        ))}
        {groupsOf(sheet).map(({ key }) => (
          <td key={key}>{money(sum((row) => row.groups[key]))}</td>
        ))}
        <td>{money(sum((row) => row.pricedMinor))}</td>
        <td>{money(sum((row) => row.billedMinor))}</td>
        <td>
          {formatAmount(
            sum((row) => row.differenceMinor),
            sheet.currency,
            { signed: true },
          )}
        </td>
        <td />
      </tr>
    </tfoot>
  );
}

function Ledger({ sheet }: { sheet: TariffSheetView }) {
  const [opened, setOpened] = useState<Opened | null>(null);
  const origin = useRef<HTMLButtonElement>(null);
  const close = useCallback(() => setOpened(null), []);
  const width = sheet.columns.length + groupsOf(sheet).length + 6;
  const follow = (figure: string) =>
    setOpened((current) => {
      if (!current || current.cell === 'lines' || !('trail' in current)) return current;
      const at = current.trail.indexOf(figure);
      return { ...current, trail: at >= 0 ? current.trail.slice(0, at + 1) : [...current.trail, figure] };
    });
  return (
    <div
      className="ledger-scroll"
      role="region"
      aria-label="Bills, priced against billed"
      tabIndex={0}
      onKeyDown={(event) => event.key === 'Escape' && opened?.cell === 'lines' && close()}
    >
      <table className="ledger tariff-ledger" aria-label="Bills, priced against billed">
        <Head sheet={sheet} />
        <tbody>
          {sheet.rows.map((row) => (
            <Fragment key={row.billId}>
              <BillRow sheet={sheet} row={row} opened={opened} origin={origin} onPress={setOpened} />
              {opened?.billId === row.billId && (
                <tr className="why-row">
                  <td colSpan={width}>
                    {'trail' in opened ? (
                      <TariffWhy
                        key={opened.cell}
                        code={sheet.code}
                        billId={row.billId}
                        figure={opened.trail.at(-1) ?? ''}
                        back={opened.trail.at(-2) ?? null}
                        origin={origin}
                        onClose={close}
                        onOpen={follow}
                      />
                    ) : (
                      <PairsTable sheet={sheet} row={row} />
                    )}
                  </td>
                </tr>
              )}
            </Fragment>
          ))}
        </tbody>
        <Totals sheet={sheet} />
      </table>
    </div>
  );
}

/** Island: the year's bills, priced against billed. A bill opens to its lines, any figure to its reasoning. */
export function TariffLedger({ sheet }: { sheet: TariffSheetView }) {
  return (
    <Queries>
      <Ledger sheet={sheet} />
    </Queries>
  );
}
