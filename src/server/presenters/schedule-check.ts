import type { ExampleResult, PricedBill } from '../../core/tariff';
import { toMinorUnits } from '../../core/units';
import type { BillWords, ExampleView, MonthLine, MonthView } from '../../schemas/schedule-editor';
import { linesOf } from './text-lines';

/** A worked bill with what came out. */
export function presentExample(example: ExampleResult, text: string): ExampleView {
  const { title, source, path, fits, problem, figures, bill } = example;
  return {
    title,
    source: source ?? null,
    line: linesOf(text)(path),
    fits,
    problem: problem ?? null,
    figures,
    bill: bill ? billWords(bill) : null,
  };
}

function billWords({ currency, lines, total, reactiveCost }: PricedBill): BillWords {
  return {
    currency,
    lines: lines.map(({ id, label, amount, explanation }) => ({ id, label, amount, explanation })),
    total,
    reactiveCost,
  };
}

type Price = { bill: PricedBill } | { refused: string } | null;

const billOf = (price: Price) => (price && 'bill' in price ? price.bill : null);
const refusalOf = (price: Price) => (price && 'refused' in price ? price.refused : null);

/** A month under two texts, line by line, in the order of one's own bill. */
export function presentMonth(
  month: { code: string; name: string; billedMinor: number | null; currency: string },
  prices: { yours: Price; kept: Price },
): MonthView {
  const yours = billOf(prices.yours);
  const kept = billOf(prices.kept);
  const currency = yours?.currency ?? kept?.currency ?? month.currency;
  return {
    code: month.code,
    name: month.name,
    billedMinor: month.currency === currency ? month.billedMinor : null,
    currency,
    lines: linesOfBoth(yours, kept),
    keptMinor: kept && toMinorUnits(kept.total, kept.currency),
    yoursMinor: yours && toMinorUnits(yours.total, yours.currency),
    problem: refusalOf(prices.yours),
    keptProblem: refusalOf(prices.kept),
  };
}

function linesOfBoth(yours: PricedBill | null, kept: PricedBill | null): MonthLine[] {
  const ids = new Set([...(yours?.lines ?? []), ...(kept?.lines ?? [])].map((line) => line.id));
  return [...ids].map((id) => {
    const mine = yours?.lines.find((line) => line.id === id);
    const theirs = kept?.lines.find((line) => line.id === id);
    const shown = (mine ?? theirs)!;
    return {
      id,
      label: shown.label,
      quantity: shown.quantity ?? null,
      unit: shown.unit ?? null,
      keptMinor: theirs && kept ? toMinorUnits(theirs.amount, kept.currency) : null,
      yoursMinor: mine && yours ? toMinorUnits(mine.amount, yours.currency) : null,
      explanation: shown.explanation,
    };
  });
}
