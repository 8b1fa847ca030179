import type { Expression, QuantityEntry, Schedule, ScheduleText } from '../model';
import { expressionsOf, expressionsOfQuantity, inPlace } from '../price/text-plan';

/** What a text's lines rest on, in the order of the text. */
export interface NeededQuantities {
  /** What a meter measures or the bill says: nothing above gives it. */
  measured: QuantityEntry[];
  /** Look backs. */
  past: QuantityEntry[];
}

/** Quantities the lines of a text need, followed through formulas, steps and look backs down to what is measured. */
export function neededQuantities(text: ScheduleText): NeededQuantities {
  const quantities = new Map(text.quantities.map((quantity) => [quantity.name, quantity]));
  const rates = new Map(text.rates.map((rate) => [rate.name, rate]));
  const seen = new Set<string>();
  const follow = (expressions: Expression[]): void => {
    for (const name of expressions.flatMap(({ names }) => names)) {
      if (seen.has(name)) continue;
      seen.add(name);
      const quantity = quantities.get(name);
      const rate = rates.get(name);
      if (rate) follow(inPlace(rate.place));
      if (!quantity) continue;
      if (quantity.definition.kind === 'value') followName(quantity.definition.at);
      follow(expressionsOfQuantity(quantity));
    }
  };
  const followName = (name: string): void => {
    const quantity = quantities.get(name);
    if (!quantity || seen.has(name)) return;
    seen.add(name);
    follow(expressionsOfQuantity(quantity));
  };
  for (const { definition, when } of text.charges) follow([...expressionsOf(definition), ...(when ? [when] : [])]);
  const needed = text.quantities.filter(({ name }) => seen.has(name));
  const isMeasured = ({ definition: { kind } }: QuantityEntry) =>
    kind === 'measure' || kind === 'value' || kind === 'given';
  return {
    measured: needed.filter(isMeasured),
    past: needed.filter(({ definition }) => definition.kind === 'past'),
  };
}

/** Texts of a schedule that hold on some day of a period, the earliest first. */
export function textsWithin({ texts }: Schedule, period: { from: string; to: string }): ScheduleText[] {
  const first = Math.max(
    0,
    texts.findLastIndex((text) => text.from <= period.from),
  );
  return texts.filter((text, index) => index >= first && text.from < period.to);
}
