import { textsWithin, neededQuantities } from '../compare/needs';
import type { Schedule } from '../model';
import { priceQuantities } from '../price/price-quantities';
import type { PricedBill } from '../types';
import { powerFactorAtUnity } from './ask';
import { assumeMonth } from './assume';
import type { AskedQuantity, AssumedMonth, ToldMonth } from './told';

/** Something a ratchet looks back at, asked as one number that stands for every earlier month. */
export interface AskedLookBack {
  /** Quantity or line looked at. */
  name: string;
  label?: string;
  unit: string;
  /** Months looked back at most. */
  months: number;
  value: number | null;
  basis: 'typed' | 'assumed';
}

/** A month priced from what was told and assumed. */
export interface TriedBill {
  bill: PricedBill;
  lookBacks: AskedLookBack[];
}

/**
 * Prices a month whose quantities are told or assumed.
 *
 * An earlier month nobody tells is taken to be like this one: the bill is that of a plant whose ratchets have settled.
 *
 * @param past  Values of every earlier month by what is looked back at; left out: the same as this month
 * @throws {PriceError} naming what is missing
 */
export function priceMonth(
  schedule: Schedule,
  { period, contract }: Pick<ToldMonth, 'period' | 'contract'>,
  { asked }: Pick<AssumedMonth, 'asked'>,
  past: Record<string, number>,
): TriedBill {
  const known = asked.flatMap(({ quantity, value }): [string, number][] =>
    value === null ? [] : [[quantity.name, value]],
  );
  const row = { ...period, quantities: Object.fromEntries(known) };
  const [alone] = priceQuantities(schedule, [row], { contract });
  const lookBacks = lookBacksOf(schedule, period).map((one): AskedLookBack => {
    const told = past[one.name];
    const own = alone!.quantities[one.name]?.value ?? alone!.lines.find(({ id }) => id === one.name)?.amount;
    return { ...one, value: told ?? own ?? null, basis: told === undefined ? 'assumed' : 'typed' };
  });
  const history = Object.fromEntries(
    lookBacks.flatMap(({ name, months, value }) =>
      value === null ? [] : [[name, Array.from({ length: months }, () => value)]],
    ),
  );
  const [bill] = priceQuantities(schedule, [row], { contract, history });
  return { bill: bill!, lookBacks };
}

/** Months a look back over a calendar year can reach. */
const monthsOfYear = 11;

/** What the lines of a period look back at, each once with the most months. */
function lookBacksOf(schedule: Schedule, period: ToldMonth['period']): Omit<AskedLookBack, 'value' | 'basis'>[] {
  const found = new Map<string, Omit<AskedLookBack, 'value' | 'basis'>>();
  for (const text of textsWithin(schedule, period)) {
    for (const { definition } of neededQuantities(text).past) {
      if (definition.kind !== 'past') continue;
      const reach = definition.over.kind === 'last' ? definition.over.count : monthsOfYear;
      for (const name of definition.expression.names) {
        const quantity = text.quantities.find((entry) => entry.name === name);
        const charge = text.charges.find((entry) => entry.name === name);
        if (!quantity && !charge) continue;
        const months = Math.max(reach, found.get(name)?.months ?? 0);
        const { label } = (quantity ?? charge)!;
        found.set(name, { name, label, unit: quantity ? quantity.unit : schedule.currency, months });
      }
    }
  }
  return [...found.values()];
}

/**
 * The same month at another average power factor, active energy and power unchanged.
 *
 * What the schedule measures keeps its part at unity power factor and shrinks above it as the assumption does, so that what was typed moves
 * with what was not: value = unity + (told - unity) (assumed there - unity) / (assumed here - unity).
 *
 * @param powerFactor  [unitless], (0, 1]
 * @throws {RangeError} where the month's own power factor is not known
 */
export function monthAtPowerFactor(
  schedule: Schedule,
  told: ToldMonth,
  month: AssumedMonth,
  powerFactor: number,
): Pick<AssumedMonth, 'asked'> {
  const { energyKwh, peakKw, kvarhPerKwh } = month;
  if (kvarhPerKwh === null) throw new RangeError('month must have a power factor, got none');
  const base = { energyKwh: energyKwh ?? undefined, peakKw: peakKw ?? undefined };
  const valuesAt = (factor: number) => {
    const there = assumeMonth(schedule, { ...told, quick: { ...base, powerFactor: factor }, typed: {} });
    return new Map(there.asked.map(({ quantity, value }) => [quantity.name, value]));
  };
  const here = valuesAt(Math.cos(Math.atan(kvarhPerKwh)));
  const [unity, there] = [valuesAt(1), valuesAt(powerFactor)];
  const kept = kvarhPerKwh === 0 ? 1 : Math.tan(Math.acos(powerFactor)) / kvarhPerKwh;
  const moved = ({ quantity: { name, unit, definition }, value }: AskedQuantity): number | null => {
    if (value === null) return null;
    if (definition.kind === 'given') {
      const atUnity = powerFactorAtUnity(definition, unit);
      if (atUnity !== null) return atUnity * powerFactor;
      return definition.unity === undefined ? value : definition.unity + (value - definition.unity) * kept;
    }
    const [own, bare, other] = [here.get(name), unity.get(name), there.get(name)];
    if (own == null || bare == null || other == null) return value;
    return Math.abs(own - bare) < 1e-9 ? value : bare + ((value - bare) * (other - bare)) / (own - bare);
  };
  return { asked: month.asked.map((one) => ({ ...one, value: moved(one) })) };
}
