import { formatBillName } from '../../components/ui/format';
import { addDays, localDateStartMs } from '../../core/load';
import type { PricedBill, PricedLine, Schedule } from '../../core/tariff';
import { toMinorUnits } from '../../core/units';
import type { Finding, LinePair, PricedYear, ReconciledBill } from '../../schemas/pricing';
import { notesOfBills } from './bill-notes';
import { everythingPrinted, faultsOf } from './blame';
import { causesOf } from './causes';
import { energyDifference } from './energy-check';
import { findingOfArithmetic, findingOfEnergy, findingOfFault, findingOfTotal, type Found } from './findings';
import { matchLines } from './line-matching';
import { priceOn, type ReconcileBasis } from './price-basis';
import { baseOfPercent, textOn } from './schedule-variants';
import { TrialPricing } from './trial-pricing';

/**
 * Prices a year, lays it beside what was billed and tries to find out why they differ.
 *
 * @throws {PriceError} where a bill cannot be priced
 */
export function reconcileYear(basis: ReconcileBasis): PricedYear {
  const priced = priceOn(basis, basis.schedule);
  const bills = priced.map((one, index) => reconcileBill(basis, one, index));
  const trial = new TrialPricing(basis, priced);
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
    toleranceMinor: basis.toleranceMinor,
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

function reconcileBill(basis: ReconcileBasis, priced: PricedBill, index: number): ReconciledBill {
  const bill = basis.bills[index]!;
  const minorOf = (line: PricedLine) => toMinorUnits(line.amount, priced.currency);
  const pairs = matchLines(priced.lines, bill.lines, basis.lineMatches, minorOf).map((match): LinePair => {
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

/** Causes that a demand set by missing readings could imitate: they say how something was measured, not on which text. */
const doubtful = new Set<Finding['kind']>([
  'unexplained',
  'wrong-quantity',
  'wrong-window',
  'wrong-rounding',
  'wrong-period',
  'wrong-multiplier',
]);

/** Where a ratchet may stand on readings that are missing, a difference without a firm cause is none: the bill is not compared. */
function withoutGuesses(bill: ReconciledBill, found: Found[], missingBefore: number): Found[] {
  const isGuess = missingBefore > 0 && found.some(({ kind }) => doubtful.has(kind));
  if (bill.missingReadings > 0 || !isGuess) return found;
  bill.missingReadings = missingBefore;
  bill.differenceMinor = null;
  return found.filter(({ kind }) => kind === 'bill-arithmetic');
}

/** Readings missing in a bill's period; none on the printed route. */
function missingWithin({ load, schedule }: ReconcileBasis, { from, to }: { from: string; to: string }): number {
  if (!load) return 0;
  const indexOf = (date: string) =>
    Math.round((localDateStartMs(date, schedule.timeZone) - load.startMs) / (load.stepMinutes * 60_000));
  return load.quality.subarray(Math.max(0, indexOf(from)), indexOf(to)).filter((mark) => mark === 2).length;
}

function findingsOfBill(basis: ReconcileBasis, bill: ReconciledBill, index: number, trial: TrialPricing): Found[] {
  const arithmetic = findingOfArithmetic(bill, basis.toleranceMinor);
  // Without all readings the price is too low: to call the difference over-billed would accuse the utility falsely.
  if (bill.missingReadings > 0) return arithmetic ? [arithmetic] : [];
  const found =
    bill.bill.lines.length === 0 ? findingsOfTotal(bill, index, trial) : findingsOfLines(bill, index, trial);
  return [...found, ...(arithmetic ? [arithmetic] : []), ...findingsOfEnergy(basis, bill, found)];
}

function findingsOfTotal(bill: ReconciledBill, index: number, trial: TrialPricing): Found[] {
  const tolerance = trial.basis.toleranceMinor * bill.pairs.length;
  if (bill.billedMinor === null || Math.abs(bill.differenceMinor ?? 0) <= tolerance) return [];
  return [findingOfTotal(bill, causesOf(trial, { index, lineId: null, billedMinor: bill.billedMinor }))];
}

function findingsOfLines(bill: ReconciledBill, index: number, trial: TrialPricing): Found[] {
  const text = textOn(trial.basis.schedule, addDays(bill.bill.to, -1));
  const baseOf = (lineId: string) => {
    const { of, isAllAbove } = baseOfPercent(text, lineId);
    return isAllAbove ? [...of, everythingPrinted] : of;
  };
  return faultsOf(bill.pairs, baseOf, trial.basis.toleranceMinor).map((fault) => {
    const { line, billedMinor } = fault.pair;
    // A fault on top of followed ones must be explained without them.
    const target = (fault.pair.pricedMinor ?? 0) + fault.ownMinor;
    const canTry = line !== null && billedMinor !== null;
    return findingOfFault(bill, fault, canTry ? causesOf(trial, { index, lineId: line.id, billedMinor: target }) : []);
  });
}

/** Energy printed and metered differ: a finding of its own unless one in an energy line tells of it already. */
function findingsOfEnergy({ load, schedule }: ReconcileBasis, bill: ReconciledBill, found: Found[]): Found[] {
  const energyLines = new Set(bill.priced.lines.filter(({ group }) => group === 'energy').map(({ id }) => id));
  if (!load || found.some(({ lineId }) => lineId !== null && energyLines.has(lineId))) return [];
  const energy = energyDifference(bill, textOn(schedule, addDays(bill.bill.to, -1)));
  return energy ? [findingOfEnergy(bill, energy)] : [];
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

function readingsOf({ load }: ReconcileBasis): PricedYear['readings'] {
  if (!load) return { present: 0, expected: 0 };
  return { present: load.quality.filter((mark) => mark !== 2).length, expected: load.quality.length };
}

/** Hours of use are told by the schedule's clock: a site under another one wants a look. */
function clockNote({ schedule, siteTimeZone }: ReconcileBasis): string | null {
  if (schedule.timeZone === siteTimeZone) return null;
  return `The schedule tells hours and days by the clock of ${schedule.timeZone}, the site lies under that of ${siteTimeZone}. Check that it is the schedule of this site; bills are priced by the schedule's clock.`;
}
