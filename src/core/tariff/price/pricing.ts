import { PriceError } from '../errors';
import type { Schedule } from '../model';
import { didYouMean } from '../nearest';
import type { PriceOptions } from '../types';
import { createBill, type BillState } from './bill-state';
import { evaluateCharges } from './evaluate-charges';
import { evaluateQuantities } from './evaluate-quantities';
import { tellHistory } from './history';
import type { PeriodPlan } from './period-plan';
import { withPlace, type QuantitySource, type Run } from './run';

/** Prepares a run: contract and given values by period, history, empty bills. */
export function prepareRun(
  schedule: Schedule,
  plans: PeriodPlan[],
  options: Omit<PriceOptions, 'periods'>,
  how: { source: QuantitySource; isUnity: boolean; wantsNotes: boolean },
): Run {
  const bills = plans.map((plan) => createBill(schedule, plan, how.wantsNotes));
  notePeriods(bills);
  noteHistory(schedule, bills[0], options.history);
  return {
    schedule,
    source: how.source,
    isUnity: how.isUnity,
    told: plans[0] ? tellHistory(schedule, plans[0].period.from, options.history) : [],
    bills,
    contract: perPeriod(options.contract, plans.length, 'contract'),
    given: perPeriod(options.given, plans.length, 'given'),
    at: undefined,
  };
}

function notePeriods(bills: BillState[]): void {
  for (const [i, { plan, notes }] of bills.entries()) {
    const before = bills[i - 1]?.plan.period.to;
    if (before !== undefined && before !== plan.period.from) {
      notes?.add(
        `The period above this one ends on ${before}: what lies between is not known, and looking back passes over it.`,
      );
    }
  }
}

function noteHistory(schedule: Schedule, first: BillState | undefined, history: PriceOptions['history']): void {
  for (const name of Object.keys(history ?? {})) {
    if (schedule.slots.has(name)) continue;
    const near = didYouMean(name, schedule.slots.keys());
    first?.notes?.add(`The history tells "${name}", which the schedule does not have; it is not used. ${near}`.trim());
  }
}

function perPeriod(
  sets: Record<string, number> | Record<string, number>[] | undefined,
  count: number,
  what: string,
): (Record<string, number> | undefined)[] {
  if (!Array.isArray(sets)) return Array.from({ length: count }, () => sets);
  if (sets.length !== count)
    throw new PriceError(`There are ${count} periods and ${sets.length} sets of "${what}". Give one for each period.`, {
      name: what,
    });
  return sets;
}

/** Prices all periods of a run, in order. */
export function priceRun(run: Run): void {
  for (const bill of run.bills) priceOne(run, bill);
}

/** Prices one period; those before it are priced. */
export function priceOne(run: Run, bill: BillState): void {
  withPlace(run, bill, () => {
    bill.printed.fill(0);
    for (const state of bill.pieces) evaluateQuantities(run, bill, state);
    evaluateCharges(run, bill);
  });
}

/**
 * Refuses names nobody knows: a misspelt contract input would silently price with its default.
 *
 * @throws {PriceError} naming the input and the nearest known one
 */
export function checkNames(schedule: Schedule, options: Omit<PriceOptions, 'periods'>): void {
  const inputs = new Set(schedule.texts.flatMap(({ contract }) => contract.map(({ name }) => name)));
  const given = new Set(
    schedule.texts.flatMap(({ quantities }) =>
      quantities.filter(({ definition }) => definition.kind === 'given').map(({ name }) => name),
    ),
  );
  refuse([options.contract ?? []].flat(), inputs, 'contract input');
  refuse(options.given ?? [], given, 'quantity given by the bill');
}

function refuse(sets: Record<string, number>[], known: Set<string>, what: string): void {
  for (const set of sets) {
    for (const [name, value] of Object.entries(set)) {
      if (!known.has(name)) {
        const remedy = didYouMean(name, known, known.size ? `It has ${[...known].join(', ')}.` : 'It has none.');
        throw new PriceError(`The schedule has no ${what} called "${name}". ${remedy}`, { name });
      }
      if (typeof value !== 'number' || !Number.isFinite(value))
        throw new PriceError(`"${name}" must be a number, got ${String(value)}.`, { name });
    }
  }
}
