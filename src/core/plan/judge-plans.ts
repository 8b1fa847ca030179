import { appraise } from '../economics';
import type { Appraisal } from '../economics';
import { wordNumber } from '../units';

/** Ways to act beside leaving the plant as it stands. */
export type AlternativeKind = 'motor' | 'capacitors' | 'both';

/** One way to act, priced over a year. */
export interface Alternative {
  kind: AlternativeKind;
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
  /** Best first by present value; at a tie the one named first. */
  judged: JudgedAlternative[];
  /** The best; `neither`: leave the plant as it stands. */
  winner: AlternativeKind | 'neither';
  /** One sentence with the present values that decide it. */
  words: string;
}

/**
 * Compares ways to act with leaving the plant as it stands, by present value over the same years.
 *
 * @param input.standingCost  Bill sum of the year as the plant stands. [currency]
 * @param input.alternatives  Each with its bills, capital and upkeep; each kind once at most.
 * @param input.years  Horizon. Whole, >= 1
 * @param input.discountRate  [unitless per year]
 * @param input.escalationRate  Yearly growth of the savings; 0 when absent.
 * @param input.wordMoney  Words of an amount that is not negative; a whole number when absent.
 * @returns Alternatives by present value; none wins when none has a positive one.
 * @throws {RangeError} naming the argument out of range
 */
export function judgePlans(input: {
  standingCost: number;
  alternatives: Alternative[];
  years: number;
  discountRate: number;
  escalationRate?: number;
  wordMoney?: (amount: number) => string;
}): Verdict {
  const { standingCost, alternatives, years, discountRate, escalationRate = 0 } = input;
  const wordMoney = input.wordMoney ?? ((amount: number) => wordNumber(amount, 1));
  if (!(Number.isInteger(years) && years >= 1)) throw new RangeError(`years must be a whole number >= 1, got ${years}`);
  if (!(escalationRate > -1)) throw new RangeError(`escalationRate must be above -1, got ${escalationRate}`);
  const twice = alternatives.find(({ kind }, k) => alternatives.findIndex((one) => one.kind === kind) !== k);
  if (twice) throw new RangeError(`alternatives must have each kind once at most, got ${twice.kind} again`);
  const judged = alternatives
    .map((alternative): JudgedAlternative => {
      const yearlySaving = standingCost - alternative.yearCost;
      const flows = Array.from({ length: years }, (_, k) => yearlySaving * (1 + escalationRate) ** k);
      const yearlyUpkeep = flows.map(() => alternative.yearlyUpkeep ?? 0);
      const { capitalCost } = alternative;
      const appraisal = appraise({ capitalCost, yearlySaving: flows, yearlyUpkeep, discountRate });
      return { ...alternative, yearlySaving, appraisal };
    })
    .sort((a, b) => b.appraisal.npv - a.appraisal.npv);
  const [best] = judged;
  const winner = best && best.appraisal.npv > 0 ? best.kind : 'neither';
  return { judged, winner, words: verdictWords(judged, winner, years, wordMoney) };
}

function verdictWords(
  judged: JudgedAlternative[],
  winner: Verdict['winner'],
  years: number,
  wordMoney: (amount: number) => string,
): string {
  const over = `over ${years} ${years === 1 ? 'year' : 'years'}`;
  if (judged.length === 0) return 'Leave the plant as it stands: there is no alternative.';
  const worth = ({ name, appraisal: { npv } }: JudgedAlternative) =>
    npv >= 0 ? `${lower(name)} gain ${wordMoney(npv)}` : `${lower(name)} lose ${wordMoney(-npv)}`;
  if (winner === 'neither') return `Leave the plant as it stands: ${over} ${listed(judged.map(worth))}.`;
  const [best, ...others] = judged;
  const rest = others.length > 0 ? `; ${listed(others.map(worth))}` : '';
  return `${best!.name} gain ${wordMoney(best!.appraisal.npv)} in present value ${over}${rest}.`;
}

const lower = (name: string) => name.charAt(0).toLowerCase() + name.slice(1);

function listed(parts: string[]): string {
  return parts.length < 2 ? parts.join('') : `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`;
}
