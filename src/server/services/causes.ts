import { formatBillName, formatMonth } from '../../components/ui/format';
import { addMonths } from '../../core/load';
import { PriceError, priceQuantities, type PricedBill, type QuantityEntry, type Schedule } from '../../core/tariff';
import { toMinorUnits, wordNumber } from '../../core/units';
import { lineToleranceMinor, type FindingKind, type TriedCause } from '../../schemas/pricing';
import { wordsOfName } from '../presenters/schedule';
import type { PricingBasis } from './pricing';
import { asIfSeason, asIfText, quantitiesBehind, textOn } from './schedule-variants';

/** The amount a cause must explain: one line of a bill, or its total where no lines are printed. */
export interface CauseTarget {
  index: number;
  lineId: string | null;
  billedMinor: number;
}

interface KnownValue {
  month: string;
  value: number;
  /** Periods back from the bill in question: 1 is the one before it. */
  back: number;
}

const nameOf = (quantity: QuantityEntry) => quantity.label ?? wordsOfName(quantity.name);
const worded = (value: number, unit: string) =>
  `${wordNumber(Math.round(value * 1000) / 1000)}${unit ? ` ${unit}` : ''}`;

/** Tries the likely causes of a difference by pricing with them; remembers years it has priced. */
export class CauseTrial {
  private readonly years = new Map<string, PricedBill[] | null>();

  constructor(
    private readonly basis: PricingBasis,
    private readonly priced: PricedBill[],
    private readonly priceYear: (schedule: Schedule) => PricedBill[],
  ) {}

  /** Every cause tried, the best first. */
  causesOf(target: CauseTarget): TriedCause[] {
    const causes = [
      ...this.ratchets(target),
      ...this.seasons(target),
      ...this.versions(target),
      ...this.printed(target),
    ];
    // What fits stands first, the most telling kind before a mere quantity; what does not, by how near it comes.
    const fitting = causes.filter((cause) => cause.fits);
    const others = causes.filter((cause) => !cause.fits);
    return [...fitting, ...others.sort((a, b) => Math.abs(a.missMinor) - Math.abs(b.missMinor))];
  }

  private amountMinor(bill: PricedBill | undefined, { lineId }: CauseTarget): number | null {
    if (!bill) return null;
    const amount = lineId === null ? bill.total : bill.lines.find((line) => line.id === lineId)?.amount;
    return amount === undefined ? null : toMinorUnits(amount, bill.currency);
  }

  /** A cause, unless it cannot be priced or changes nothing. */
  private cause(kind: FindingKind, label: string, bill: PricedBill | undefined, target: CauseTarget): TriedCause[] {
    const minor = this.amountMinor(bill, target);
    if (minor === null || minor === this.amountMinor(this.priced[target.index], target)) return [];
    const missMinor = target.billedMinor - minor;
    return [{ kind, label, missMinor, fits: Math.abs(missMinor) <= lineToleranceMinor }];
  }

  private text({ index }: CauseTarget) {
    return textOn(this.basis.schedule, this.basis.periods[index]!.from);
  }

  private year(key: string, schedule: Schedule): PricedBill[] | null {
    const known = this.years.get(key);
    if (known !== undefined) return known;
    const year = priceOrNull(() => this.priceYear(schedule));
    this.years.set(key, year);
    return year;
  }

  private seasons(target: CauseTarget): TriedCause[] {
    const seasons = this.text(target).seasons?.names ?? [];
    return seasons.flatMap((season) => {
      const year = this.year(`season ${season}`, asIfSeason(this.basis.schedule, season));
      return this.cause('wrong-season', `${season} rate for the whole bill`, year?.[target.index], target);
    });
  }

  private versions(target: CauseTarget): TriedCause[] {
    const { schedule } = this.basis;
    if (schedule.texts.length < 2) return [];
    return schedule.texts.flatMap((text) => {
      const year = this.year(`text ${text.from}`, asIfText(schedule, text));
      const name = text.note ? `${text.note}, in force from ${text.from}` : `the text in force from ${text.from}`;
      return this.cause('wrong-version', `rates of ${name}`, year?.[target.index], target);
    });
  }

  private ratchets(target: CauseTarget): TriedCause[] {
    if (target.lineId === null) return [];
    return quantitiesBehind(this.text(target), target.lineId).flatMap((quantity) => {
      const { definition } = quantity;
      const [name, ...more] = definition.kind === 'past' ? definition.expression.names : [];
      if (definition.kind !== 'past' || name === undefined || more.length > 0) return [];
      const used = this.priced[target.index]!.quantities[quantity.name]?.value;
      const values = this.knownValues(name, target.index).filter(({ value }) => value !== used);
      return values.flatMap(({ month, value, back }) => {
        const left = definition.over.kind === 'last' && back > definition.over.count;
        const label = `${nameOf(quantity)}: ${worded(value, quantity.unit)} of ${month} ${left ? 'still counted' : 'counted'}`;
        const bill = this.reprice(target.index, { [quantity.name]: value });
        return this.cause('ratchet-not-released', label, bill, target);
      });
    });
  }

  /** What is known of a quantity before a bill: from the bills of the year, and what was told of earlier months. */
  private knownValues(name: string, index: number): KnownValue[] {
    const { periods, history } = this.basis;
    const fromBills = this.priced.slice(0, index).flatMap((bill, at): KnownValue[] => {
      const value = bill.quantities[name]?.value;
      return value === undefined ? [] : [{ month: formatBillName(bill.period), value, back: index - at }];
    });
    const told = history?.[name] ?? [];
    const fromHistory = told.map((value, at): KnownValue => {
      const monthsBack = told.length - at;
      return { month: formatMonth(addMonths(periods[0]!.from, -monthsBack)), value, back: index + monthsBack };
    });
    return [...fromHistory, ...fromBills];
  }

  private printed(target: CauseTarget): TriedCause[] {
    if (target.lineId === null || this.basis.route === 'printed') return [];
    const printed = this.basis.bills[target.index]!.quantities;
    return quantitiesBehind(this.text(target), target.lineId).flatMap((quantity) => {
      const value = Object.hasOwn(printed, quantity.name) ? printed[quantity.name] : undefined;
      if (value === undefined) return [];
      const label = `${nameOf(quantity)} as the bill prints it, ${worded(value, quantity.unit)}`;
      return this.cause('wrong-quantity', label, this.reprice(target.index, { [quantity.name]: value }), target);
    });
  }

  /** One bill from its own quantities with some replaced; undefined where that does not reproduce the bill unchanged. */
  private reprice(index: number, replaced: Record<string, number>): PricedBill | undefined {
    const { schedule, contract, periods } = this.basis;
    const priced = this.priced[index]!;
    const text = textOn(schedule, periods[index]!.from);
    const measured = text.quantities.filter(
      ({ definition }) => definition.kind !== 'formula' && definition.kind !== 'pick',
    );
    const leaves = measured.flatMap(({ name }) => {
      const value = priced.quantities[name]?.value;
      return value === undefined ? [] : [[name, value] as const];
    });
    const price = (quantities: Record<string, number>) =>
      priceOrNull(() => priceQuantities(schedule, [{ ...periods[index]!, quantities }], { contract }))?.[0];
    const unchanged = price(Object.fromEntries(leaves));
    if (!unchanged || Math.abs(unchanged.total - priced.total) > 1e-6) return undefined;
    return price({ ...Object.fromEntries(leaves), ...replaced });
  }
}

function priceOrNull<Result>(work: () => Result): Result | null {
  try {
    return work();
  } catch (error) {
    if (error instanceof PriceError) return null;
    throw error;
  }
}
