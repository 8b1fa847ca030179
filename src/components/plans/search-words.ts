import { wordOrdinal } from '../../core/units';
import { wholeYear } from '../../schemas/plan-spans';
import type { RobustnessView, SearchedBankView, SearchView } from '../../schemas/search';
import { formatMajor, formatNumber, formatQuantity, formatSpelled } from '../ui/format';
import { amperes, settingsWords } from '../ui/setting-words';

const wholeMoney = (currency: string) => (amount: number) => formatMajor(amount, currency, { whole: true });

/** How the year is parted for the settings found. */
export const foundSpans = ({ spans = wholeYear }: SearchView) => spans;

/** How flat the cost lies round the best. */
export function flatWords({ curves, leaveAlone }: SearchView, currency: string): string[] {
  if (leaveAlone) return [];
  const money = wholeMoney(currency);
  return curves.flatMap(({ name, span, chosenA, tolerance }) => {
    if (!tolerance) return [];
    const who = span ? `${name}, ${span.toLowerCase()}` : name;
    const { lowA, highA, amount } = tolerance;
    return highA - lowA < 1e-6
      ? [`${who} wants ${amperes(chosenA)} exactly: a step either way costs more than ${money(amount)}.`]
      : [
          `${who} may lie between ${amperes(lowA)} and ${amperes(highA)}: the year moves by less than ${money(amount)}.`,
        ];
  });
}

/** How the best setting does on years that are only like the metered one. */
export function robustWords({ robustness }: SearchView, currency: string): string[] {
  if (!robustness) return [];
  const { years, bestYears, meanSaving, worstSaving, safer } = robustness;
  const money = wholeMoney(currency);
  const worst = worstSaving >= 0 ? `${money(worstSaving)} in the worst` : `costs ${money(-worstSaving)} in the worst`;
  const verdict = safer
    ? 'It is best on last year’s exact data only.'
    : `In ${formatSpelled(bestYears)} of ${formatSpelled(years)} trial years nothing near it is cheaper by more than a hundredth of the saving.`;
  return [`${verdict} On years like the last it saves ${money(meanSaving)} in the mean, ${worst}.`];
}

/** The setting that does better in the mean of the trial years. */
export function saferWords(
  safer: NonNullable<RobustnessView['safer']>,
  spans: ReturnType<typeof foundSpans>,
  currency: string,
): string {
  const money = wholeMoney(currency);
  return `A little further from the edge, ${settingsWords(safer.fields, spans)} saves ${money(safer.meanSaving)} in the mean of the trial years.`;
}

/** What no setting can beat. */
export function boundWords({ bound }: SearchView, currency: string): string[] {
  if (!bound) return [];
  const least = formatMajor(bound.total, currency, { whole: true });
  return [
    `No reactive power within the motors’ limits, in any interval, makes the year cheaper than ${least}. ${bound.words}`,
  ];
}

/** The capacitors that were weighed, and their resonance. */
export function searchedBankWords(bank: SearchedBankView): string {
  const { stepKvar, aloneSteps, togetherSteps, aloneSwitched, resonance } = bank;
  const size = (steps: number) =>
    steps === 0
      ? 'none'
      : `${formatNumber(steps)} ${aloneSwitched ? 'switched' : 'fixed'} of ${formatQuantity(stepKvar, 'kvar')}`;
  const sizes = `Steps: alone ${size(aloneSteps)}, beside the fields ${size(togetherSteps)}.`;
  if (!resonance) return `${sizes} Resonance is not checked: the short-circuit power is not known.`;
  const order = formatNumber(resonance.order, { decimals: 1 });
  return resonance.near.length > 0
    ? `${sizes} They resonate at order ${order}, near the ${resonance.near.map(wordOrdinal).join(' and ')} harmonic: detune them or choose another size.`
    : `${sizes} They resonate at order ${order}, half an order and more from the usual harmonics.`;
}
