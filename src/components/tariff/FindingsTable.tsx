import { Fragment, useEffect, useRef, useState } from 'react';
import { Queries } from '../../client/queries';
import type { FindingView } from '../../schemas/finding';
import { Button } from '../ui/Button';
import { formatAmount, formatDate } from '../ui/format';
import { Mark } from '../ui/Mark';
import { FindingPanel } from './FindingPanel';
import { newestNote, stateMark, wasWords } from './finding-words';

export interface FindingsTableProps {
  findings: FindingView[];
  currency: string;
  /** Today on the practice's calendar. */
  today: string;
}

const heads = ['Bill', 'Line', 'Amount', 'Cause', 'State', 'Since', 'Note'];

function AmountCell({ finding, currency }: { finding: FindingView; currency: string }) {
  const was = wasWords(finding, currency);
  const { energy, amountMinor } = finding;
  return (
    <span>
      {energy ? `${formatAmount(amountMinor, currency)}` : formatAmount(amountMinor, currency, { signed: true })}
      {energy?.worthMinor != null && <small>worth {formatAmount(energy.worthMinor, currency, { signed: true })}</small>}
      {was && <small>{was}</small>}
    </span>
  );
}

function Cells({ finding, currency, today }: { finding: FindingView } & Omit<FindingsTableProps, 'findings'>) {
  return (
    <>
      <th scope="row" className="left">
        <span>
          {finding.letter && <span className="finding-letter">{finding.letter}</span>} {finding.billName}
          {finding.letter === null && <small>no longer found</small>}
        </span>
      </th>
      <td className="left" data-name="Line">
        <span>{finding.line ?? 'the bill as a whole'}</span>
      </td>
      <td className="strong" data-name={`Amount, ${currency}`}>
        <AmountCell finding={finding} currency={currency} />
      </td>
      <td className="left wrap" data-name="Cause">
        <span>{finding.title}</span>
      </td>
      <td className="left" data-name="State">
        <span>
          <Mark {...stateMark(finding, today, currency)} />
          {finding.letterNumber !== null && <small>letter {finding.letterNumber}</small>}
        </span>
      </td>
      <td className="left quiet" data-name="Since">
        <span>{formatDate(finding.since)}</span>
      </td>
      <td className="left wrap quiet" data-name="Note">
        {newestNote(finding) && <span>{newestNote(finding)}</span>}
      </td>
    </>
  );
}

/** The finding an address asks for: `#finding-12`. */
const askedFor = () => Number(/^#finding-(\d+)$/.exec(location.hash)?.[1] ?? NaN);

function Table({ findings, currency, today }: FindingsTableProps) {
  const [opened, setOpened] = useState<number | null>(null);
  const origin = useRef<HTMLButtonElement>(null);
  useEffect(() => {
    const follow = () => {
      const id = askedFor();
      if (Number.isNaN(id)) return;
      setOpened(id);
      document.getElementById(`finding-${id}`)?.querySelector('button')?.focus();
    };
    follow();
    window.addEventListener('hashchange', follow);
    return () => window.removeEventListener('hashchange', follow);
  }, []);
  const close = () => {
    setOpened(null);
    origin.current?.focus();
  };
  return (
    <div
      className="ledger-scroll"
      role="region"
      aria-label="Findings"
      tabIndex={0}
      onKeyDown={(event) => event.key === 'Escape' && opened !== null && close()}
    >
      <table className="ledger ledger-roomy ledger-stack" aria-label="Findings">
        <thead>
          <tr>
            {heads.map((head) => (
              <th key={head} scope="col" className={head === 'Amount' ? undefined : 'left'}>
                {head}
                {head === 'Amount' && <span className="unit">{currency}</span>}
              </th>
            ))}
            <th scope="col" className="left">
              <span className="unseen">Actions</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {findings.map((finding) => {
            const isOpen = opened === finding.id;
            return (
              <Fragment key={finding.id}>
                <tr className={isOpen ? 'chosen' : undefined} id={`finding-${finding.id}`}>
                  <Cells finding={finding} currency={currency} today={today} />
                  <td className="row-actions">
                    <Button
                      kind="quiet"
                      aria-expanded={isOpen}
                      aria-label={`Decide about finding ${finding.letter ?? finding.billName}`}
                      onClick={(event) => {
                        origin.current = event.currentTarget;
                        setOpened(isOpen ? null : finding.id);
                      }}
                    >
                      {isOpen ? 'Close' : 'Decide'}
                    </Button>
                  </td>
                </tr>
                {isOpen && (
                  <tr className="why-row">
                    <td colSpan={heads.length + 1}>
                      <FindingPanel finding={finding} currency={currency} today={today} />
                    </td>
                  </tr>
                )}
              </Fragment>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

/** Island: findings with their states. A row opens to what may happen to it, with its history. */
export function FindingsTable(props: FindingsTableProps) {
  return (
    <Queries>
      <Table {...props} />
    </Queries>
  );
}
