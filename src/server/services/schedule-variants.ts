import type { ChargeEntry, Expression, NumberPlace, QuantityEntry, Schedule, ScheduleText } from '../../core/tariff';

/** The text in force on a local date. */
export function textOn(schedule: Schedule, date: string): ScheduleText {
  return schedule.texts.findLast((text) => text.from <= date) ?? schedule.texts[0]!;
}

/** The schedule as if one of its texts had always held. */
export function asIfText(schedule: Schedule, text: ScheduleText): Schedule {
  return { ...schedule, texts: [{ ...text, from: schedule.texts[0]!.from }] };
}

/** The schedule as if every day had the rates of one season; windows and look-backs keep their own seasons. */
export function asIfSeason(schedule: Schedule, season: string): Schedule {
  return { ...schedule, texts: schedule.texts.map((text) => withSeason(text, season)) };
}

function withSeason(text: ScheduleText, season: string): ScheduleText {
  const index = text.seasons?.names.indexOf(season) ?? -1;
  if (index < 0) return text;
  const fix = (place: NumberPlace): NumberPlace =>
    place.kind === 'seasons' ? { kind: 'same', expression: place.bySeason[index]! } : place;
  return {
    ...text,
    rates: text.rates.map((rate) => ({ ...rate, place: fix(rate.place) })),
    charges: text.charges.map((charge) => fixCharge(charge, fix)),
    dependsOnSeason: false,
  };
}

function fixCharge(charge: ChargeEntry, fix: (place: NumberPlace) => NumberPlace): ChargeEntry {
  const { definition } = charge;
  switch (definition.kind) {
    case 'amount':
      return { ...charge, definition: { ...definition, amount: fix(definition.amount) } };
    case 'per':
    case 'percent': {
      const price = definition.price.map((tier) => ({ ...tier, rate: fix(tier.rate) }));
      return { ...charge, definition: { ...definition, price } };
    }
    default:
      return { ...charge, definition: { ...definition, to: fix(definition.to) } };
  }
}

/** The schedule with one quantity of every text changed. */
function withQuantity(schedule: Schedule, name: string, change: (quantity: QuantityEntry) => QuantityEntry): Schedule {
  const changed = (text: ScheduleText) =>
    text.quantities.map((quantity) => (quantity.name === name ? change(quantity) : quantity));
  return { ...schedule, texts: schedule.texts.map((text) => ({ ...text, quantities: changed(text) })) };
}

/** The schedule as if demand were the mean of so many minutes. */
export function asIfDemandWindow(schedule: Schedule, minutes: number): Schedule {
  return { ...schedule, texts: schedule.texts.map((text) => ({ ...text, demandWindow: { minutes } })) };
}

/** The schedule as if a measure were taken in another window of the clock; without one, at all hours. */
export function asIfMeasuredIn(schedule: Schedule, name: string, window: string | undefined): Schedule {
  return withQuantity(schedule, name, (quantity) => {
    if (quantity.definition.kind !== 'measure') return quantity;
    const { window: _own, ...definition } = quantity.definition;
    return { ...quantity, definition: window === undefined ? definition : { ...definition, window } };
  });
}

/** The schedule as if a quantity were rounded otherwise; without a rounding, not at all. */
export function asIfRounded(schedule: Schedule, name: string, rounding: QuantityEntry['rounding']): Schedule {
  return withQuantity(schedule, name, ({ rounding: _own, ...quantity }) =>
    rounding ? { ...quantity, rounding } : quantity,
  );
}

/** The schedule as if a percentage were taken of other lines. */
export function asIfBase(schedule: Schedule, lineId: string, of: string[]): Schedule {
  const change = (charge: ChargeEntry): ChargeEntry =>
    charge.name === lineId && charge.definition.kind === 'percent'
      ? { ...charge, definition: { ...charge.definition, of, isAllAbove: false } }
      : charge;
  return { ...schedule, texts: schedule.texts.map((text) => ({ ...text, charges: text.charges.map(change) })) };
}

const placeExpressions = (place: NumberPlace): Expression[] => {
  if (place.kind === 'same') return [place.expression];
  return place.kind === 'seasons' ? place.bySeason : [...place.byMonth.values()];
};

function chargeExpressions({ when, definition }: ChargeEntry): Expression[] {
  const all = when ? [when] : [];
  if (definition.kind === 'amount') return [...all, ...placeExpressions(definition.amount)];
  if (!('price' in definition)) return [...all, ...placeExpressions(definition.to)];
  const tiers = definition.price.flatMap((tier) => [...(tier.to ? [tier.to] : []), ...placeExpressions(tier.rate)]);
  return [...all, ...(definition.per ? [definition.per] : []), ...tiers];
}

function quantityNames({ definition }: QuantityEntry): string[] {
  switch (definition.kind) {
    case 'given':
      return [];
    case 'value':
      return [definition.at, ...definition.expression.names];
    case 'pick':
      return [definition.of, definition.otherwise, ...definition.steps.map((step) => step.value)].flatMap(
        (one) => one.names,
      );
    case 'measure':
      return [...definition.expression.names, ...(definition.where?.names ?? [])];
    default:
      return definition.expression.names;
  }
}

/** Quantities a line rests on, directly or through others, nearest first. */
export function quantitiesBehind(text: ScheduleText, lineId: string): QuantityEntry[] {
  const charge = text.charges.find((one) => one.name === lineId);
  if (!charge) return [];
  const quantities = new Map(text.quantities.map((quantity) => [quantity.name, quantity]));
  const rates = new Map(text.rates.map((rate) => [rate.name, rate]));
  const found = new Set<QuantityEntry>();
  const queue = chargeExpressions(charge).flatMap((expression) => expression.names);
  const seen = new Set<string>();
  for (let name = queue.shift(); name !== undefined; name = queue.shift()) {
    if (seen.has(name)) continue;
    seen.add(name);
    const quantity = quantities.get(name);
    const rate = rates.get(name);
    if (quantity) {
      found.add(quantity);
      queue.push(...quantityNames(quantity));
    } else if (rate) queue.push(...placeExpressions(rate.place).flatMap((expression) => expression.names));
  }
  return [...found];
}

/** Lines a percentage is taken of, and whether of all that stands above it; none for any other line. */
export function baseOfPercent(text: ScheduleText, lineId: string): { of: string[]; isAllAbove: boolean } {
  const definition = text.charges.find((one) => one.name === lineId)?.definition;
  if (definition?.kind !== 'percent') return { of: [], isAllAbove: false };
  return { of: definition.of, isAllAbove: definition.isAllAbove };
}
