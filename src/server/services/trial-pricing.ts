import { PriceError, priceQuantities, type PricedBill } from '../../core/tariff';
import { priceAlone, priceOn, type Change, type ReconcileBasis } from './price-basis';
import { textOn } from './schedule-variants';

const sameTotal = 1e-6;

/** Prices a year's bills under suppositions, and remembers what it has priced. */
export class TrialPricing {
  private readonly years = new Map<string, PricedBill[] | null>();
  private readonly bills = new Map<string, PricedBill | null>();
  private readonly leaves = new Map<number, Record<string, number> | null>();

  constructor(
    readonly basis: ReconcileBasis,
    readonly priced: PricedBill[],
  ) {}

  /** The text in force when a bill begins. */
  text(index: number) {
    return textOn(this.basis.schedule, this.basis.periods[index]!.from);
  }

  /** The year with a supposition in every bill; undefined where it cannot be priced. */
  throughout(key: string, index: number, { schedule, load }: Change): PricedBill | undefined {
    if (!this.years.has(key)) {
      const priced = () => priceOn(this.basis, schedule ?? this.basis.schedule, load ?? this.basis.load);
      this.years.set(key, priceOrNull(priced));
    }
    return this.years.get(key)?.[index];
  }

  /** One bill with a supposition in it alone; undefined where a bill by itself is not the bill of the year. */
  alone(key: string, index: number, change: Change): PricedBill | undefined {
    const price = (name: string, changed: Change) => {
      const place = `${index} ${name}`;
      if (!this.bills.has(place))
        this.bills.set(
          place,
          priceOrNull(() => priceAlone(this.basis, this.priced, index, changed)),
        );
      return this.bills.get(place) ?? undefined;
    };
    const unchanged = price('', {});
    if (!unchanged || Math.abs(unchanged.total - this.priced[index]!.total) > sameTotal) return undefined;
    return price(key, change);
  }

  /** One bill with a supposition in it alone, or else in the whole year. */
  either(key: string, index: number, change: Change): PricedBill | undefined {
    const unchanged = this.alone('', index, {});
    return unchanged ? this.alone(key, index, change) : this.throughout(key, index, change);
  }

  /** One bill from its own quantities with some replaced; undefined where that does not reproduce the bill unchanged. */
  withQuantities(index: number, replaced: Record<string, number>): PricedBill | undefined {
    if (!this.leaves.has(index)) this.leaves.set(index, this.leavesOf(index));
    const leaves = this.leaves.get(index);
    return leaves ? this.fromQuantities(index, { ...leaves, ...replaced }) : undefined;
  }

  /** What of a bill is measured, given or looked back at; null where that alone does not make the bill again. */
  private leavesOf(index: number): Record<string, number> | null {
    const priced = this.priced[index]!;
    const measured = this.text(index).quantities.filter(
      ({ definition }) => definition.kind !== 'formula' && definition.kind !== 'pick',
    );
    const leaves = Object.fromEntries(
      measured.flatMap(({ name }) => {
        const value = priced.quantities[name]?.value;
        return value === undefined ? [] : [[name, value] as const];
      }),
    );
    const again = this.fromQuantities(index, leaves);
    return again && Math.abs(again.total - priced.total) <= sameTotal ? leaves : null;
  }

  private fromQuantities(index: number, quantities: Record<string, number>): PricedBill | undefined {
    const { schedule, contract, periods } = this.basis;
    const price = () => priceQuantities(schedule, [{ ...periods[index]!, quantities }], { contract });
    return priceOrNull(price)?.[0];
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
