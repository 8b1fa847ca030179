import { tierFields } from '../grammar/charges';
import { fieldNames } from '../grammar/types';
import type { Tier } from '../model';
import type { RawExpression } from './expressions';
import { asMap, checkFields, checkTornValues } from './fields';
import { checkRateUnit, checkTierEnd } from './rate-units';
import { bindPlace, expressionsIn, readPlace, type RawPlace } from './places';
import type { TextContext } from './text-reader';
import { valueOf, type ListTree, type MapTree, type Tree } from './tree';

/** A price parsed: its formulas, for the families they use, and its tiers for a window. */
export interface RawPrice {
  expressions: RawExpression[];
  bind(window: string | undefined): Tier[];
}

/** `rate`, or `tiers`; one rate is one tier without an end. */
export function readPrice(map: MapTree, per: RawExpression | undefined, context: TextContext): RawPrice | undefined {
  const { problems, reader, seasons, scope } = context;
  const rateTree = valueOf(map, 'rate');
  const tiersTree = valueOf(map, 'tiers');
  const family = per?.families[0];
  const windows = family === undefined ? undefined : scope.families.get(family)?.windows;
  if ((rateTree === undefined) === (tiersTree === undefined)) {
    problems.add(map, rateTree ? 'says both rate and tiers.' : 'has no rate.', 'Say exactly one of rate, tiers.');
    return undefined;
  }
  if (rateTree) {
    const rate = readPlace(rateTree, reader, { seasons, windows });
    const fits = rate && (isPercent(map) || !per || checkRateUnit(rate, per, context));
    return fits ? priceOf([{ rate }], context) : undefined;
  }
  if (!per) {
    problems.add(tiersTree!, 'tiers need a quantity.', 'Add per: and its name.');
    return undefined;
  }
  return readTiers(tiersTree!, { per, windows, isPercent: isPercent(map) }, context);
}

/** A percentage's rate is percent, whatever it is taken per. */
function isPercent(map: MapTree): boolean {
  return valueOf(map, 'percentOf') !== undefined;
}

interface Slices {
  per: RawExpression;
  windows: string[] | undefined;
  isPercent: boolean;
}

interface RawTier {
  to?: RawExpression;
  rate: RawPlace;
}

function priceOf(tiers: RawTier[], { reader }: TextContext): RawPrice {
  return {
    expressions: tiers.flatMap((tier) => [...(tier.to ? [tier.to] : []), ...expressionsIn(tier.rate)]),
    bind: (window) =>
      tiers.map((tier) => ({
        to: tier.to && reader.bind(tier.to, window),
        rate: bindPlace(tier.rate, window, reader),
      })),
  };
}

function readTiers(tree: Tree, slices: Slices, context: TextContext): RawPrice | undefined {
  const { problems } = context;
  const items = tree.kind === 'list' ? (tree as ListTree).items : [];
  if (items.length === 0) {
    problems.add(tree, 'is not a list of tiers.', 'Write [ { to: 1000, rate: 0.08 }, { rate: 0.06 } ].');
    return undefined;
  }
  const tiers: RawTier[] = [];
  for (const [i, item] of items.entries()) {
    const tier = readTier(item, i === items.length - 1, slices, context);
    if (!tier) return undefined;
    tiers.push(tier);
  }
  const numbers = tiers.flatMap((tier) => (tier.to?.formula.kind === 'number' ? [tier.to.formula.value] : []));
  if (numbers.some((number, i) => i > 0 && number <= numbers[i - 1]!)) {
    problems.add(tree, 'the upper ends of the tiers do not rise.', 'Write them from the lowest to the highest.');
    return undefined;
  }
  return priceOf(tiers, context);
}

function readTier(
  item: Tree,
  isLast: boolean,
  { per, windows, isPercent: isOfPercent }: Slices,
  context: TextContext,
): RawTier | undefined {
  const { problems, reader, seasons } = context;
  const map = asMap(item, problems, 'Write { to: 1000, rate: 0.08 }.');
  if (!map || checkTornValues(map, problems) || !checkFields(map, fieldNames(tierFields), 'a tier', problems))
    return undefined;
  const toTree = valueOf(map, 'to');
  const rateTree = valueOf(map, 'rate');
  if (isLast && toTree) {
    problems.add(map, 'the last tier has an upper end.', 'Leave out "to", so that nothing goes unpriced.');
    return undefined;
  }
  if (!isLast && !toTree) {
    problems.add(map, 'a tier before the last has no upper end.', 'Add to: and the limit.');
    return undefined;
  }
  if (!rateTree) {
    problems.add(map, 'has no rate.', 'Add rate:.');
    return undefined;
  }
  const rate = readPlace(rateTree, reader, { seasons, windows });
  const to = toTree && reader.parse(toTree);
  if (!rate || (toTree && !to)) return undefined;
  const fits = (isOfPercent || checkRateUnit(rate, per, context)) && (!to || checkTierEnd(to, per, context));
  return fits ? { rate, to } : undefined;
}
