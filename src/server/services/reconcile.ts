import { formatBillName } from '../../components/ui/format';
import { addDays, localDateStartMs } from '../../core/load';
import type { PricedBill, PricedLine, Schedule } from '../../core/tariff';
import { toMinorUnits } from '../../core/units';
import {
  lineToleranceMinor,
  type Finding,
  type LinePair,
  type PricedYear,
  type ReconciledBill,
} from '../../schemas/pricing';
import { notesOfBills } from './bill-notes';
import { everythingPrinted, faultsOf } from './blame';
import { CauseTrial } from './causes';
import { findingOfArithmetic, findingOfFault, findingOfTotal } from './findings';
import { matchLines } from './line-matching';
import type { PricingBasis } from './pricing';
import { baseOfPercent, textOn } from './schedule-variants';

/** Lays a priced year beside what was billed and tries to find out why they differ. */
export function reconcileYear(
  basis: PricingBasis,
  priced: PricedBill[],
  priceYear: (schedule: Schedule) => PricedBill[],
): PricedYear {
  const bills = priced.map((one, index) => reconcileBill(basis, one, index));
  const trial = new CauseTrial(basis, priced, priceYear);
  const findings: Finding[] = [];
  const missing = bills.map(({ missingReadings }) => missingReadings);
  const looksBack = lookBacksOf(basis.schedule).length > 0;
  bills.forEach((bill, index) => {
    const before = looksBack ? missing.slice(0, index).reduce((sum, count) => sum + count, 0) : 0;
    for (const found of withoutGuesses(bill, findingsOfBill(basis, bill, index, trial), before)) {
      const letter = letterOf(findings.length);
      findings.push({ ...found, letter });
      bill.findings.push(letter);
    }
  });
  return {
    route: basis.route,
    currency: basis.schedule.currency,
    timeZone: basis.schedule.timeZone,
    clock: clockNote(basis),
    bills,
    findings,
    totals: totalsOf(bills),
    lookBacks: lookBacksOf(basis.schedule),
    readings: readingsOf(basis),
    notes: notesOfBills(bills.map(({ name, priced }) => ({ name, notes: priced.notes }))),
  };
}

function reconcileBill(basis: PricingBasis, priced: PricedBill, index: number): ReconciledBill {
  const bill = basis.bills[index]!;
  const minorOf = (line: PricedLine) => toMinorUnits(line.amount, priced.currency);
  const pairs = matchLines(priced.lines, bill.lines, basis.choice.lineMatches, minorOf).map((match): LinePair => {
    const pricedMinor = match.line ? minorOf(match.line) : null;
    const billedMinor = match.billed.length > 0 ? match.billed.reduce((sum, line) => sum + line.amountMinor, 0) : null;
    return { ...match, pricedMinor, billedMinor, differenceMinor: (billedMinor ?? 0) - (pricedMinor ?? 0) };
  });
  const pricedMinor = toMinorUnits(priced.total, priced.currency);
  const billedMinor = bill.totalMinor ?? (bill.lines.length > 0 ? bill.linesMinor : null);
  const missingReadings = missingWithin(basis, bill);
  return {
    name: formatBillName(bill),
    bill,
    priced,
    pricedMinor,
    billedMinor,
    differenceMinor: billedMinor === null || missingReadings > 0 ? null : billedMinor - pricedMinor,
    missingReadings,
    reactiveMinor: toMinorUnits(priced.reactiveCost, priced.currency),
    pairs,
    findings: [],
  };
}

/** A difference nobody explains is none where a ratchet may stand on readings that are missing: the bill is not compared. */
function withoutGuesses<Found extends Pick<Finding, 'kind'>>(
  bill: ReconciledBill,
  found: Found[],
  missingBefore: number,
): Found[] {
  if (bill.missingReadings > 0 || missingBefore === 0 || !found.some(({ kind }) => kind === 'unexplained'))
    return found;
  bill.missingReadings = missingBefore;
  bill.differenceMinor = null;
  return found.filter(({ kind }) => kind === 'bill-arithmetic');
}

/** Readings missing in a bill's period; none on the printed route. */
function missingWithin({ load, schedule }: PricingBasis, { from, to }: { from: string; to: string }): number {
  if (!load) return 0;
  const indexOf = (date: string) =>
    Math.round((localDateStartMs(date, schedule.timeZone) - load.startMs) / (load.stepMinutes * 60_000));
  return load.quality.subarray(Math.max(0, indexOf(from)), indexOf(to)).filter((mark) => mark === 2).length;
}

function findingsOfBill(
  basis: PricingBasis,
  bill: ReconciledBill,
  index: number,
  trial: CauseTrial,
): Omit<Finding, 'letter'>[] {
  const arithmetic = findingOfArithmetic(bill);
  // Without all readings the price is too low: to call the difference over-billed would accuse the utility falsely.
  if (bill.missingReadings > 0) return arithmetic ? [arithmetic] : [];
  if (bill.bill.lines.length === 0) {
    const tolerance = lineToleranceMinor * bill.pairs.length;
    if (bill.billedMinor === null || Math.abs(bill.differenceMinor ?? 0) <= tolerance) return [];
    const causes = trial.causesOf({ index, lineId: null, billedMinor: bill.billedMinor });
    return [findingOfTotal(bill, causes)];
  }
  const text = textOn(basis.schedule, addDays(bill.bill.to, -1));
  const faults = faultsOf(bill.pairs, (lineId) => {
    const { of, isAllAbove } = baseOfPercent(text, lineId);
    return isAllAbove ? [...of, everythingPrinted] : of;
  });
  const found = faults.map((fault) => {
    const { line, billedMinor } = fault.pair;
    // A fault on top of followed ones must be explained without them.
    const target = (fault.pair.pricedMinor ?? 0) + fault.ownMinor;
    const canTry = line !== null && billedMinor !== null;
    return findingOfFault(bill, fault, canTry ? trial.causesOf({ index, lineId: line.id, billedMinor: target }) : []);
  });
  return arithmetic ? [...found, arithmetic] : found;
}

/** A ... Z, then AA, AB ... */
function letterOf(index: number): string {
  const letter = String.fromCharCode(65 + (index % 26));
  return index < 26 ? letter : letterOf(Math.floor(index / 26) - 1) + letter;
}

function totalsOf(bills: ReconciledBill[]): PricedYear['totals'] {
  const sum = (of: (bill: ReconciledBill) => number | null) =>
    bills.reduce((total, bill) => total + (of(bill) ?? 0), 0);
  return {
    pricedMinor: sum((bill) => bill.pricedMinor),
    billedMinor: sum((bill) => bill.billedMinor),
    differenceMinor: sum((bill) => bill.differenceMinor),
    reactiveMinor: sum((bill) => bill.reactiveMinor),
    billsWithoutTotal: bills.filter((bill) => bill.billedMinor === null).length,
  };
}

function lookBacksOf({ texts }: Schedule): string[] {
  const names = texts.flatMap(({ quantities }) =>
    quantities.filter((one) => one.definition.kind === 'past').map(({ name }) => name),
  );
  return [...new Set(names)];
}

function readingsOf({ load }: PricingBasis): PricedYear['readings'] {
  if (!load) return { present: 0, expected: 0 };
  return { present: load.quality.filter((mark) => mark !== 2).length, expected: load.quality.length };
}

/** Hours of use are told by the schedule's clock: a site under another one wants a look. */
function clockNote({ schedule, siteTimeZone }: PricingBasis): string | null {
  if (schedule.timeZone === siteTimeZone) return null;
  return `The schedule tells hours and days by the clock of ${schedule.timeZone}, the site lies under that of ${siteTimeZone}. Check that it is the schedule of this site; bills are priced by the schedule's clock.`;
}
