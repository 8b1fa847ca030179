import { wordOrdinal } from '../../core/units';
import type { PlanView, YearView } from '../../schemas/plan';
import { capital, formatList, formatMajor, formatNumber, formatQuantity, formatSpelled } from '../ui/format';
import { directionOf, isAsToday } from '../ui/setting-words';

/** All capacitors of a plan together. [kvar] */
export const bankKvar = ({ banks }: PlanView) => banks.reduce((sum, { kvar }) => sum + kvar, 0);

/** Fields a plan sets otherwise than they run today. */
const changedFields = (plan: PlanView) => plan.fields.filter((field) => !isAsToday(field));

/** What a plan works with, beneath its name: "field of M-1, M-2", "capacitors", "both". */
export function kindWords(plan: PlanView): string {
  const changed = changedFields(plan).map(({ name }) => name);
  const kinds = [
    ...(changed.length > 0 ? [`field of ${changed.join(', ')}`] : []),
    ...(plan.banks.length > 0 ? ['capacitors'] : []),
    ...(plan.replacements.length > 0 ? ['new motor'] : []),
  ];
  return kinds.length === 0 ? 'as it runs now' : formatList(kinds);
}

/** What a plan does: "Raise two fields, buy no capacitors". The capacitors are named where another plan has some. */
export function actionWords(plan: PlanView, others: PlanView[] = []): string {
  const kvar = bankKvar(plan);
  const refused = kvar === 0 && others.some((other) => bankKvar(other) > 0);
  const parts = [
    fieldAction(changedFields(plan)),
    ...(kvar > 0 ? [`add ${formatQuantity(kvar, 'kvar')} of capacitors`] : []),
    ...(plan.replacements.length > 0 ? [`put in ${formatList(plan.replacements.map(({ name }) => name))}`] : []),
  ];
  return `${formatList(parts)}${refused ? ', buy no capacitors' : ''}`;
}

function fieldAction(fields: PlanView['fields']): string {
  const [first] = fields;
  if (!first) return 'Leave the fields alone';
  const all = (direction: 'up' | 'down') => fields.every((field) => directionOf(field) === direction);
  const verb = all('up') ? 'Raise' : all('down') ? 'Lower' : 'Reset';
  return fields.length === 1 ? `${verb} the field of ${first.name}` : `${verb} ${formatSpelled(fields.length)} fields`;
}

/** Plans by net present value, the best first. */
export const byValue = (plans: PlanView[]) => [...plans].sort((a, b) => b.appraisal.npv - a.appraisal.npv);

/** The plan a page shows in full: the chosen one, else the best by net present value. */
export const shownPlan = (year: YearView): PlanView | null => year.chosen ?? byValue(year.plans)[0] ?? null;

export const worthDoing = (plan: PlanView) => plan.saving > 0 && plan.appraisal.npv > 0;

/** When a plan has paid for itself, in a sentence's words. */
function paybackPhrase(plan: PlanView): string {
  if (plan.paybackWords === 'never') return `does not pay back within ${plan.economics.horizonYears} years`;
  return plan.paybackWords === 'at once' ? 'costs nothing to do' : `pays back in ${plan.paybackWords}`;
}

/** What a plan does to the year's bills, in a sentence's words. */
function savingPhrase({ saving, currency }: PlanView): string {
  const money = (amount: number) => formatMajor(amount, currency, { whole: true });
  if (Math.round(saving) === 0) return 'saves nothing';
  return saving > 0 ? `saves ${money(saving)} a year` : `makes the year ${money(-saving)} dearer`;
}

/** The finding of the station in one sentence with the three numbers that decide it; honest where nothing pays. */
export function plansVerdict(year: YearView, shown: PlanView | null): { title: string; lead: string } {
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  if (!shown) {
    return {
      title: `As it runs now the year costs ${money(year.standing.yearTotal)}; ${money(year.standing.reactiveCost)} of it is the price of reactive power.`,
      lead: 'No plan yet. Search for the best field currents, or enter settings of your own.',
    };
  }
  const best = byValue(year.plans)[0] ?? shown;
  if (!worthDoing(best)) {
    return {
      title: 'Leave the plant as it stands: no plan brings in more than it costs.',
      lead: `The nearest, ${best.name}, ${savingPhrase(best)} for ${money(best.capitalCost)} and ${paybackPhrase(best)}.`,
    };
  }
  const cost = shown.capitalCost > 0 ? ` for ${money(shown.capitalCost)}` : '';
  return {
    title: `${actionWords(shown, year.plans)}: ${shown.name} ${savingPhrase(shown)}${cost} and ${paybackPhrase(shown)}.`,
    lead: leadOf(year, shown),
  };
}

/** How the next best stands against the plan that is shown. */
function leadOf(year: YearView, shown: PlanView): string {
  const money = (amount: number) => formatMajor(Math.abs(amount), year.currency, { whole: true });
  const other = byValue(year.plans).find((plan) => plan.id !== shown.id);
  const left = year.standing.reactiveCost - shown.saving;
  if (!other) {
    return left > 0
      ? `Of the ${money(year.standing.reactiveCost)} a year that reactive power costs today, ${money(left)} stay.`
      : 'It takes away all that reactive power costs today.';
  }
  const worth = other.appraisal.npv - shown.appraisal.npv;
  if (worth > 0) return `${other.name} would be worth ${money(worth)} more in present value.`;
  const more = other.saving - shown.saving;
  const cost = other.capitalCost - shown.capitalCost;
  const saves = `${other.name}, ${kindWords(other)}, would save ${money(more)} a year ${more < 0 ? 'less' : 'more'}`;
  const costs = cost === 0 ? 'cost the same' : `cost ${money(cost)} ${cost < 0 ? 'less' : 'more'}`;
  return more > 0 && cost > 0
    ? `${saves}, ${costs} and not catch up within ${formatSpelled(shown.economics.horizonYears)} years.`
    : `${saves}, ${costs} and be worth ${money(worth)} less in present value.`;
}

/** Why the plan shown stands first, or does not, beside the table. */
export function reasonsFor(year: YearView, shown: PlanView): string {
  const others = year.plans.filter((plan) => plan.id !== shown.id);
  if (!worthDoing(shown)) return `${shown.name} does not earn its cost.`;
  if (others.length === 0) return `${shown.name} alone is compared with standing.`;
  const least = (of: (plan: PlanView) => number | null) =>
    others.every((plan) => (of(shown) ?? Infinity) <= (of(plan) ?? Infinity));
  const isNear = (plan: PlanView) => plan.banks.some(({ resonance }) => (resonance?.near.length ?? 0) > 0);
  const reasons = [
    ...(others.every((plan) => plan.appraisal.npv <= shown.appraisal.npv) ? ['highest net present value'] : []),
    ...(least((plan) => plan.appraisal.simplePaybackYears) ? ['shortest payback'] : []),
    ...(!isNear(shown) && others.some((plan) => plan.banks.length > 0)
      ? [shown.banks.length === 0 ? 'no resonance to design out' : 'no resonance near a usual harmonic']
      : []),
  ];
  return reasons.length === 0
    ? `${shown.name} is chosen; another plan is worth more.`
    : `${shown.name}. ${capital(formatList(reasons))}.`;
}

/** Price of capacitors a kvar at which a plan with them would be worth as much as the one shown; null where there is none. */
export function capacitorTurn(year: YearView, shown: PlanView): string | null {
  if (bankKvar(shown) > 0) return null;
  const rival = byValue(year.plans).find((plan) => bankKvar(plan) > 0);
  const cost = rival?.costParts.find(({ label }) => label === 'Capacitors')?.amount ?? 0;
  if (!rival || cost === 0) return null;
  const turning = (cost - (shown.appraisal.npv - rival.appraisal.npv)) / bankKvar(rival);
  return turning > 0
    ? `Capacitors of ${rival.name} cheaper than ${formatNumber(turning)} ${year.currency}/kvar installed; they are reckoned at ${formatNumber(cost / bankKvar(rival))}.`
    : `No price of capacitors: ${rival.name} would be worth less even if they were free.`;
}

/** "near the 5th and 7th", for a table's note. */
export const nearWords = (near: number[]) => `near the ${formatList(near.map(wordOrdinal))}`;
