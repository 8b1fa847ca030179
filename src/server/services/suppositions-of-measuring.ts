import type { LoadSeries } from '../../core/load';
import type { QuantityEntry } from '../../core/tariff';
import type { Rounding } from '../../core/units';
import { wordNumber } from '../../core/units';
import { asIfDemandWindow, asIfMeasuredIn, asIfRounded } from './schedule-variants';
import { nameOf, quantitiesOf, worded, type CauseTarget, type Supposition } from './suppositions';
import type { TrialPricing } from './trial-pricing';

const windowMinutes = [15, 30, 60];

/** Demand as the mean of another number of minutes. */
function otherLengths(trial: TrialPricing, target: CauseTarget): Supposition[] {
  const { load, schedule } = trial.basis;
  const { index } = target;
  const isRead = quantitiesOf(trial, target).some(
    ({ definition }) => definition.kind === 'measure' && definition.operation !== 'sum',
  );
  if (!load || !isRead) return [];
  const own = trial.text(index).demandWindow;
  const others = windowMinutes.filter(
    (minutes) =>
      minutes % load.stepMinutes === 0 &&
      (own?.everyMinutes !== undefined || minutes !== (own?.minutes ?? load.stepMinutes)),
  );
  return others.map((minutes) => {
    const change = { schedule: asIfDemandWindow(schedule, minutes) };
    const key = `demand window ${minutes}`;
    return {
      kind: 'wrong-window',
      label: `demand as the mean of ${minutes} minutes`,
      bill: () => trial.either(key, index, change),
      throughout: () => trial.throughout(key, index, change),
    };
  });
}

/** A peak read in another window of the clock than the schedule says. */
function otherHours(trial: TrialPricing, target: CauseTarget): Supposition[] {
  if (!trial.basis.load) return [];
  const { index } = target;
  const windows = [...trial.text(index).windows.keys()];
  return quantitiesOf(trial, target).flatMap((quantity) => {
    const { definition } = quantity;
    if (definition.kind !== 'measure' || definition.operation === 'sum') return [];
    const others = [undefined, ...windows].filter((window) => window !== definition.window);
    return others.map((window): Supposition => {
      const change = { schedule: asIfMeasuredIn(trial.basis.schedule, quantity.name, window) };
      const key = `hours ${quantity.name} ${window ?? ''}`;
      return {
        kind: 'wrong-window',
        label: `${nameOf(quantity)} read ${window === undefined ? 'at all hours' : `in the window ${window}`}`,
        bill: () => trial.either(key, index, change),
        throughout: () => trial.throughout(key, index, change),
      };
    });
  });
}

/** Demand read in the wrong window: of the clock, or of another length. */
export const otherWindows = (trial: TrialPricing, target: CauseTarget): Supposition[] => [
  ...otherHours(trial, target),
  ...otherLengths(trial, target),
];

const nearest = (step: number): Rounding => ({ step, mode: 'nearest' });
const isFactor = ({ name, unit }: QuantityEntry) => unit === '' && /^(pf|cos|powerFactor)/i.test(name);

/** Roundings other than a quantity's own; of a power factor always, of others where the schedule rounds them. */
function roundingsOf(quantity: QuantityEntry): (Rounding | undefined)[] {
  if (!quantity.rounding && !isFactor(quantity)) return [];
  const all = isFactor(quantity)
    ? [undefined, nearest(0.001), nearest(0.01), { step: 0.01, mode: 'down' as const }]
    : [
        undefined,
        ...[0.01, 0.1, 1, 10].map(nearest),
        { step: 1, mode: 'down' as const },
        { step: 1, mode: 'up' as const },
      ];
  const own = quantity.rounding;
  return all.filter((one) => one?.step !== own?.step || one?.mode !== own?.mode);
}

function wordRounding(rounding: Rounding | undefined, quantity: QuantityEntry): string {
  if (!rounding) return 'not rounded';
  const percent = isFactor(quantity) && rounding.step === 0.01 ? ' (whole percent)' : '';
  const way = { nearest: 'rounded', 'half down': 'rounded', down: 'cut', up: 'rounded up' }[rounding.mode];
  return `${way} to ${worded(rounding.step, quantity.unit)}${percent}`;
}

/** A power factor or any rounded quantity rounded otherwise. */
export function otherRoundings(trial: TrialPricing, target: CauseTarget): Supposition[] {
  const { index } = target;
  // A power factor is quarrelled about more often than what it makes (common practice), so it is named first.
  const quantities = quantitiesOf(trial, target).sort((a, b) => Number(isFactor(b)) - Number(isFactor(a)));
  return quantities.flatMap((quantity) =>
    roundingsOf(quantity).map((rounding): Supposition => {
      const change = { schedule: asIfRounded(trial.basis.schedule, quantity.name, rounding) };
      const key = `rounding ${quantity.name} ${rounding?.step ?? 'none'} ${rounding?.mode ?? ''}`;
      return {
        kind: 'wrong-rounding',
        label: `${nameOf(quantity)} ${wordRounding(rounding, quantity)}`,
        bill: () => trial.either(key, index, change),
        throughout: () => trial.throughout(key, index, change),
      };
    }),
  );
}

/**
 * Factors by which a metered value goes wrong: a multiplier taken twice or halved, a ratio of transformers confused with its
 * neighbour, a decimal, one of three phases lost, line voltage for phase voltage. Common practice, none from a source.
 */
const factors = [
  { factor: 2, words: '2' },
  { factor: 1 / 2, words: '1 / 2' },
  { factor: 1.2, words: '1.2' },
  { factor: 1 / 1.2, words: '1 / 1.2' },
  { factor: 1.5, words: '1.5' },
  { factor: 2 / 3, words: '2 / 3' },
  { factor: 10, words: '10' },
  { factor: 1 / 10, words: '1 / 10' },
  { factor: Math.sqrt(3), words: 'the root of 3' },
  { factor: 1 / Math.sqrt(3), words: '1 / the root of 3' },
];

function scaled(load: LoadSeries, factor: number): LoadSeries {
  const times = (values: Float64Array) => values.map((value) => value * factor);
  return {
    ...load,
    kwh: times(load.kwh),
    kvarhLagging: times(load.kvarhLagging),
    kvarhLeading: times(load.kvarhLeading),
  };
}

/** A wrong multiplier of the meter, or a wrong ratio of its transformers. */
export function otherMultipliers(trial: TrialPricing, { index }: CauseTarget): Supposition[] {
  const { load } = trial.basis;
  if (!load) return [];
  return factors.map(({ factor, words }) => ({
    kind: 'wrong-multiplier',
    label: `the meter's values times ${words}`,
    bill: () => trial.either(`times ${words}`, index, { load: scaled(load, factor) }),
  }));
}

/** A quantity as the bill prints it. */
export function printedQuantities(trial: TrialPricing, target: CauseTarget): Supposition[] {
  const { index, lineId } = target;
  if (lineId === null || trial.basis.route === 'printed') return [];
  const printed = trial.basis.bills[index]!.quantities;
  return quantitiesOf(trial, target).flatMap((quantity) => {
    const value = Object.hasOwn(printed, quantity.name) ? printed[quantity.name] : undefined;
    if (value === undefined) return [];
    return [
      {
        kind: 'wrong-quantity' as const,
        label: `${nameOf(quantity)} as the bill prints it, ${wordNumber(Math.round(value * 1000) / 1000)}${quantity.unit ? ` ${quantity.unit}` : ''}`,
        bill: () => trial.withQuantities(index, { [quantity.name]: value }),
      },
    ];
  });
}
