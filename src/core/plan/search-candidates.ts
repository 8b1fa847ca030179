import type { LoadSeries } from '../load';
import type { FieldControl } from '../machine';
import type { SearchAxis } from './search-axes';
import { createSimulator } from './simulator';
import type { FixedSetup, Simulator } from './simulator';
import type { At } from './search-walk';
import type { BillReach } from './bill-reach';
import type { CapacitorBank, Plant } from './types';

/** A bank whose number of steps is searched. */
export interface SearchedBank extends Omit<CapacitorBank, 'steps'> {
  mostSteps: number;
  /** Capital and upkeep of one step per year; 0 when absent. [currency] */
  yearlyCostPerStep?: number;
}

/** Candidates of a search by the indices of their settings: motors' axes first, then the searched bank's steps. */
export interface Candidates {
  lengths: number[];
  standing: At;
  standingTotals: Float64Array;
  controlsOf: (at: At) => FieldControl[][];
  stepsOf: (at: At) => number;
  /** Bill totals; behind them what the searched bank itself costs a year. */
  price: (at: At) => Float64Array;
  bankCost: (at: At) => number;
  /** Active energy of the year. [kWh] */
  energyKwh: (at: At) => number;
  notes: string[];
}

/** Lays out candidates over a plant. Standing is priced without anything a plan builds. */
export function createCandidates(input: {
  plant: Plant;
  fixed: FixedSetup;
  bank?: SearchedBank;
  axes: SearchAxis[];
  spans: number;
  totals: (load: LoadSeries, changed?: ReadonlySet<number>) => Float64Array;
  bills?: BillReach;
}): Candidates {
  const { plant, fixed, bank, axes, spans, totals, bills } = input;
  if (bank && !(Number.isInteger(bank.mostSteps) && bank.mostSteps >= 1 && bank.mostSteps <= 200))
    throw new RangeError(`bank.mostSteps must be a whole number from 1 to 200, got ${bank.mostSteps}`);
  const standingControls = plant.motors.map(({ standingFieldA }): FieldControl[] => [
    { holds: 'field-current', fieldCurrentA: standingFieldA },
  ]);
  const standingTotals = Float64Array.from(totals(createSimulator(plant).apply(standingControls)));
  const simulators: Simulator[] = [];
  const simulatorOf = (steps: number) => (simulators[steps] ??= createSimulator(plant, withSteps(fixed, bank, steps)));
  const stepsOf = (at: At) => (bank ? at[axes.length]! : 0);
  const controlsOf = (at: At) => {
    const controls = standingControls.map((own) => Array.from({ length: spans }, () => own[0]!));
    axes.forEach(({ motors, span, settings, standing }, a) => {
      if (at[a] !== standing) for (const m of motors) controls[m]![span] = settings[at[a]!]!;
    });
    return controls;
  };
  let last: { at: At; steps: number } | null = null;
  /** Spans in which a setting differs from the one simulated before; undefined: any may. */
  const changedSpans = (at: At) => {
    const before = last;
    last = { at: [...at], steps: stepsOf(at) };
    if (before?.steps !== last.steps) return undefined;
    return new Set(axes.flatMap(({ span }, a) => (at[a] === before.at[a] ? [] : [span])));
  };
  const totalsOf = (at: At) => {
    const changed = changedSpans(at);
    const touched = bills && changed && new Set([...changed].flatMap((span) => bills.ofSpan[span]!));
    return totals(simulatorOf(stepsOf(at)).apply(controlsOf(at), changed), touched);
  };
  const bankCost = (at: At) => stepsOf(at) * (bank?.yearlyCostPerStep ?? 0);
  return {
    lengths: [...axes.map(({ settings }) => settings.length), ...(bank ? [bank.mostSteps + 1] : [])],
    standing: [...axes.map(({ standing }) => standing), ...(bank ? [0] : [])],
    standingTotals,
    controlsOf,
    stepsOf,
    price: (at) => (bank ? Float64Array.of(...totalsOf(at), bankCost(at)) : Float64Array.from(totalsOf(at))),
    bankCost,
    energyKwh: (at) => {
      last = null;
      const { kwh } = simulatorOf(stepsOf(at)).apply(controlsOf(at));
      return kwh.reduce((sum, value) => (Number.isNaN(value) ? sum : sum + value), 0);
    },
    notes: simulatorOf(0).notes,
  };
}

function withSteps(fixed: FixedSetup, bank: SearchedBank | undefined, steps: number): FixedSetup {
  if (!bank || steps === 0) return fixed;
  const { mostSteps: _most, yearlyCostPerStep: _cost, ...each } = bank;
  return { ...fixed, banks: [...(fixed.banks ?? []), { ...each, steps }] };
}
