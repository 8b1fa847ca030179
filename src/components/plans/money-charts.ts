import type { RankedInput } from '../../core/economics';
import { investmentOf, type PlanMoney } from '../../schemas/assumptions';
import type { RankingData, RankingRow } from '../charts/ranking';
import { formatNumber } from '../ui/format';

/** What a ranking is worded from. */
export interface RankedMoney {
  currency: string;
  money: PlanMoney;
  npv: number;
  paybackYears: number | null;
  ranking: RankedInput[];
}

/** An input in words: its name, its unit, and the value a move gives it. */
function wording({ money, currency }: RankedMoney, input: RankedInput['input']) {
  const { saving, yearlyUpkeep, capitalCost } = money;
  const { growth } = investmentOf(money);
  const saved = Object.values(saving).reduce((sum, amount) => sum + amount, 0);
  const amount = (first: number) => (move: number) => formatNumber(first * move);
  const rise = (own: number) => (move: number) => formatNumber(100 * (own + move), { decimals: 1 });
  switch (input) {
    case 'saving':
      return { name: 'The calculated saving', unit: `${currency} a year`, words: amount(saved) };
    case 'hours':
      return { name: 'Operating hours', unit: '% of last year', words: amount(100) };
    case 'work':
      return { name: 'The cost of the work', unit: currency, words: amount(capitalCost) };
    case 'upkeep':
      return { name: 'Upkeep', unit: `${currency} a year`, words: amount(yearlyUpkeep) };
    case 'energyGrowth':
      return { name: 'The rise of energy charges', unit: '% a year', words: rise(growth.energy ?? 0) };
    case 'demandGrowth':
      return { name: 'The rise of demand charges', unit: '% a year', words: rise(growth.demand ?? 0) };
  }
}

/** The ranking of a plan's inputs as its picture takes it. */
export function rankingChart(ranked: RankedMoney): RankingData {
  const rows = ranked.ranking.map(({ input, low, high }): RankingRow => {
    const { name, unit, words } = wording(ranked, input);
    const end = ({ move, npv, paybackYears }: RankedInput['low']) => ({ words: words(move), npv, paybackYears });
    return { name, unit, low: end(low), high: end(high) };
  });
  const { currency, npv, paybackYears } = ranked;
  return { currency, npv, paybackYears, rows };
}
