import { z } from 'zod';
import { calendarInput } from './motor';
import { economicsInput, moneyInput, refineMoney } from './plan-money';
import { plateInput } from './plate';
import { spanNames, spanSetInput } from './plan-spans';

const within = (least: number, most: number, words: string) =>
  z.number({ error: words }).min(least, words).max(most, words);

const fieldA = z
  .number({ error: 'Write a field current in amperes.' })
  .positive('The field current must be above 0 A.');
const powerFactor = within(0.5, 1, 'A power factor lies between 0.5 and 1, as 0.95.');

/** What a motor's regulator, or a hand at its rheostat, holds. */
export const fieldControlInput = z.discriminatedUnion('holds', [
  z.object({ holds: z.literal('field-current'), fieldCurrentA: fieldA }),
  z.object({
    holds: z.literal('field-voltage'),
    fieldVoltageV: z.number({ error: 'Write a field voltage in volts.' }).positive('The voltage must be above 0 V.'),
    fieldC: within(-40, 200, 'The field winding lies between −40 and 200 °C.').optional(),
  }),
  z.object({ holds: z.literal('power-factor'), powerFactor, leading: z.boolean() }),
  z.object({
    holds: z.literal('kvar'),
    kvarDelivered: within(-100_000, 100_000, 'Write the kvar the motor delivers; below 0 where it absorbs.'),
  }),
  z.object({
    holds: z.literal('voltage'),
    setPu: within(0.8, 1.2, 'The set voltage lies between 80 and 120 % of rated.'),
    droopPu: within(0.001, 0.2, 'The droop lies between 0.1 and 20 %.'),
  }),
  z.object({ holds: z.literal('plant-power-factor'), powerFactor }),
]);

/** A motor set to a constant field current for the year, or to a control: one for all, or one a span. */
const motorSettingInput = z
  .object({
    motorId: z.number().int(),
    fieldA: fieldA.optional(),
    controls: z.array(fieldControlInput).min(1, 'Say what the motor holds.').max(8).optional(),
    /** Regulator and its fitting, once. */
    equipmentCost: moneyInput.optional(),
  })
  .refine((setting) => (setting.fieldA === undefined) !== (setting.controls === undefined), {
    path: ['fieldA'],
    message: 'Write a field current in amperes.',
  });
export type MotorSettingInput = z.output<typeof motorSettingInput>;

/** Capacitors: fixed, or switched in equal steps by a controller that holds a power factor. */
const bankInput = z.object({
  name: z.string().trim().max(60, 'At most 60 characters.').default(''),
  steps: within(1, 60, 'A bank has 1 to 60 steps.').int('Write a whole number of steps.'),
  stepKvar: z
    .number({ error: 'Write the size of a step in kvar.' })
    .positive('A step is larger than 0 kvar.')
    .max(100_000, 'A step is at most 100,000 kvar.'),
  lossWPerKvar: within(0, 20, 'Losses lie between 0 and 20 W per kvar.'),
  /** Reactors, per cent of the capacitive reactance; absent: none. */
  detuningPercent: within(1, 25, 'Detuning reactors lie between 1 and 25 %.').optional(),
  /** Lagging, held by a controller at the meter; absent: every step is always connected. */
  holdsPowerFactor: powerFactor.optional(),
  /** Meter it stands behind; absent: the engagement's own. */
  meterId: z.number().int().positive().optional(),
  /** Bank with its fitting, once. */
  cost: moneyInput.default(0),
});
export type BankInput = z.output<typeof bankInput>;

const sheetPoint = z.object({
  loadPercent: within(1, 150, 'A load lies between 1 and 150 % of rated output.'),
  efficiencyPercent: within(20, 99.5, 'An efficiency lies between 20 and 99.5 %.'),
  powerFactor: within(0.05, 1, 'A power factor lies between 0.05 and 1.'),
});

/** A new synchronous motor in place of an induction motor the meter has seen until now. */
const replacementInput = z.object({
  name: z.string().trim().min(1, 'Give the new motor a name, as M-9.').max(40, 'At most 40 characters.'),
  induction: z.object({
    output: within(1, 200_000, 'Write the rated output of the induction motor.'),
    outputUnit: z.enum(['hp', 'kW']),
    points: z
      .array(sheetPoint)
      .min(2, 'Write two points of the data sheet at least, as half and full load.')
      .max(8, 'At most eight points.')
      .refine((points) => points.every((point, k) => k === 0 || point.loadPercent > points[k - 1]!.loadPercent), {
        message: 'Write the points by rising load.',
      }),
  }),
  plate: plateInput,
  calendar: calendarInput,
  controls: z.array(fieldControlInput).min(1, 'Say what the new motor holds.').max(8),
  meterId: z.number().int().positive().optional(),
  cost: moneyInput.default(0),
});
export type ReplacementInput = z.output<typeof replacementInput>;

const planFields = z.object({
  name: z.string().trim().min(1, 'Give the plan a name.').max(80, 'A name has at most 80 characters.'),
  spans: spanSetInput.default({ by: 'year' }),
  fields: z.array(motorSettingInput).max(40, 'A plan has at most 40 motors.'),
  banks: z.array(bankInput).max(8, 'A plan has at most eight banks.').default([]),
  replacements: z.array(replacementInput).max(8, 'A plan has at most eight new motors.').default([]),
  /** Work at the motors, once: visit, tests, protection review. What regulators, banks and new motors cost stands with them. */
  workCost: moneyInput,
  yearlyUpkeep: moneyInput,
  economics: economicsInput,
  /** Job whose result the plan is made of. */
  searchJobId: z.number().int().optional(),
});

/** Controls are one for all, or one for each span. */
function oneASpan(plan: z.output<typeof planFields>, context: z.RefinementCtx): void {
  const count = spanNames(plan.spans).length;
  const check = (path: (string | number)[], controls: unknown[] | undefined) => {
    if (!controls || controls.length === 1 || controls.length === count) return;
    const message = `The year has ${count} parts and this motor ${controls.length} settings. Write one for each, or one for all.`;
    context.addIssue({ code: 'custom', path: [...path, 'controls'], message });
  };
  plan.fields.forEach(({ controls }, index) => check(['fields', index], controls));
  plan.replacements.forEach(({ controls }, index) => check(['replacements', index], controls));
}

type PlanFields = z.output<typeof planFields>;

/** What a plan costs once, all parts together. */
export const capitalOf = ({
  workCost,
  fields,
  banks,
  replacements,
}: Pick<PlanFields, 'workCost' | 'fields' | 'banks' | 'replacements'>) =>
  workCost +
  [...fields.map((field) => field.equipmentCost ?? 0), ...[...banks, ...replacements].map(({ cost }) => cost)].reduce(
    (sum, cost) => sum + cost,
    0,
  );

function checkPlan(plan: PlanFields, context: z.RefinementCtx): void {
  oneASpan(plan, context);
  refineMoney({ ...plan, capitalCost: capitalOf(plan) }, context);
}

/** A plan as its form sends it. Amounts in major units. */
export const planInput = planFields.superRefine(checkPlan);
export type PlanInput = z.output<typeof planInput>;

/** A change of a plan carries the version that was seen. */
export const planChangeInput = planFields.extend({ version: z.number().int() }).superRefine(checkPlan);
export type PlanChangeInput = z.output<typeof planChangeInput>;

export const planChoiceInput = z.object({ version: z.number().int(), chosen: z.boolean() });
