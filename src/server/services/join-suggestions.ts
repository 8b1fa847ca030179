import { billsDemand, daysBetween, type BillView, type JoinSuggestion } from '../../schemas/bill';

/** Shorter than any month's bill; and as long as a month's bill gets. Both are choices of ours. [days] */
const shortDays = 26;
const monthDays = 38;

/**
 * Short bills that join on day by day within one month: likely the invoices of one bill.
 *
 * @param bills  In order, joined ones as one
 */
export function joinSuggestions(bills: BillView[]): JoinSuggestion[] {
  const suggestions: JoinSuggestion[] = [];
  let run: BillView[] = [];
  const close = () => {
    const [first] = run;
    const last = run.at(-1);
    if (first && last && run.length > 1) {
      const demandBilledOn = run.filter(billsDemand).length;
      suggestions.push({ ids: run.map(({ id }) => id), from: first.from, to: last.to, demandBilledOn });
    }
    run = [];
  };
  for (const bill of bills) {
    const before = run.at(-1);
    const meets = before?.to === bill.from && daysBetween(run[0]!.from, bill.to) <= monthDays;
    if (before && !meets) close();
    if (!bill.parts && bill.days < shortDays) run.push(bill);
    else close();
  }
  close();
  return suggestions;
}
