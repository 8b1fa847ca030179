import { decimalsOf } from '../../units';
import type {
  ChargeDefinition,
  ChargeEntry,
  Expression,
  NumberPlace,
  QuantityEntry,
  Schedule,
  ScheduleText,
} from '../model';

/** A charge with its line's place and what it needs. */
export interface ChargePlan {
  charge: ChargeEntry;
  /** Place among all lines of the schedule. */
  line: number;
  /** Places of the lines a percentage, top-up or cap takes. */
  ofLines: number[];
  /** Places of the values its condition needs, and those it needs where it is charged; lines left out. */
  whenNeeds: number[];
  needs: number[];
  /** Places of the summed measures by which a `per` line is shared between pieces. */
  shareBy: number[];
  /** Unit of the last digit of its rounding: 0.01 of a rounding to 0.05. */
  finest: number;
}

/** A text laid out for pricing. */
export interface TextPlan {
  text: ScheduleText;
  /** By place among all lines. */
  chargeOfLine: (ChargePlan | undefined)[];
  quantityOfSlot: ReadonlyMap<number, QuantityEntry>;
  /** Quantities from top to bottom, each with the places of the values its formulas read. */
  quantities: { quantity: QuantityEntry; needs: number[] }[];
  /** Places of measures that hang on nothing but the intervals, the rates and the contract. */
  steady: ReadonlySet<number>;
}

/** Lays out a text. */
export function planText(schedule: Schedule, text: ScheduleText): TextPlan {
  const lines = new Map(schedule.lineOrder.map((name, line) => [name, line]));
  const quantityOfSlot = new Map(text.quantities.map((quantity) => [quantity.slot, quantity]));
  const lineSlots = new Set(schedule.lineOrder.map((name) => schedule.slots.get(name)));
  const chargeOfLine: (ChargePlan | undefined)[] = schedule.lineOrder.map(() => undefined);
  for (const charge of text.charges) {
    const line = lines.get(charge.name)!;
    const { definition } = charge;
    const placesOf = (expressions: Expression[]): number[] =>
      [...new Set(expressions.flatMap(({ slots }) => slots))].filter((slot) => !lineSlots.has(slot));
    chargeOfLine[line] = {
      charge,
      line,
      ofLines: 'of' in definition ? definition.of.map((name) => lines.get(name)!) : [],
      whenNeeds: charge.when ? placesOf([charge.when]) : [],
      needs: placesOf(expressionsOf(definition)),
      shareBy: definition.kind === 'per' ? sharedMeasures(definition.per, definition.unit, quantityOfSlot) : [],
      finest: Number(`1e-${decimalsOf(charge.rounding.step)}`),
    };
  }
  const quantities = text.quantities.map((quantity) => ({
    quantity,
    needs: [...new Set(expressionsOfQuantity(quantity).flatMap(({ slots }) => slots))],
  }));
  return { text, chargeOfLine, quantityOfSlot, quantities, steady: steadyMeasures(text, quantities) };
}

function steadyMeasures(text: ScheduleText, quantities: TextPlan['quantities']): Set<number> {
  const steady = quantities.filter(
    ({ quantity, needs }) => quantity.definition.kind === 'measure' && needs.every((slot) => isAlwaysKnown(text, slot)),
  );
  return new Set(steady.map(({ quantity }) => quantity.slot));
}

/** Whether a place is a contract input or rate that has a value in every period. */
function isAlwaysKnown(text: ScheduleText, slot: number): boolean {
  const input = text.contract.find((one) => one.slot === slot);
  if (input) return input.default !== undefined;
  const rate = text.rates.find((one) => one.slot === slot);
  return rate?.place.kind === 'same' && rate.place.expression.slots.every((one) => isAlwaysKnown(text, one));
}

/** Formulas of a charge that every piece evaluates; a rate by season or month counts with the one in force. */
export function expressionsOf(definition: ChargeDefinition): Expression[] {
  switch (definition.kind) {
    case 'amount':
      return inPlace(definition.amount);
    case 'per':
    case 'percent':
      return [
        ...(definition.per ? [definition.per] : []),
        ...definition.price.flatMap((tier) => [...(tier.to ? [tier.to] : []), ...inPlace(tier.rate)]),
      ];
    default:
      return inPlace(definition.to);
  }
}

/** Formulas in a number place. */
export function inPlace(place: NumberPlace): Expression[] {
  switch (place.kind) {
    case 'same':
      return [place.expression];
    case 'seasons':
      return place.bySeason;
    case 'months':
      return [...place.byMonth.values()];
  }
}

/** Formulas of a quantity. */
export function expressionsOfQuantity({ definition }: QuantityEntry): Expression[] {
  switch (definition.kind) {
    case 'measure':
      return definition.where ? [definition.expression, definition.where] : [definition.expression];
    case 'value':
    case 'formula':
    case 'past':
      return [definition.expression];
    case 'pick':
      return [definition.of, ...definition.steps.map((step) => step.value), definition.otherwise];
    case 'given':
      return [];
  }
}

/** Summed measures of a unit that a quantity rests on, followed through formulas and steps. */
function sharedMeasures(per: Expression, unit: string, quantities: ReadonlyMap<number, QuantityEntry>): number[] {
  const found = new Set<number>();
  const seen = new Set<number>();
  const follow = (slot: number): void => {
    const quantity = quantities.get(slot);
    if (!quantity || seen.has(slot)) return;
    seen.add(slot);
    const { definition } = quantity;
    if (definition.kind === 'measure' && definition.operation === 'sum' && quantity.unit === unit) found.add(slot);
    else if (definition.kind === 'formula' || definition.kind === 'pick') {
      for (const expression of expressionsOfQuantity(quantity)) expression.slots.forEach(follow);
    }
  };
  per.slots.forEach(follow);
  return [...found];
}
