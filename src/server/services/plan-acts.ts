import { KW_PER_HP, type FieldControl, type SynchronousMotor } from '../../core/machine';
import type { CapacitorBank } from '../../core/plan';
import type { BankInput, ReplacementInput } from '../../schemas/plan-input';
import { controlsOf } from '../../schemas/plan-settings';
import { conflict } from '../errors';
import type { Plan } from '../models/Plan';
import { banksOf, motorSettings, replacementsOf } from '../presenters/plan-row';
import type { TaskAct, TaskReplacement } from '../workers/tasks';
import type { OpenEngagement } from './engagements';
import { completePlate } from './nameplates';
import { spanRules, type SpanYear } from './plan-spans';

/** The plant as it runs now. */
export const standingAct: TaskAct = {};

/**
 * What a stored plan does, as the calculations take it.
 *
 * @throws {ServiceError} 409 where the plate of a new motor cannot be read, or the schedule has other seasons by now
 */
export function actOf(plan: Plan, opened: OpenEngagement, year: SpanYear): TaskAct {
  const { currency } = opened.engagement;
  const spans = spanRules(plan.spans, year);
  const bySpan = (controls: FieldControl[]) =>
    spans && controls.length > 1 ? spans.of.map((span) => controls[span]!) : controls;
  return {
    ...(spans ? { spans: spans.rules } : {}),
    controls: motorSettings(plan).map((setting) => ({
      motorId: setting.motorId,
      controls: bySpan(controlsOf(setting)),
    })),
    banks: banksOf(plan, currency).map((bank) => taskBank(bank, opened)),
    replacements: replacementsOf(plan, currency).map((one) => taskReplacement(one, opened, bySpan(one.controls))),
  };
}

const positionOf = ({ meters }: OpenEngagement, meterId: number | undefined) =>
  Math.max(
    0,
    meters.findIndex(({ id }) => id === meterId),
  );

function taskBank(bank: BankInput, opened: OpenEngagement): CapacitorBank {
  const { steps, stepKvar, lossWPerKvar, holdsPowerFactor, meterId } = bank;
  return {
    steps,
    stepKvar,
    lossWPerKvar,
    behind: positionOf(opened, meterId),
    ...(holdsPowerFactor === undefined ? {} : { holdsPowerFactor }),
  };
}

/** Rated output of the induction motor that is replaced. [kW] */
export const inductionKw = ({ output, outputUnit }: ReplacementInput['induction']) =>
  outputUnit === 'kW' ? output : output * KW_PER_HP;

/** The machine a new motor's plate makes. */
export function replacementMachine({ name, plate }: ReplacementInput): SynchronousMotor {
  const { motor } = completePlate(plate);
  if (!motor) throw conflict(`The plate of the new motor ${name} cannot be read. Open the plan and correct it.`);
  return motor;
}

function taskReplacement(one: ReplacementInput, opened: OpenEngagement, controls: FieldControl[]): TaskReplacement {
  return {
    induction: {
      ratedOutputKw: inductionKw(one.induction),
      points: one.induction.points.map(({ loadPercent, efficiencyPercent, powerFactor }) => ({
        loadShare: loadPercent / 100,
        efficiency: efficiencyPercent / 100,
        powerFactor,
      })),
    },
    machine: replacementMachine(one),
    calendar: one.calendar,
    controls,
    behind: positionOf(opened, one.meterId),
  };
}

/** The same act as a text that is equal for equal acts, whatever the order of its motors. */
export function actKey({ spans, controls = [], banks = [], replacements = [] }: TaskAct): string {
  const goesBySpan = [...controls, ...replacements].some((one) => one.controls.length > 1);
  const ordered = [...controls].sort((a, b) => a.motorId - b.motorId);
  return JSON.stringify([goesBySpan ? spans : null, ordered, banks, replacements]);
}
