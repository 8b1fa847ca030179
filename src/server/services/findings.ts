import { formatMoney } from '../../components/ui/format';
import { fromMinorUnits, wordNumber } from '../../core/units';
import type { EnergyDifference, Finding, FindingKind, ReconciledBill, TriedCause } from '../../schemas/pricing';
import type { Fault } from './blame';

/** A finding before it has its letter. */
export type Found = Omit<Finding, 'letter'>;

const titles: Record<FindingKind, string> = {
  'ratchet-not-released': 'Ratchet not released',
  'wrong-season': 'Wrong season',
  'wrong-version': 'Rates of another version',
  'wrong-quantity': 'Wrong quantity',
  'wrong-window': 'Demand read in the wrong window',
  'wrong-rounding': 'Rounded otherwise',
  'wrong-base': 'Taken of other lines',
  'wrong-period': 'Another length of the period',
  'wrong-multiplier': 'Wrong multiplier of the meter',
  'bill-arithmetic': 'The bill does not add up',
  'energy-differs': 'Energy differs from the meter',
  'line-not-in-schedule': 'Line not in the schedule',
  'line-not-billed': 'Line not billed',
  unexplained: 'Unexplained',
};

const mostCauses = 6;
const money = (minor: number, { bill }: ReconciledBill) => formatMoney(minor, bill.currency);

/** The finding of one line, with the cause that fits it to the cent. */
export function findingOfFault(bill: ReconciledBill, fault: Fault, causes: TriedCause[]): Found {
  const { pair, ownMinor, wholeMinor } = fault;
  const kind = kindOf(fault, causes);
  return {
    billId: bill.bill.id,
    lineId: pair.line?.id ?? null,
    lineLabel: labelOf(fault),
    kind,
    title: titles[kind],
    amountMinor: wholeMinor,
    lineAmountMinor: ownMinor,
    energy: null,
    sentence: sentenceOf(bill, fault, kind, causes),
    causes: causes.slice(0, mostCauses),
  };
}

const labelOf = ({ pair }: Fault) => pair.line?.label ?? pair.billed.map((line) => line.label).join(' + ');

function kindOf({ pair }: Fault, causes: TriedCause[]): FindingKind {
  if (!pair.line) return 'line-not-in-schedule';
  if (pair.billedMinor === null) return 'line-not-billed';
  return causes.find((cause) => cause.fits)?.kind ?? 'unexplained';
}

function sentenceOf(bill: ReconciledBill, fault: Fault, kind: FindingKind, causes: TriedCause[]): string {
  const { ownMinor, wholeMinor } = fault;
  const more = wholeMinor === ownMinor ? '' : `, ${money(Math.abs(wholeMinor), bill)} with what follows from it`;
  const head = `${bill.name}, ${labelOf(fault)}: ${money(Math.abs(ownMinor), bill)} ${ownMinor > 0 ? 'too much' : 'too little'}${more}.`;
  if (kind === 'line-not-in-schedule') {
    return `${head} The bill prints it, and no line of the schedule was found for it. Match it to one, or ask the utility.`;
  }
  if (kind === 'line-not-billed') return `${head} The schedule charges it, and the bill shows no such line.`;
  const [best] = causes;
  const fitting = causes.filter((cause) => cause.fits);
  if (fitting.length > 0) {
    const exact =
      fitting[0]!.missMinor === 0 ? 'to the cent' : `within ${money(Math.abs(fitting[0]!.missMinor), bill)}`;
    const others =
      fitting.length > 1
        ? ` ${fitting.length === 2 ? 'One more cause fits' : `${fitting.length - 1} more causes fit`} as well; see the causes tried.`
        : '';
    return `${head} Explained ${exact} by: ${fitting[0]!.label}.${others}`;
  }
  const tried = best
    ? `Of ${causes.length} causes tried the nearest, ${best.label}, misses by ${money(Math.abs(best.missMinor), bill)}.`
    : 'No cause could be tried on this line.';
  return `${head} ${tried}${impliedQuantity(bill, fault)}`;
}

/** What quantity the billed amount would stand for at the schedule's rate. */
function impliedQuantity(bill: ReconciledBill, { pair }: Fault): string {
  const { line, billedMinor } = pair;
  if (!line?.rate || !line.unit || line.quantity === undefined || billedMinor === null) return '';
  const implied = fromMinorUnits(billedMinor, bill.bill.currency) / line.rate;
  return ` At ${wordNumber(line.rate)} per ${line.unit} the amount stands for ${wordNumber(Math.round(implied * 100) / 100)} ${line.unit}, not ${wordNumber(line.quantity)}.`;
}

/** A bill whose printed lines do not add up to its printed total. */
export function findingOfArithmetic(bill: ReconciledBill, toleranceMinor: number): Found | null {
  const { totalMinor, linesMinor, lines, id } = bill.bill;
  if (totalMinor === null || lines.length === 0) return null;
  const amountMinor = totalMinor - linesMinor;
  if (Math.abs(amountMinor) <= toleranceMinor) return null;
  const side = amountMinor > 0 ? 'more' : 'less';
  return {
    billId: id,
    lineId: null,
    lineLabel: null,
    kind: 'bill-arithmetic',
    title: titles['bill-arithmetic'],
    amountMinor,
    lineAmountMinor: amountMinor,
    energy: null,
    sentence: `${bill.name}: the printed total is ${money(Math.abs(amountMinor), bill)} ${side} than its ${lines.length} lines, which add up to ${money(linesMinor, bill)}.`,
    causes: [],
  };
}

/** A bill that prints no lines and differs in its total. */
export function findingOfTotal(bill: ReconciledBill, causes: TriedCause[]): Found {
  const amountMinor = bill.differenceMinor ?? 0;
  const fitting = causes.find((cause) => cause.fits);
  const kind = fitting?.kind ?? 'unexplained';
  const why = fitting
    ? `Explained by: ${fitting.label}.`
    : 'The bill prints no lines, so the difference cannot be placed.';
  return {
    billId: bill.bill.id,
    lineId: null,
    lineLabel: null,
    kind,
    title: titles[kind],
    amountMinor,
    lineAmountMinor: amountMinor,
    energy: null,
    sentence: `${bill.name}: the total is ${money(Math.abs(amountMinor), bill)} ${amountMinor > 0 ? 'too much' : 'too little'}. ${why}`,
    causes: causes.slice(0, mostCauses),
  };
}

/** A bill that prints another energy than the meter's intervals add up to, though its amounts agree. */
export function findingOfEnergy(bill: ReconciledBill, energy: EnergyDifference): Found {
  const { printedKwh, meteredKwh, worthMinor } = energy;
  const kwh = (value: number) => `${wordNumber(Math.round(value))} kWh`;
  const off = printedKwh - meteredKwh;
  const worth =
    worthMinor === null
      ? ''
      : ` At the schedule's rates that is worth ${money(Math.abs(worthMinor), bill)}, which the bill did not charge: the claim is a bill that says what it stands on.`;
  return {
    billId: bill.bill.id,
    lineId: null,
    lineLabel: 'Energy as printed',
    kind: 'energy-differs',
    title: titles['energy-differs'],
    amountMinor: 0,
    lineAmountMinor: 0,
    energy,
    sentence: `${bill.name} prints ${kwh(printedKwh)}; the meter's intervals add up to ${kwh(meteredKwh)}, ${kwh(Math.abs(off))} ${off > 0 ? 'less' : 'more'}.${worth}`,
    causes: [],
  };
}
