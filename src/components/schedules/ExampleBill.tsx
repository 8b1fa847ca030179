import type { ExampleView } from '../../schemas/schedule-editor';
import { currencyDecimals, formatNumber } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';

/** A worked bill of a text, line by line, and whether it comes out as asked. */
export function ExampleBill({ example }: { example: ExampleView }) {
  const { bill, title, figures, problem } = example;
  if (!bill) return <Notice kind="fault" title={`${title} cannot be priced.`}>{` ${problem ?? ''}`}</Notice>;
  const style = { decimals: currencyDecimals(bill.currency) };
  const missed = figures.filter((figure) => !figure.fits);
  return (
    <>
      <LedgerTable
        label={title}
        columns={[
          { key: 'line', head: title, wrap: true },
          { key: 'amount', head: 'Amount', unit: bill.currency, align: 'right' },
        ]}
        rows={bill.lines.map(({ id, label, amount, explanation }) => ({
          id,
          cells: { line: { value: label, note: explanation }, amount: formatNumber(amount, style) },
        }))}
        total={{ line: 'Total', amount: formatNumber(bill.total, style) }}
      />
      <p className={missed.length === 0 ? 'example-verdict' : 'example-verdict fault'} role="status">
        {missed.length === 0
          ? `Comes out as asked. Reactive demand costs ${formatNumber(bill.reactiveCost, style)} ${bill.currency} of it.`
          : missed
              .map(({ name, expected, found }) => `${name} is ${found ?? 'no figure'}, asked is ${expected}.`)
              .join(' ')}
      </p>
    </>
  );
}
