import { assumptionKeys, assumptionValue, type AssumptionKey, type PlanMoney } from '../../schemas/assumptions';
import type { EditionContent } from '../../schemas/edition';
import type { RankingData } from '../charts/ranking';
import { rankingChart } from '../plans/money-charts';
import { assumptionValueWords, assumptionWords } from '../ui/assumption-words';
import type { SumRow } from '../ui/ResultSums';

/**
 * The money of an edition's plan, as the core reckons it again. An edition frozen without its saving by operating hours
 * is taken to save in step with them.
 */
export function moneyOf({ plan, standing, money }: EditionContent): PlanMoney {
  const groups = Object.keys(plan.groupTotals) as (keyof typeof plan.groupTotals)[];
  const saving =
    money?.saving ??
    Object.fromEntries(groups.map((group) => [group, standing.groupTotals[group] - plan.groupTotals[group]]));
  const { capitalCost, yearlyUpkeep, economics } = plan;
  return { saving, savingWithHours: money?.savingWithHours ?? saving, capitalCost, yearlyUpkeep, economics };
}

/** What moves the result of an edition's plan; null in editions made without it. */
export function editionRanking(content: EditionContent): RankingData | null {
  const { money, currency, plan } = content;
  if (!money) return null;
  const { npv, simplePaybackYears } = plan.appraisal;
  const { ranking } = money;
  return rankingChart({ currency, money: moneyOf(content), npv, paybackYears: simplePaybackYears, ranking });
}

/** An assumption the consultant lets the client move. */
export interface MovableAssumption {
  key: AssumptionKey;
  own: number;
  low: number;
  high: number;
}

/** What may be moved, in the order of the list of assumptions. */
export function movableOf(money: PlanMoney): MovableAssumption[] {
  const { ranges = {} } = money.economics;
  return assumptionKeys.flatMap((key) => {
    const range = ranges[key];
    const own = assumptionValue(money, key);
    return range && own !== undefined ? [{ key, own, ...range }] : [];
  });
}

/** Assumptions that are not worth a line where they are nought. */
const saidOnlyIfAny = new Set<AssumptionKey>(['incentive', 'upkeepGrowthPercent']);
/** Assumptions that only a client moves. */
const onlyMoved = new Set<AssumptionKey>(['runsPercent', 'savingPercent']);

/** What is fixed, as rows of a table. */
export function fixedRows(money: PlanMoney, currency: string): SumRow[] {
  return assumptionKeys.flatMap((key) => {
    const own = assumptionValue(money, key);
    if (own === undefined || money.economics.ranges?.[key] || onlyMoved.has(key)) return [];
    if (own === 0 && saidOnlyIfAny.has(key)) return [];
    const value = key === 'taxPercent' && own === 0 ? 'before tax' : assumptionValueWords(key, own, currency);
    return [{ label: assumptionWords[key].name, value }];
  });
}

/** Step of a slider: round, and about two hundred of them from end to end where it is money. */
export function stepOf({ key, low, high }: MovableAssumption): number {
  const { money, step } = assumptionWords[key];
  if (!money) return step;
  const raw = (high - low) / 200;
  const power = 10 ** Math.floor(Math.log10(raw));
  return power * ([1, 2, 5].find((factor) => factor * power >= raw) ?? 10);
}
