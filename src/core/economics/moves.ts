import type { Investment } from './investment';

/** How far the inputs of an investment are moved. Factors are 1 and points 0 where nothing moves. */
export interface Moves {
  /** Factor on the whole saving: model and measurement. */
  saving: number;
  /** Factor on the operating hours: what is billed by energy goes with them, peaks do not. */
  hours: number;
  /** Factors on capital cost and upkeep. */
  work: number;
  upkeep: number;
  /** Added to the growth of energy charges, and of all other charges. [unitless per year] */
  energyGrowth: number;
  demandGrowth: number;
}

export type MovedInput = keyof Moves;

/** Inputs in the order in which their random numbers are drawn. */
export const movedInputs: readonly MovedInput[] = ['saving', 'hours', 'work', 'upkeep', 'energyGrowth', 'demandGrowth'];

/** How uncertain each input is: one standard deviation, of a factor relative, of a growth in points. [unitless], >= 0 */
export type Spreads = Record<MovedInput, number>;

/** Least growth a move may lead to. */
const leastGrowth = -0.99;

/**
 * An investment with some of its inputs moved.
 *
 * Saving of a group: s (S + (h - 1) H), with H the part of S that goes with the operating hours.
 */
export function movedInvestment(investment: Investment, moves: Partial<Moves>): Investment {
  const { saving = 1, hours = 1, work = 1, upkeep = 1, energyGrowth = 0, demandGrowth = 0 } = moves;
  const { savingWithHours = {} } = investment;
  const scaled = Object.entries(investment.saving).map(([group, amount]): [string, number] => [
    group,
    saving * (amount + (hours - 1) * (savingWithHours[group] ?? 0)),
  ]);
  const growth = Object.entries(investment.growth).map(([group, rate]): [string, number] => [
    group,
    Math.max(leastGrowth, rate + (group === 'energy' ? energyGrowth : demandGrowth)),
  ]);
  return {
    ...investment,
    saving: Object.fromEntries(scaled),
    savingWithHours: scaledBy(savingWithHours, saving * hours),
    growth: Object.fromEntries(growth),
    capitalCost: investment.capitalCost * work,
    yearlyUpkeep: investment.yearlyUpkeep * upkeep,
  };
}

const scaledBy = (amounts: Record<string, number>, factor: number) =>
  Object.fromEntries(Object.entries(amounts).map(([group, amount]) => [group, amount * factor]));

/**
 * The move of one input by a number of standard deviations: factors exp(z ln(1 + u)), so that they stay positive and
 * their median is 1; growth u z.
 */
export function moveOf(input: MovedInput, spread: number, z: number): number {
  return input === 'energyGrowth' || input === 'demandGrowth' ? spread * z : (1 + spread) ** z;
}

/** @throws {RangeError} naming the input whose spread is out of range */
export function checkSpreads(spreads: Spreads): void {
  for (const input of movedInputs) {
    const spread = spreads[input];
    if (!(spread >= 0 && spread <= 10)) throw new RangeError(`spread of ${input} must be in [0, 10], got ${spread}`);
  }
}
