import { formatMoney, formatNumber } from '../../components/ui/format';
import type { FindingView } from '../../schemas/finding';
import type { Finding, LinePair, PricedYear, ReconciledBill } from '../../schemas/pricing';
import type { LetterClaim } from '../../schemas/utility-letter';
import { whyLine } from '../presenters/why';

interface Found {
  finding: Finding;
  bill: ReconciledBill;
  pair: LinePair | undefined;
}

function foundIn(year: PricedYear, view: FindingView): Found | null {
  const finding = year.findings.find(({ letter }) => letter === view.letter);
  const bill = year.bills.find((one) => one.bill.id === finding?.billId);
  if (!finding || !bill) return null;
  const label = ({ billed }: LinePair) => billed.map((line) => line.label).join(' + ');
  const pair = bill.pairs.find((one) =>
    finding.lineId === null ? one.line === null && label(one) === finding.lineLabel : one.line?.id === finding.lineId,
  );
  return { finding, bill, pair };
}

/** What the difference comes to, with what follows from it. */
function amountWords({ lineAmountMinor, amountMinor }: Finding, currency: string): string {
  const money = (minor: number) => formatMoney(Math.abs(minor), currency);
  const side = lineAmountMinor > 0 ? 'too much' : 'too little';
  const more =
    amountMinor === lineAmountMinor ? '' : `, and ${money(amountMinor)} with the taxes and percentages on it`;
  return `${money(lineAmountMinor)} ${side}${more}`;
}

function explanation({ causes }: Finding, currency: string): string {
  const fitting = causes.filter(({ fits }) => fits);
  const [best] = fitting;
  if (!best) return 'No cause we tried explains the amount; please show us how it was worked out.';
  const exact = best.missMinor === 0 ? 'to the cent' : `to within ${formatMoney(Math.abs(best.missMinor), currency)}`;
  return `The amount billed comes out ${exact} if this is supposed: ${best.label}.`;
}

function lineWords({ finding, bill, pair }: Found): string {
  const { currency } = bill.bill;
  const money = (minor: number | null | undefined) => formatMoney(minor ?? 0, currency);
  const clause = pair?.line?.clause ? `clause ${pair.line.clause} of the schedule` : 'the schedule';
  if (finding.kind === 'line-not-billed') {
    return `By ${clause} the bill should carry ${finding.lineLabel}, ${money(pair?.pricedMinor)}; it carries none.`;
  }
  return `The bill charges ${money(pair?.billedMinor)} for ${finding.lineLabel}. By ${clause} it is ${money(pair?.pricedMinor)}: ${amountWords(finding, currency)}. ${explanation(finding, currency)}`;
}

function claimWords(found: Found): string {
  const { finding, bill } = found;
  const { currency, totalMinor, linesMinor } = bill.bill;
  const money = (minor: number) => formatMoney(minor, currency);
  switch (finding.kind) {
    case 'line-not-in-schedule':
      return `The bill charges ${money(found.pair?.billedMinor ?? finding.lineAmountMinor)} for ${finding.lineLabel}. We find no such charge in the schedule; please name the clause, or credit it.`;
    case 'bill-arithmetic':
      return `The lines of the bill add up to ${money(linesMinor)}; its total says ${money(totalMinor ?? 0)}, ${money(Math.abs(finding.amountMinor))} ${finding.amountMinor > 0 ? 'more' : 'less'}.`;
    case 'energy-differs': {
      const kwh = (value = 0) => `${formatNumber(Math.round(value))} kWh`;
      return `The bill prints ${kwh(finding.energy?.printedKwh)}; the meter's intervals of the period add up to ${kwh(finding.energy?.meteredKwh)}. Please say which the bill stands on, and correct the other.`;
    }
    default:
      return finding.lineId === null
        ? `The bill comes to ${money(bill.billedMinor ?? 0)}; by the schedule it is ${money(bill.pricedMinor)}. ${explanation(finding, currency)}`
        : lineWords(found);
  }
}

function workingOf({ bill, pair, finding }: Found, code: string): LetterClaim['working'] {
  if (!pair?.line) return [];
  const { steps } = whyLine(bill, pair.line, [finding], code);
  const toTheLine = steps.slice(0, steps.findIndex(({ kind }) => kind === 'equals') + 1);
  return toTheLine.map(({ label, working = '', result = '', source }) => ({
    label: source ? `${label}, ${source}` : label,
    working,
    result,
  }));
}

/** A finding as the letter puts it; null where the newest pricing finds it no more. */
export function claimOf(year: PricedYear, view: FindingView, code: string): LetterClaim | null {
  const found = foundIn(year, view);
  if (!found) return null;
  const { finding, bill, pair } = found;
  const isWhole = finding.lineId === null && !pair;
  return {
    findingId: view.id,
    version: view.version,
    letter: finding.letter,
    billName: bill.name,
    from: bill.bill.from,
    to: bill.bill.to,
    line: finding.lineLabel,
    title: finding.title,
    clause: pair?.line?.clause ?? null,
    billedMinor: isWhole ? bill.billedMinor : (pair?.billedMinor ?? null),
    scheduledMinor: isWhole
      ? finding.kind === 'bill-arithmetic'
        ? bill.bill.linesMinor
        : bill.pricedMinor
      : (pair?.pricedMinor ?? null),
    differenceMinor: finding.lineAmountMinor,
    amountMinor: finding.amountMinor,
    words: claimWords(found),
    working: workingOf(found, code),
  };
}
