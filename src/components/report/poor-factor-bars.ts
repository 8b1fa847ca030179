import type { EditionContent } from '../../schemas/edition';
import type { BillsBeforeAfterData } from '../charts/BillsBeforeAfterChart';
import { formatBillName } from '../ui/format';

/** What poor power factor costs in each bill, before and after the plan: the part of the bill the plan is about. */
export function poorFactorBars({ bills, currency, plan }: EditionContent): BillsBeforeAfterData {
  let shownYear = '';
  const named = bills.map((bill) => {
    const [label = '', year = ''] = formatBillName(bill).split(' ');
    const isNew = year !== shownYear;
    shownYear = year;
    const amounts = { before: bill.reactiveCost, after: bill.reactiveCostAfter };
    return { label, ...(isNew ? { year } : {}), ...amounts };
  });
  return { bills: named, currency, what: 'cost of poor power factor', planName: plan.name };
}
