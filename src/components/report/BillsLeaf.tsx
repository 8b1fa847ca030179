import type { EditionContent } from '../../schemas/edition';
import {
  capital,
  formatAmount,
  formatBillName,
  formatMajor,
  formatMoney,
  formatNumber,
  formatPeriod,
  formatSpelled,
} from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';
import type { LeafContext } from './AnswerLeaf';
import { Picture } from './Picture';
import { comesBack } from './words';
import { Leaf, LeafRow } from './Leaf';

/** Twelve bills before and after, in major units. */
export function billsTable({ bills, standing, plan, currency }: EditionContent): LedgerData {
  const money = { kind: 'number' as const, decimals: 2, unit: currency };
  return {
    columns: [
      { key: 'bill', head: 'Bill of' },
      { key: 'period', head: 'Period', quiet: true },
      { key: 'billed', head: 'Billed', ...money, quiet: true },
      { key: 'before', head: 'As it runs', ...money },
      { key: 'after', head: 'With the plan', ...money, picked: true },
      { key: 'saved', head: 'Saved', ...money, strong: true },
    ],
    rows: bills.map((bill) => ({
      id: bill.from,
      cells: {
        bill: formatBillName(bill),
        period: formatPeriod(bill.from, bill.to),
        billed: bill.billed ?? 'not printed',
        before: bill.before,
        after: bill.after,
        saved: { value: bill.before - bill.after, tone: bill.before > bill.after ? 'leading' : 'quiet' },
      },
    })),
    total: {
      bill: 'Year',
      billed: bills.every((bill) => bill.billed !== null)
        ? bills.reduce((sum, bill) => sum + (bill.billed ?? 0), 0)
        : null,
      before: standing.yearTotal,
      after: plan.yearTotal,
      saved: plan.saving,
    },
  };
}

/** The finding of the bills: how many fall. */
export function billsFinding({ bills, plan, currency }: EditionContent): string {
  const falling = bills.filter((bill) => bill.after < bill.before - 0.005).length;
  const saved = formatMajor(plan.saving, currency, { whole: true });
  if (falling === bills.length) return `Every bill falls; together they save ${saved} a year.`;
  if (falling === 0) return 'No bill falls under this plan.';
  return `${capital(formatSpelled(falling))} of ${formatSpelled(bills.length)} bills fall; over the year the plan saves ${saved}.`;
}

/** Page 2: every bill before and after, where it is taken away, and what was billed wrongly. */
export function BillsLeaf({ content, taps, foot, pictures }: LeafContext & { pictures: Record<string, string> }) {
  const { findings, currency, schedule, standing, plan } = content;
  const claim = findings.reduce((sum, finding) => sum + finding.amountMinor, 0);
  return (
    <Leaf page={2} taps={taps} foot={foot} finding={billsFinding(content)}>
      <LeafRow
        first
        number="2.1"
        title="Each bill, before and after"
        reference={<p>{schedule.title}, lines added as rounded</p>}
      >
        <LedgerTable label="Bills before and after" {...billsTable(content)} />
      </LeafRow>
      <LeafRow
        number="2.2"
        title="What poor power factor costs, before and after"
        lead="Solid copper: what remains. Hatched verdigris: what the plan takes away."
        reference={<p>Each bill less the same bill at unity power factor</p>}
        result={
          <ResultSums
            rows={[
              { label: `Poor pf now, ${currency}`, value: formatNumber(standing.reactiveCost) },
              { label: 'With the plan', value: formatNumber(plan.reactiveCost) },
              { label: 'Less', value: formatNumber(standing.reactiveCost - plan.reactiveCost), kind: 'subtotal' },
              { label: 'Extra losses', value: formatNumber(plan.saving - standing.reactiveCost + plan.reactiveCost) },
              { label: 'Saved a year', value: formatNumber(plan.saving), kind: 'total' },
            ]}
          />
        }
      >
        <Picture svg={pictures.bills} label="Bills before and after" />
      </LeafRow>
      <LeafRow
        number="2.3"
        title="What was billed wrongly"
        reference={<p>In no figure of the plan</p>}
        result={
          <ResultSums
            rows={[{ label: `To claim, ${currency}`, value: formatAmount(claim, currency), kind: 'total' }]}
          />
        }
      >
        {findings.length === 0 ? (
          <p>{comesBack(content)}</p>
        ) : (
          <ul>
            {findings.map((finding) => (
              <li key={finding.letter} className="mb-2">
                <span className="finding-letter">{finding.letter}</span> <b>{finding.title}</b>,{' '}
                {formatMoney(finding.amountMinor, currency)}. {finding.sentence}
              </li>
            ))}
          </ul>
        )}
      </LeafRow>
    </Leaf>
  );
}
