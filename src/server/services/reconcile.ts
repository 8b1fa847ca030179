import type { PricedBill } from '../../core/tariff';
import { toMinorUnits } from '../../core/units';
import type { PricedYear, ReconciledBill } from '../../schemas/pricing';
import type { PricingBasis } from './pricing';

/** Lays a priced year beside what was billed. */
export function reconcileYear(basis: PricingBasis, priced: PricedBill[]): PricedYear {
  const bills = basis.bills.map((bill, index): ReconciledBill => {
    const own = priced[index]!;
    const pricedMinor = toMinorUnits(own.total, own.currency);
    const lineSum = bill.lines.reduce((sum, line) => sum + line.amountMinor, 0);
    const billedMinor = bill.totalMinor ?? (bill.lines.length > 0 ? lineSum : null);
    return {
      bill,
      priced: own,
      pricedMinor,
      billedMinor,
      differenceMinor: billedMinor === null ? null : billedMinor - pricedMinor,
      reactiveMinor: toMinorUnits(own.reactiveCost, own.currency),
      pairs: [],
      findings: [],
    };
  });
  const sum = (of: (bill: ReconciledBill) => number | null) =>
    bills.reduce((total, bill) => total + (of(bill) ?? 0), 0);
  return {
    route: basis.route,
    currency: basis.schedule.currency,
    timeZone: basis.schedule.timeZone,
    bills,
    findings: [],
    totals: {
      pricedMinor: sum((bill) => bill.pricedMinor),
      billedMinor: sum((bill) => bill.billedMinor),
      differenceMinor: sum((bill) => bill.differenceMinor),
      reactiveMinor: sum((bill) => bill.reactiveMinor),
      billsWithoutTotal: bills.filter((bill) => bill.billedMinor === null).length,
    },
    readings: { present: 0, expected: 0 },
    notes: [],
  };
}
