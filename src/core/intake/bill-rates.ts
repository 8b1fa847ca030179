import { readCell } from './bill-cells';
import type { Grid } from './grid';
import type { ColumnUse } from './column-map';
import type { ColumnEvidence } from './types';
import { headerWords } from './words';

interface RateInput {
  grid: Grid;
  rows: readonly number[];
  decimalMark: '.' | ',';
  columns: readonly ColumnUse[];
}

interface Pair {
  charge: ColumnUse;
  times: ColumnUse;
  factor: number;
  /** Bills in which quantity times rate is the amount, of those that have all three. */
  met: number;
  told: number;
}

/** A rate in cents, or for a thousand units. */
const factors = [1, 0.01, 0.001];
/** Products this close to the amount show that three columns belong together; what is off is noted later. */
const isNear = (product: number, amount: number): boolean =>
  Math.abs(product - amount) <= 0.011 + Math.abs(amount) * 0.002;

/** Columns with what each rate belongs to; rates that belong to nothing are left out. */
export function pairRates(input: RateInput, evidence: ColumnEvidence[]): ColumnUse[] {
  const taken = new Set<string>();
  return input.columns.map((use) => {
    if (use.role !== 'rate') return use;
    const line = evidence.find((one) => one.index === use.index);
    const pair = use.times === undefined ? bestPair(input, use, taken) : givenPair(input, use);
    if (!pair) {
      if (line)
        Object.assign(line, {
          takenAs: 'ignore',
          why: 'A rate that fits no line and quantity of the bill',
          sure: true,
        });
      return { ...use, role: 'ignore' };
    }
    taken.add(pair.charge.name);
    const isProven = pair.told > 0 && pair.met >= pair.told * 0.6;
    if (line)
      Object.assign(line, {
        why: isProven
          ? `Times “${pair.times.name}” it makes “${pair.charge.name}” in ${pair.met} of ${pair.told} bills`
          : `By its name the rate of “${pair.charge.name}”; the product agrees in ${pair.met} of ${pair.told} bills`,
        testsMet: pair.met,
        testsTotal: pair.told,
        sure: isProven,
      });
    return {
      ...use,
      charge: pair.charge.name,
      times: pair.times.name,
      ...(pair.factor === 1 ? {} : { factor: pair.factor }),
    };
  });
}

const multiplicands = ({ columns }: RateInput): ColumnUse[] =>
  columns.filter((use) => use.role === 'quantity' || use.role === 'days');

function bestPair(input: RateInput, rate: ColumnUse, taken: ReadonlySet<string>): Pair | null {
  const pairs = input.columns
    .filter(
      (use) => use.role === 'charge' && (rate.charge === undefined ? !taken.has(use.name) : use.name === rate.charge),
    )
    .flatMap((charge) =>
      multiplicands(input).flatMap((times) =>
        factors.map((factor) => ({ charge, times, factor, ...tried(input, rate, { charge, times, factor }) })),
      ),
    );
  const proven = pairs
    .filter((pair) => pair.told > 0 && pair.met >= pair.told * 0.6)
    .sort((a, b) => b.met / b.told - a.met / a.told || likeness(rate, b) - likeness(rate, a));
  if (proven[0] && (proven[0].told > 1 || likeness(rate, proven[0]) > 0 || rate.charge)) return proven[0];
  const [named] = pairs
    .filter((pair) => pair.factor === 1 && (likeness(rate, pair) > 1 || rate.charge))
    .sort((a, b) => likeness(rate, b) - likeness(rate, a));
  return named ?? null;
}

function givenPair(input: RateInput, rate: ColumnUse): Pair | null {
  const charge = input.columns.find((use) => use.role === 'charge' && use.name === rate.charge);
  const times = multiplicands(input).find((use) => use.name === rate.times);
  if (!charge || !times) return null;
  const factor = rate.factor ?? 1;
  return { charge, times, factor, ...tried(input, rate, { charge, times, factor }) };
}

function tried(
  { grid, rows, decimalMark }: RateInput,
  rate: ColumnUse,
  pair: Pick<Pair, 'charge' | 'times' | 'factor'>,
): { met: number; told: number } {
  const told = rows
    .map((row) => [rate, pair.times, pair.charge].map((use) => readCell(grid, row, use.index, decimalMark)))
    .filter(
      ([price, quantity, amount]) =>
        [price, quantity, amount].every((one) => one !== undefined && !Number.isNaN(one.value)) && amount?.value !== 0,
    );
  const met = told.filter(([price, quantity, amount]) =>
    isNear((price?.value ?? 0) * (quantity?.value ?? 0) * pair.factor, amount?.value ?? 0),
  );
  return { met: met.length, told: told.length };
}

const namesOf = (use: ColumnUse): string[] =>
  headerWords(use.name).filter(
    (word) => !['rate', 'price', 'charge', 'charges', 'amount', 'per', 'cost', 'the', 'of'].includes(word),
  );

/** Words the name of the rate shares with those of the charge and the quantity. */
function likeness(rate: ColumnUse, { charge, times }: Pick<Pair, 'charge' | 'times'>): number {
  const own = new Set(namesOf(rate));
  const shared = (use: ColumnUse): number => namesOf(use).filter((word) => own.has(word)).length;
  return shared(charge) * 2 + shared(times);
}

/** The rate column of every charge that has one. */
export function ratesOf(plan: { columns: readonly ColumnUse[] }): Map<string, { rate: ColumnUse; times: ColumnUse }> {
  const found = new Map<string, { rate: ColumnUse; times: ColumnUse }>();
  for (const rate of plan.columns) {
    const times = plan.columns.find(
      (use) => (use.role === 'quantity' || use.role === 'days') && use.name === rate.times,
    );
    if (rate.role === 'rate' && rate.charge !== undefined && times) found.set(rate.charge, { rate, times });
  }
  return found;
}
