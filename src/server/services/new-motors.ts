import type { CalendarInput } from '../../schemas/motor';
import type { ReplacementInput } from '../../schemas/plan-input';
import { controlValueKey } from '../../schemas/plan-settings';
import { ServiceError, type FieldErrors } from '../errors';
import { limitsOf } from '../presenters/motor';
import { completePlate, machineOrThrow } from './nameplates';
import { inductionKw } from './plan-acts';
import { settingFaults, type LimitYear, type LoadedLimits } from './plan-limits';
import { ruleLoadKw } from './shaft-load';

/** Loads of a new motor: those of the induction motor in whose place it stands, in kW. */
const loadsInKw = ({ calendar, induction }: ReplacementInput): CalendarInput => ({
  ...calendar,
  rules: calendar.rules.map((rule) => ({ ...rule, load: ruleLoadKw(rule, inductionKw(induction)), unit: 'kW' })),
});

/** A new motor as limits see it. @throws {ServiceError} 422 where its plate contradicts itself */
function limitedMotor(one: ReplacementInput): LoadedLimits {
  const machine = machineOrThrow(one.plate);
  const limits = limitsOf(machine, completePlate(one.plate));
  return { name: one.name, machine, limits, calendar: loadsInKw(one), fieldTodayA: machine.ratedFieldCurrentA };
}

/**
 * What is wrong with a new motor of a plan, by entry below it: a plate that contradicts itself, a setting beyond a limit at a load of its
 * calendar, a load that no excitation holds.
 */
export function newMotorFaults(one: ReplacementInput, year: LimitYear): FieldErrors {
  try {
    const faults = settingFaults(limitedMotor(one), one.controls, year);
    return Object.fromEntries(
      faults.map(({ span, words }) => [
        `controls.${span}.${controlValueKey[(one.controls[span] ?? one.controls[0]!).holds]}`,
        [words],
      ]),
    );
  } catch (error) {
    if (error instanceof ServiceError && error.fields) return error.fields;
    throw error;
  }
}
