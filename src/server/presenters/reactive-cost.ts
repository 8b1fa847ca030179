import { fromMinorUnits } from '../../core/units';
import type { PricedYear, ReconciledBill } from '../../schemas/pricing';

/** What poor power factor cost on one bill, in major units: by the group of the line it hides in. */
export interface ReactiveParts {
  demand: number;
  reactive: number;
  /** Taxes, adjustments and energy. */
  other: number;
}

function partsOf({ priced }: ReconciledBill): ReactiveParts {
  const parts = { demand: 0, reactive: 0, other: 0 };
  for (const line of priced.lines) {
    const group = line.group === 'demand' || line.group === 'reactive' ? line.group : 'other';
    parts[group] += line.reactivePart;
  }
  return parts;
}

/** The same over the year. */
export function reactiveParts(year: PricedYear): ReactiveParts {
  const all = year.bills.map(partsOf);
  const sum = (key: keyof ReactiveParts) => all.reduce((total, parts) => total + parts[key], 0);
  return { demand: sum('demand'), reactive: sum('reactive'), other: sum('other') };
}

/** Data of the chart: what sits in taxes and the like is laid to the two groups it comes from, in proportion. */
export function reactiveCostData(year: PricedYear) {
  const bills = year.bills.map((bill, index) => {
    const { demand, reactive, other } = partsOf(bill);
    const cause = demand + reactive;
    const [label = '', ofYear] = bill.name.split(' ');
    return {
      label,
      year: index === 0 || label === 'Jan' ? ofYear : undefined,
      demand: cause === 0 ? 0 : demand + (other * demand) / cause,
      reactive: cause === 0 ? fromMinorUnits(bill.reactiveMinor, year.currency) : reactive + (other * reactive) / cause,
    };
  });
  return { currency: year.currency, bills };
}
