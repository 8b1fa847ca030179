import type { EditionContent, EditionPlan } from '../../schemas/edition';
import { capital, formatCount, formatMajor, formatMoney, formatNumber, formatSpelled } from '../ui/format';

/** Whether the proposed plan brings more than it costs to leave everything alone. */
export const pays = (plan: EditionPlan) => plan.saving > 0 && plan.appraisal.npv > 0;

/** Motors whose field the plan changes. */
export const changedFields = (plan: EditionPlan) => plan.fields.filter((field) => field.fieldA !== field.todayA);

/** The report's answer in one sentence. */
export function answer({ plan, currency }: EditionContent): string {
  const changed = changedFields(plan).length;
  if (!pays(plan)) {
    return 'Leave the fields as they are: no setting within the limits pays for its own losses and work.';
  }
  const motors =
    changed === 1 ? 'One motor you already own' : `${capital(formatSpelled(changed))} motors you already own`;
  const paid =
    plan.appraisal.simplePaybackYears === 0
      ? 'nothing has to be bought'
      : `the work pays for itself in ${plan.paybackWords}`;
  return `${motors} can cut your power bills by ${formatMajor(plan.saving, currency, { whole: true })} a year, and ${paid}.`;
}

/** What poor power factor costs today, for people who do not work with it. */
export function costNow({ standing, currency }: EditionContent): string {
  return `Your bills carry ${formatMajor(standing.reactiveCost, currency, { whole: true })} a year for poor power factor: current the utility must carry that does no work.`;
}

/** What is to be done, motor by motor. */
export function toDo({ plan, motors, currency }: EditionContent): string {
  const named = changedFields(plan).map((field) => {
    const drives = motors.find((motor) => motor.motorId === field.motorId)?.drives;
    const who = drives ? `${field.name} (${drives.toLowerCase()})` : field.name;
    return `${who} from ${formatNumber(field.todayA, { upTo: 1 })} to ${formatNumber(field.fieldA, { upTo: 1 })} A`;
  });
  if (named.length === 0) return 'Nothing is to be changed at the motors.';
  const work =
    plan.capitalCost > 0 ? ` The work costs ${formatMajor(plan.capitalCost, currency, { whole: true })} once.` : '';
  return `Raise the field of ${named.join(' and of ')}. Motors already in place do it; no capacitors are bought.${work}`;
}

/** Errors found in the bills themselves, apart from all savings. */
export function comesBack({ findings, bills, currency }: EditionContent): string {
  const sum = findings.reduce((total, finding) => total + finding.amountMinor, 0);
  if (findings.length === 0)
    return `All ${formatSpelled(bills.length)} bills agree with the schedule. Nothing is to be claimed back.`;
  const wrong = new Set(findings.map((finding) => finding.billFrom)).size;
  const verb = wrong === 1 ? 'was' : 'were';
  return `${capital(formatSpelled(wrong))} of ${formatSpelled(bills.length)} bills ${verb} wrong; ${formatMoney(sum, currency)} is to be claimed from the utility and counted in no figure of this report.`;
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
  if (!pays(plan) || !last) return 'The saving does not pay for the work within the horizon.';
  const years = Math.round(last.month / 12);
  return paidBackSentence({ payback: plan.paybackWords, years, ahead: last.cumulative, currency });
}

/** How an edition is named in feet and letters: "Edition 1 of 1 Dec 2026". */
export const editionName = (content: EditionContent, date: string) => `Edition ${content.number} of ${date}`;
