import { dayNumber } from '../../core/load';
import type { EditionContent, EditionPlan } from '../../schemas/edition';
import { constantFieldA } from '../../schemas/plan-settings';
import { capacitorCaution } from '../ui/Caution';
import { amperes, directionOf, isAsToday, settingValueWords } from '../ui/setting-words';
import {
  capital,
  formatCount,
  formatList,
  formatMajor,
  formatMoney,
  formatNumber,
  formatQuantity,
  formatSpelled,
} from '../ui/format';

/** Whether the proposed plan brings more than it costs to leave everything alone. */
export const pays = (plan: EditionPlan) => plan.saving > 0 && plan.appraisal.npv > 0;

/** Motors whose field the plan changes. */
export const changedFields = (plan: EditionPlan) => plan.fields.filter((field) => !isAsToday(field));

const wholeYearDays = 350;

/** "a year", or the days the bills cover where they cover less. */
function span({ bills }: EditionContent): string {
  const days = bills.reduce((sum, { from, to }) => sum + dayNumber(to) - dayNumber(from), 0);
  return days >= wholeYearDays ? 'a year' : `in the ${formatCount(days, 'day')} audited`;
}

const whole = (amount: number, currency: string) => formatMajor(amount, currency, { whole: true });

const bankKvar = ({ banks = [] }: EditionPlan) => banks.reduce((sum, { kvar }) => sum + kvar, 0);

const bankWords = (plan: EditionPlan) =>
  bankKvar(plan) > 0 ? `${formatQuantity(bankKvar(plan), 'kvar')} of capacitors` : null;

/** The caution a bank brings with it; empty without one. */
export const bankCaution = (plan: EditionPlan) => (bankKvar(plan) > 0 ? capacitorCaution : '');

/** Why a plan is not proposed, in the figures that say so. */
function whyNot(content: EditionContent): string {
  const { plan, currency } = content;
  if (Math.round(plan.saving) === 0) return `${plan.name} saves nothing on the bills.`;
  if (plan.saving < 0)
    return `${plan.name} would make the bills ${whole(-plan.saving, currency)} ${span(content)} dearer.`;
  const { horizonYears, discountPercent } = plan.economics;
  return `the ${whole(plan.saving, currency)} ${span(content)} that ${plan.name} saves do not pay for its work and upkeep in ${formatCount(horizonYears, 'year')} at ${formatNumber(discountPercent, { upTo: 1 })} % interest.`;
}

/** The report's answer in one sentence. */
export function answer(content: EditionContent): string {
  const { plan, currency } = content;
  if (!pays(plan)) return `Leave the fields as they are: ${whyNot(content)}`;
  const changed = changedFields(plan).length;
  const motors = `${changed === 1 ? 'one motor' : `${formatSpelled(changed)} motors`} you already own`;
  const means = formatList([changed > 0 ? motors : null, bankWords(plan)].filter((one) => one !== null));
  const paid =
    plan.paybackWords === 'at once' ? 'nothing has to be bought' : `the work pays for itself in ${plan.paybackWords}`;
  return `${capital(means)} can cut your power bills by ${whole(plan.saving, currency)} ${span(content)}, and ${paid}.`;
}

/** What poor power factor costs today, for people who do not work with it. */
export function costNow(content: EditionContent): string {
  const { standing, currency } = content;
  if (Math.round(standing.reactiveCost) <= 0) return 'Your bills carry nothing for poor power factor.';
  return `Your bills carry ${whole(standing.reactiveCost, currency)} ${span(content)} for poor power factor: current the utility must carry that does no work.`;
}

/** Motor by motor, from today's field to the plan's. */
function settingWords({ plan, motors }: EditionContent): string[] {
  return changedFields(plan).map((field) => {
    const drives = motors.find((motor) => motor.motorId === field.motorId)?.drives;
    const who = drives ? `${field.name} (${drives.toLowerCase()})` : field.name;
    const constantA = constantFieldA(field);
    if (constantA !== null)
      return `${who} from ${formatNumber(field.todayA, { upTo: 1 })} to ${formatNumber(constantA, { upTo: 1 })} A`;
    const words = settingValueWords(field, plan.spans ?? { by: 'year' }).replace(/^holds/, 'holding');
    return `${who} from ${amperes(field.todayA)} to ${words}`;
  });
}

/** "Raise", "Lower", or "Set" where some rise and some fall. */
function verbOf(plan: EditionPlan): string {
  const changed = changedFields(plan);
  if (changed.every((field) => directionOf(field) === 'up')) return 'Raise';
  return changed.every((field) => directionOf(field) === 'down') ? 'Lower' : 'Set';
}

/** What is to be done, motor by motor; nothing where the plan does not pay. */
export function toDo(content: EditionContent): string {
  const { plan, currency } = content;
  if (!pays(plan)) return `Change nothing at the motors, and buy nothing. ${plan.name} was priced and is not proposed.`;
  const settings = settingWords(content);
  const bank = bankWords(plan);
  const sentences = [
    settings.length > 0
      ? `${verbOf(plan)} the field of ${settings.join(' and of ')}.`
      : 'Nothing is to be changed at the motors.',
    bank ? `Add ${bank}. ${bankCaution(plan)}` : 'Motors already in place do it; no capacitors are bought.',
    ...(plan.capitalCost > 0 ? [`The work costs ${whole(plan.capitalCost, currency)} once.`] : []),
  ];
  return sentences.join(' ');
}

/** How a payback reads in a sentence: "paid back in 19 months", "never paid back". */
export function paidBack(paybackWords: string): string {
  if (paybackWords === 'never') return 'never paid back';
  return paybackWords === 'at once' ? 'with nothing to buy' : `paid back in ${paybackWords}`;
}

/** Errors found in the bills themselves, apart from all savings. */
export function comesBack(content: EditionContent): string {
  const { findings, bills, currency, billsIncomplete = 0 } = content;
  const left =
    billsIncomplete > 0
      ? ` ${capital(formatSpelled(billsIncomplete))} could not be compared, since readings are missing.`
      : '';
  const sum = findings.reduce((total, finding) => total + finding.amountMinor, 0);
  if (findings.length === 0 && billsIncomplete === bills.length)
    return 'Readings are missing in every bill, so none could be compared with the schedule.';
  if (findings.length === 0 && left)
    return `${capital(formatSpelled(bills.length - billsIncomplete))} of ${formatSpelled(bills.length)} bills agree with the schedule.${left}`;
  if (findings.length === 0)
    return `All ${formatSpelled(bills.length)} bills agree with the schedule. Nothing is to be claimed back.`;
  const wrong = new Set(findings.map((finding) => finding.billFrom)).size;
  const verb = wrong === 1 ? 'was' : 'were';
  return `${capital(formatSpelled(wrong))} of ${formatSpelled(bills.length)} bills ${verb} wrong; ${formatMoney(sum, currency)} is to be claimed from the utility and counted in no figure of this report.${left}`;
}

/** When the saving has paid for the work, and how far ahead one is at the end of what is shown. Major units. */
export function paidBackSentence(shown: { payback: string; years: number; ahead: number; currency: string }): string {
  const paid =
    shown.payback === 'at once'
      ? 'Nothing has to be bought'
      : `After ${shown.payback} the saving has paid for the work`;
  const ahead = formatMajor(shown.ahead, shown.currency, { whole: true });
  return `${paid}; after ${formatCount(shown.years, 'year')} you are ${ahead} ahead.`;
}

/** The payback picture's finding. */
export function paybackFinding({ plan, cashFlow, currency }: EditionContent): string {
  const last = cashFlow.at(-1);
  if (Math.round(plan.saving) <= 0 || !last) return 'There is no saving that could pay for any work.';
  if (!pays(plan)) {
    const late = plan.paybackWords !== 'never' && last.cumulative > 0;
    if (!late) return 'The saving does not pay for the work within the horizon.';
    const interest = `${formatNumber(plan.economics.discountPercent, { upTo: 1 })} % interest`;
    return `After ${plan.paybackWords} the saving has paid for the work, but not for ${interest} on it.`;
  }
  const years = Math.round(last.month / 12);
  return paidBackSentence({ payback: plan.paybackWords, years, ahead: last.cumulative, currency });
}

/** How an edition is named in feet and letters: "Edition 1 of 1 Dec 2026". */
export const editionName = (content: EditionContent, date: string) => `Edition ${content.number} of ${date}`;
