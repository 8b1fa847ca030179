import { formatBillName, formatDate, formatMonth } from '../../components/ui/format';
import { addDays, addMonths, dayNumber } from '../../core/load';
import type { PricedBill } from '../../core/tariff';
import { fromMinorUnits, toMinorUnits } from '../../core/units';
import { asIfBase, asIfSeason, asIfText, baseOfPercent, quantitiesBehind } from './schedule-variants';
import { nameOf, worded, type CauseTarget, type Supposition } from './suppositions';
import type { TrialPricing } from './trial-pricing';

/** Rates of one season for the whole bill. */
export function otherSeasons(trial: TrialPricing, { index }: CauseTarget): Supposition[] {
  const seasons = trial.text(index).seasons?.names ?? [];
  return seasons.map((season) => ({
    kind: 'wrong-season',
    label: `${season} rate for the whole bill`,
    bill: () => trial.either(`season ${season}`, index, { schedule: asIfSeason(trial.basis.schedule, season) }),
  }));
}

/** Rates of another text of the schedule. */
export function otherVersions(trial: TrialPricing, { index }: CauseTarget): Supposition[] {
  const { schedule } = trial.basis;
  if (schedule.texts.length < 2) return [];
  return schedule.texts.map((text) => ({
    kind: 'wrong-version',
    label: `rates of ${text.note ? `${text.note}, in force from ${text.from}` : `the text in force from ${text.from}`}`,
    bill: () => trial.either(`text ${text.from}`, index, { schedule: asIfText(schedule, text) }),
  }));
}

interface KnownValue {
  month: string;
  value: number;
  /** Periods back from the bill in question: 1 is the one before it. */
  back: number;
}

/** What is known of a quantity before a bill: from the bills of the year, and what was told of earlier months. */
function knownValues({ basis, priced }: TrialPricing, name: string, index: number): KnownValue[] {
  const fromBills = priced.slice(0, index).flatMap((bill, at): KnownValue[] => {
    const value = bill.quantities[name]?.value;
    return value === undefined ? [] : [{ month: formatBillName(bill.period), value, back: index - at }];
  });
  const told = basis.history?.[name] ?? [];
  const fromHistory = told.map((value, at): KnownValue => {
    const monthsBack = told.length - at;
    return { month: formatMonth(addMonths(basis.periods[0]!.from, -monthsBack)), value, back: index + monthsBack };
  });
  return [...fromHistory, ...fromBills];
}

/** A look-back that took another bill's value than the one it should. */
export function otherRatchets(trial: TrialPricing, { index, lineId }: CauseTarget): Supposition[] {
  if (lineId === null) return [];
  return quantitiesBehind(trial.text(index), lineId).flatMap((quantity) => {
    const { definition } = quantity;
    const [name, ...more] = definition.kind === 'past' ? definition.expression.names : [];
    if (definition.kind !== 'past' || name === undefined || more.length > 0) return [];
    const used = trial.priced[index]!.quantities[quantity.name]?.value;
    const values = knownValues(trial, name, index).filter(({ value }) => value !== used);
    return values.map(({ month, value, back }): Supposition => {
      const left = definition.over.kind === 'last' && back > definition.over.count;
      return {
        kind: 'ratchet-not-released',
        label: `${nameOf(quantity)}: ${worded(value, quantity.unit)} of ${month} ${left ? 'still counted' : 'counted'}`,
        bill: () => trial.withQuantities(index, { [quantity.name]: value }),
      };
    });
  });
}

/** A percentage (a tax, a credit) taken of other lines. */
export function otherBases(trial: TrialPricing, { index, lineId }: CauseTarget): Supposition[] {
  if (lineId === null) return [];
  const text = trial.text(index);
  const { of } = baseOfPercent(text, lineId);
  const at = text.charges.findIndex((charge) => charge.name === lineId);
  if (of.length === 0) return [];
  const above = text.charges.slice(0, at).map(({ name, label }) => ({ name, label: label ?? name }));
  const changed = above.map(({ name, label }) =>
    of.includes(name)
      ? { label: `taken without ${label}`, of: of.filter((one) => one !== name) }
      : { label: `taken of ${label} too`, of: [...of, name] },
  );
  const all = { label: 'taken of everything above it', of: above.map(({ name }) => name) };
  return [all, ...changed]
    .filter((base) => base.of.length > 0)
    .map((base) => ({
      kind: 'wrong-base',
      label: base.label,
      bill: () =>
        trial.either(`base ${lineId} ${base.of.join()}`, index, {
          schedule: asIfBase(trial.basis.schedule, lineId, base.of),
        }),
    }));
}

/** A bill with one line's amount replaced. */
function withAmount(bill: PricedBill, lineId: string, amount: number): PricedBill {
  const lines = bill.lines.map((line) => (line.id === lineId ? { ...line, amount } : line));
  return { ...bill, lines, total: lines.reduce((sum, line) => sum + line.amount, 0) };
}

/** A month of 30 or 31 days or a twelfth of a year instead of the bill's own length, or the other way round. */
function otherShares(trial: TrialPricing, { index, lineId }: CauseTarget): Supposition[] {
  const bill = trial.priced[index]!;
  const line = bill.lines.find((one) => one.id === lineId);
  if (!line || (line.group !== 'fixed' && line.group !== 'demand')) return [];
  const { from, to } = bill.period;
  const days = dayNumber(to) - dayNumber(from);
  const months = [
    { length: 30, words: '30 days' },
    { length: 31, words: '31 days' },
    { length: 365 / 12, words: 'a twelfth of a year' },
  ];
  const share = (label: string, factor: number): Supposition => ({
    kind: 'wrong-period',
    label,
    bill: () => withAmount(bill, line.id, roundedTo(line.amount * factor, bill.currency)),
  });
  return [
    ...months.map(({ length, words }) => share(`${days} days charged against a month of ${words}`, days / length)),
    ...months.map(({ length, words }) => share(`charged for ${words} instead of ${days}`, length / days)),
    ...[days - 1, days + 1].map((other) => share(`charged for ${other} days instead of ${days}`, other / days)),
  ];
}

const roundedTo = (amount: number, currency: string) => fromMinorUnits(toMinorUnits(amount, currency), currency);

/** A meter read, or its reading taken, a day early or late. */
function otherReadingDays(trial: TrialPricing, { index }: CauseTarget): Supposition[] {
  if (!trial.basis.load) return [];
  const { from, to } = trial.basis.periods[index]!;
  const moved = [
    { from, to: addDays(to, 1), words: 'read a day late' },
    { from, to: addDays(to, -1), words: 'read a day early' },
    { from: addDays(from, -1), to, words: 'begun a day early' },
    { from: addDays(from, 1), to, words: 'begun a day late' },
  ];
  return moved.map(({ words, ...period }) => ({
    kind: 'wrong-period',
    label: `${words}: ${formatDate(period.from)} to ${formatDate(addDays(period.to, -1))}`,
    bill: () => trial.alone(`period ${period.from} ${period.to}`, index, { period }),
  }));
}

/** Another length of the billing period. */
export const otherPeriods = (trial: TrialPricing, target: CauseTarget): Supposition[] => [
  ...otherShares(trial, target),
  ...otherReadingDays(trial, target),
];
