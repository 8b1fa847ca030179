import { paybackYears } from './appraise';
import { checkInvestment, yearsOfChecked, type Investment, type InvestmentYear } from './investment';
import { checkSpreads, moveOf, movedInputs, movedInvestment, type MovedInput, type Spreads } from './moves';

/** What one input does to the result between its 10 % and its 90 % value, the others as given. */
export interface RankedInput {
  input: MovedInput;
  /** Factor, or points of growth, at the 10 % and the 90 % value. */
  low: RankedEnd;
  high: RankedEnd;
  /** Distance of the two present values. */
  swing: number;
}

export interface RankedEnd {
  move: number;
  npv: number;
  /** Null: not paid back within the horizon. */
  paybackYears: number | null;
}

/** Standard normal value exceeded with 10 % probability. */
const z90 = 1.2815515655446004;

/** Simple payback of an investment's years by the rule of `appraiseInvestment`; null where it is not reached. */
export function paybackOf(years: InvestmentYear[]): number | null {
  const [start, ...rest] = years;
  if (start!.net === 0 && rest[0]!.net <= 0) return null;
  return paybackYears(
    -start!.net,
    rest.map((row) => row.net),
  );
}

/**
 * Ranks the uncertain inputs by how far each moves the present value, the widest first; what does not move it is left out.
 *
 * @throws {RangeError} naming the argument out of range
 */
export function rankInputs(investment: Investment, spreads: Spreads): RankedInput[] {
  checkInvestment(investment);
  checkSpreads(spreads);
  const endOf = (input: MovedInput, z: number): RankedEnd => {
    const move = moveOf(input, spreads[input], z);
    const years = yearsOfChecked(movedInvestment(investment, { [input]: move }));
    return { move, npv: years.at(-1)!.cumulativeDiscounted, paybackYears: paybackOf(years) };
  };
  const size = Math.abs(investment.capitalCost) + Object.values(investment.saving).reduce((a, b) => a + Math.abs(b), 0);
  return movedInputs
    .map((input) => {
      const low = endOf(input, -z90);
      const high = endOf(input, z90);
      return { input, low, high, swing: Math.abs(high.npv - low.npv) };
    })
    .filter(({ swing }) => swing > 1e-9 * size)
    .sort((a, b) => b.swing - a.swing);
}
