import { assumptionKeys, defaultSpread, type AssumptionKey, type MoneySpread } from '../../schemas/assumptions';
import type { PlanEconomics } from '../../schemas/plan-money';
import { assumptionWords } from '../ui/assumption-words';
import { typedNumber } from '../ui/typed-number';

/** Numbers of a plan's money that are typed by themselves. */
const figures = [
  'discountPercent',
  'escalationPercent',
  'horizonYears',
  'energyRisePercent',
  'demandRisePercent',
  'reactiveRisePercent',
  'fixedRisePercent',
  'upkeepGrowthPercent',
  'incentive',
  'taxPercent',
  'depreciationYears',
] as const;
type Figure = (typeof figures)[number];

const spreadKeys = Object.keys(defaultSpread) as (keyof MoneySpread)[];

/** The assumptions of a plan's money as they are typed; paths are those of `economicsInput`. */
export type EconomicsDraft = Record<Figure, string> & {
  spread: Record<keyof MoneySpread, string>;
  /** Both ends empty: fixed. */
  ranges: Record<AssumptionKey, { low: string; high: string }>;
};

const typed = (value: number | undefined) => (value === undefined ? '' : String(Math.round(value * 1e6) / 1e6));

const fromKeys = <Key extends string, Entry>(keys: readonly Key[], entryOf: (key: Key) => Entry) =>
  Object.fromEntries(keys.map((key) => [key, entryOf(key)])) as Record<Key, Entry>;

/** Stored assumptions in the form. */
export function economicsDraftOf(economics: PlanEconomics): EconomicsDraft {
  return {
    ...fromKeys(figures, (key) => typed(economics[key])),
    spread: fromKeys(spreadKeys, (key) => typed(economics.spread?.[key] ?? defaultSpread[key])),
    ranges: fromKeys(assumptionKeys, (key) => ({
      low: typed(economics.ranges?.[key]?.low),
      high: typed(economics.ranges?.[key]?.high),
    })),
  };
}

/** What the schema is asked to read. */
export function economicsToInput(draft: EconomicsDraft): unknown {
  const ends = assumptionKeys.flatMap((key) => {
    const { low, high } = draft.ranges[key];
    if (low.trim() === '' && high.trim() === '') return [];
    return [[key, { low: typedNumber(low), high: typedNumber(high) }] as const];
  });
  return {
    ...fromKeys(figures, (key) => typedNumber(draft[key])),
    spread: fromKeys(spreadKeys, (key) => typedNumber(draft.spread[key])),
    ranges: Object.fromEntries(ends),
  };
}

const spreadNames: Record<keyof MoneySpread, string> = {
  savingPercent: 'Spread of the saving, %',
  hoursPercent: 'Spread of the operating hours, %',
  workPercent: 'Spread of the work, %',
  upkeepPercent: 'Spread of the upkeep, %',
  energyRisePoints: 'Spread of the rise of energy charges, points',
  demandRisePoints: 'Spread of the rise of other charges, points',
};

/** Entries as text, with names, for comparing two versions. */
export function economicsEntries(draft: EconomicsDraft): Record<string, string> {
  const nameOf = (key: Figure) => (key === 'depreciationYears' ? 'Written off over' : assumptionWords[key].name);
  return {
    ...Object.fromEntries(figures.map((key) => [nameOf(key), draft[key]])),
    ...Object.fromEntries(spreadKeys.map((key) => [spreadNames[key], draft.spread[key]])),
    ...Object.fromEntries(
      assumptionKeys.map((key) => {
        const { low, high } = draft.ranges[key];
        return [`${assumptionWords[key].name}, range of the client`, low || high ? `${low} to ${high}` : 'fixed'];
      }),
    ),
  };
}

/** The plan's own value of each assumption as it stands typed; undefined where it is missing. */
export function ownTyped(
  key: AssumptionKey,
  money: { capitalCost: number | undefined; yearlyUpkeep: string; economics: EconomicsDraft },
): number | undefined {
  if (key === 'runsPercent' || key === 'savingPercent') return 100;
  if (key === 'capitalCost') return money.capitalCost;
  if (key === 'yearlyUpkeep') return typedNumber(money.yearlyUpkeep);
  const own = typedNumber(money.economics[key]);
  return own === undefined && (key === 'incentive' || key === 'upkeepGrowthPercent' || key === 'taxPercent') ? 0 : own;
}

/** Assumptions a client usually asks about, and how far either way they are moved. */
const usualRanges: Partial<Record<AssumptionKey, (own: number) => [number, number]>> = {
  escalationPercent: (own) => [own - 4, own + 4],
  runsPercent: () => [60, 120],
  capitalCost: (own) => [roundTo(own * 0.7, 500), roundTo(own * 1.5, 500)],
  discountPercent: (own) => [0, Math.max(15, own)],
};

const roundTo = (amount: number, step: number) => Math.round(amount / step) * step;

/** The usual range of an assumption round its own value; null where there is none. */
export function usualRange(key: AssumptionKey, own: number): { low: string; high: string } | null {
  const [low, high] = usualRanges[key]?.(own) ?? [0, 0];
  return low < high ? { low: typed(low), high: typed(high) } : null;
}
