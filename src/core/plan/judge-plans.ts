import { appraise } from '../economics';
import type { Appraisal } from '../economics';

/** One way to act, priced over a year. */
export interface Alternative {
  name: string;
  /** Bill sum of the year with it. [currency] */
  yearCost: number;
  /** [currency] */
  capitalCost: number;
  /** [currency/yr] */
  yearlyUpkeep?: number;
}

/** An alternative judged. */
export interface JudgedAlternative extends Alternative {
  /** Against standing, before upkeep; negative when it costs more. [currency/yr] */
  yearlySaving: number;
  appraisal: Appraisal;
}

/** Which way to act, standing included. */
export interface Verdict {
  /** Best first by present value. */
  judged: JudgedAlternative[];
  /** Name of the best; null: leave the plant as it stands. */
  winner: string | null;
  words: string;
}

/**
 * Compares ways to act with leaving the plant as it stands, by present value over the same years.
 *
 * @param input.standingCost  Bill sum of the year as the plant stands. [currency]
 * @param input.alternatives  Each with its bills, capital and upkeep.
 * @param input.years  Horizon. Whole, >= 1
 * @param input.discountRate  [unitless per year]
 * @param input.escalationRate  Yearly growth of the savings; 0 when absent.
 * @returns Alternatives by present value; none wins when none has a positive one.
 * @throws {RangeError} naming the argument out of range
 */
export function judgePlans(input: {
  standingCost: number;
  alternatives: Alternative[];
  years: number;
  discountRate: number;
  escalationRate?: number;
}): Verdict {
  const { standingCost, alternatives, years, discountRate, escalationRate = 0 } = input;
  if (!(Number.isInteger(years) && years >= 1)) throw new RangeError(`years must be a whole number >= 1, got ${years}`);
  if (!(escalationRate > -1)) throw new RangeError(`escalationRate must be above -1, got ${escalationRate}`);
  const judged = alternatives
    .map((alternative) => {
      const yearlySaving = standingCost - alternative.yearCost;
      const flows = Array.from({ length: years }, (_, k) => yearlySaving * (1 + escalationRate) ** k);
      const yearlyUpkeep = flows.map(() => alternative.yearlyUpkeep ?? 0);
      const appraisal = appraise({
        capitalCost: alternative.capitalCost,
        yearlySaving: flows,
        yearlyUpkeep,
        discountRate,
      });
      return { ...alternative, yearlySaving, appraisal };
    })
    .sort((a, b) => b.appraisal.npv - a.appraisal.npv);
  const [best] = judged;
  if (!best || best.appraisal.npv <= 0) {
    const words = best
      ? `Leave the plant as it stands: no alternative earns its cost within ${years} years.`
      : 'Leave the plant as it stands: there is no alternative.';
    return { judged, winner: null, words };
  }
  const { npv, simplePaybackYears } = best.appraisal;
  const payback =
    simplePaybackYears === null || simplePaybackYears === 0
      ? ''
      : `, paid back in ${simplePaybackYears.toFixed(1)} years`;
  const words = `${best.name}: present value ${npv.toFixed(0)} over ${years} years${payback}.`;
  return { judged, winner: best.name, words };
}
