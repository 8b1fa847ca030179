import { addDays } from '../../core/load';
import { mostAfterDue, type ReminderRule } from '../../schemas/request';

/** A reminder by the rule of its request: 0 before the due day, 1 on it, 2 and on after it. */
export interface ReminderStep {
  step: number;
  day: string;
}

interface Ruled {
  dueOn: string;
  sentOn: string;
  rule: ReminderRule;
}

/** Days on which people are reminded, in order. One that falls on the day of sending or before it is none. */
export function reminderSteps({ dueOn, sentOn, rule }: Ruled): ReminderStep[] {
  const { daysBefore, onDue, everyDaysAfter } = rule;
  const steps: ReminderStep[] = [];
  if (daysBefore !== null) steps.push({ step: 0, day: addDays(dueOn, -daysBefore) });
  if (onDue) steps.push({ step: 1, day: dueOn });
  if (everyDaysAfter !== null) {
    for (let after = 1; after <= mostAfterDue; after++)
      steps.push({ step: 1 + after, day: addDays(dueOn, after * everyDaysAfter) });
  }
  return steps.filter(({ day }) => day > sentOn);
}

/** The step that counts on a day: the latest reached. Those a server slept through are left out. */
export const stepOn = (ruled: Ruled, day: string): ReminderStep | null =>
  reminderSteps(ruled).findLast((step) => step.day <= day) ?? null;

/** The next day after one on which a reminder goes. */
export const nextReminderDay = (ruled: Ruled, day: string): string | null =>
  reminderSteps(ruled).find((step) => step.day > day)?.day ?? null;
