import { z } from 'zod';
import { isCalendarDate } from '../core/load';
import type { SynchronousMotor } from '../core/machine';

/** Ways of making the field's current. `static`: rectifier and slip rings; `shaft-dc`: an exciter with commutator on the shaft. */
export const exciterKinds = ['static', 'brushless', 'shaft-dc'] as const;
export type ExciterKind = (typeof exciterKinds)[number];

export const outputUnits = ['hp', 'kW'] as const;
export const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'] as const;
export type DayName = (typeof dayNames)[number];

/** An empty entry means "not on the plate"; it is then filled with a typical value and marked assumed. */
const absent = z.union([z.null(), z.undefined()]).transform(() => undefined);
const optionalNumber = (least: number, most: number, words: string) =>
  z.union([absent, z.number({ error: words }).min(least, words).max(most, words)]).optional();

const output = z
  .number({ error: 'Write the rated output.' })
  .positive('The rated output must be above 0.')
  .max(200_000, 'The rated output is at most 200,000.');

const curvePoint = z.object({
  fieldCurrentA: z.number({ error: 'Write amperes.' }).min(0, 'Amperes of 0 or more.').max(20_000),
  voltagePu: z.number({ error: 'Write per unit of rated voltage.' }).min(0, 'Per unit of 0 or more.').max(2),
});

type CurvePoint = z.output<typeof curvePoint>;

/** Number, from 1, of the first point that does not rise from the one before; the first may be the origin itself. */
function firstNotRising(curve: CurvePoint[]): number | null {
  let before: CurvePoint = { fieldCurrentA: 0, voltagePu: 0 };
  for (const [index, point] of curve.entries()) {
    const isOrigin = index === 0 && point.fieldCurrentA === 0 && point.voltagePu === 0;
    const rises = point.fieldCurrentA > before.fieldCurrentA && point.voltagePu > before.voltagePu;
    if (!isOrigin && !rises) return index + 1;
    before = point;
  }
  return null;
}

/** A nameplate as it is worded, plus data sheets and limits where there are any. */
export const plateInput = z
  .object({
    output,
    outputUnit: z.enum(outputUnits),
    voltageV: z
      .number({ error: 'Write the rated voltage in volts.' })
      .min(100, 'The rated voltage lies between 100 and 30,000 V between lines.')
      .max(30_000, 'The rated voltage lies between 100 and 30,000 V between lines.'),
    currentA: optionalNumber(0.1, 20_000, 'The rated armature current lies between 0.1 and 20,000 A.'),
    powerFactor: z
      .number({ error: 'Write the rated power factor, as 0.8 or 1.' })
      .min(0.5, 'The rated power factor lies between 0.5 and 1.')
      .max(1, 'The rated power factor cannot be above 1.'),
    speedRpm: optionalNumber(50, 3_600, 'The speed lies between 50 and 3,600 rpm.'),
    poles: optionalNumber(2, 120, 'The number of poles lies between 2 and 120.'),
    frequencyHz: z
      .number({ error: 'Write the frequency, 50 or 60 Hz.' })
      .min(16, 'The frequency lies between 16 and 70 Hz.')
      .max(70, 'The frequency lies between 16 and 70 Hz.'),
    efficiencyPercent: optionalNumber(
      40,
      99.5,
      'An efficiency lies between 40 and 99.5 %: more than 100 % would mean the motor makes power.',
    ),
    fieldCurrentA: z
      .number({ error: 'Write the rated field current in amperes.' })
      .positive('The rated field current must be above 0 A.')
      .max(5_000, 'The rated field current is at most 5,000 A.'),
    fieldVoltageV: optionalNumber(1, 2_000, 'The rated field voltage lies between 1 and 2,000 V.'),
    fieldResistanceOhm: optionalNumber(0.001, 1_000, 'The field resistance lies between 0.001 and 1,000 ohm.'),
    exciterKind: z.enum(exciterKinds, { error: 'Say how the field is supplied.' }),
    exciterFieldA: optionalNumber(0.1, 500, 'The exciter field current lies between 0.1 and 500 A.'),
    exciterNoLoadA: optionalNumber(0, 500, 'The exciter field current at no load lies between 0 and 500 A.'),
    exciterEfficiencyPercent: optionalNumber(30, 100, 'The exciter efficiency lies between 30 and 100 %.'),
    rotor: z.enum(['salient', 'round']).default('salient'),
    xdPu: optionalNumber(0.1, 5, 'Xd lies between 0.1 and 5 per unit.'),
    xqPu: optionalNumber(0.1, 5, 'Xq lies between 0.1 and 5 per unit.'),
    raPu: optionalNumber(0, 0.2, 'Ra lies between 0 and 0.2 per unit.'),
    xlPu: optionalNumber(0, 0.6, 'The leakage reactance lies between 0 and 0.6 per unit.'),
    openCircuitCurve: z.array(curvePoint).min(2, 'A curve has at least two points.').max(40).optional(),
    limits: z
      .object({
        fieldCurrentA: optionalNumber(0.1, 5_000, 'The field limit lies between 0.1 and 5,000 A.'),
        armatureCurrentA: optionalNumber(0.1, 20_000, 'The stator limit lies between 0.1 and 20,000 A.'),
        pullOutMargin: optionalNumber(1, 5, 'The pull-out margin is a ratio between 1 and 5.'),
        reservePercent: optionalNumber(0, 50, 'The reserve lies between 0 and 50 %.'),
      })
      .default({}),
    /** Where the figures come from: "photograph of 3 Sep", "data sheet". */
    source: z.string().trim().max(200, 'At most 200 characters.').optional(),
  })
  .superRefine((plate, context) => {
    const fault = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message });
    if (plate.fieldVoltageV === undefined && plate.fieldResistanceOhm === undefined) {
      fault(
        'fieldVoltageV',
        'Write the rated field voltage, or the hot resistance: the loss of the field depends on it.',
      );
    }
    if (plate.speedRpm === undefined && plate.poles === undefined) {
      fault('speedRpm', 'Write the speed or the number of poles.');
    }
    if (plate.poles !== undefined && plate.poles % 2 !== 0) fault('poles', 'The number of poles is even.');
    if (plate.exciterNoLoadA !== undefined && plate.exciterFieldA === undefined) {
      fault('exciterFieldA', 'Write the exciter field current at rated field too.');
    }
    if (plate.exciterFieldA !== undefined && (plate.exciterNoLoadA ?? 0) >= plate.exciterFieldA) {
      fault('exciterNoLoadA', 'At no load the exciter field is below the one at rated field. Check both figures.');
    }
    const flat = plate.openCircuitCurve ? firstNotRising(plate.openCircuitCurve) : null;
    if (flat !== null) {
      const message = `Point ${flat} of the curve does not rise from the one before it. Write the points upwards, amperes and voltage.`;
      fault('openCircuitCurve', message);
    }
    if (plate.xdPu !== undefined && plate.xqPu !== undefined && plate.xqPu > plate.xdPu) {
      fault('xqPu', 'Xq is at most Xd. Check whether the two were exchanged.');
    }
  });
export type PlateInput = z.output<typeof plateInput>;

const isoDay = z.string().refine(isCalendarDate, 'Write a day of the calendar as 2026-02-28.');

const clockHour = z
  .number({ error: 'Write an hour of the day, 0 to 24.' })
  .min(0, 'Hours lie between 0 and 24.')
  .max(24, 'Hours lie between 0 and 24.')
  .multipleOf(0.25, 'Hours go by quarters: 6, 6.25, 6.5, 6.75.');

/** Shaft load of part of a week. Hours are local clock hours, [fromHour, toHour); toHour 24 is midnight. */
const loadRule = z
  .object({
    days: z.array(z.enum(dayNames)).min(1, 'Choose at least one day.'),
    fromHour: clockHour,
    toHour: clockHour,
    load: z
      .number({ error: 'Write the load.' })
      .min(0, 'The load is 0 or more.')
      .max(200_000, 'The load is at most 200,000 kW.'),
    unit: z.enum(['percent', 'kW']),
  })
  .refine((rule) => rule.fromHour !== rule.toHour, { path: ['toHour'], message: 'The rule ends where it begins.' })
  .refine((rule) => rule.unit === 'kW' || rule.load <= 150, {
    path: ['load'],
    message: 'A load above 150 % of rated output is no lasting load. Check the figure.',
  });

/** When a motor runs and at what load. Hours that no rule names, and a load of 0, are standstill; later rules win. */
export const calendarInput = z.object({
  rules: z.array(loadRule).min(1, 'Say at least once when the motor runs.').max(20, 'At most 20 rules.'),
  shutdowns: z
    .array(
      z
        .object({ from: isoDay, lastDay: isoDay })
        .refine((range) => range.from <= range.lastDay, { path: ['lastDay'], message: 'It ends before it begins.' }),
    )
    .max(40, 'At most 40 shutdowns.')
    .default([]),
});
export type CalendarInput = z.output<typeof calendarInput>;
export type LoadRule = CalendarInput['rules'][number];

/** A motor as its form sends it. */
export const motorInput = z.object({
  name: z
    .string()
    .trim()
    .min(1, 'Give the motor its name, as on the one-line diagram.')
    .max(40, 'At most 40 characters.'),
  drives: z.string().trim().max(80, 'At most 80 characters.').optional(),
  /** The meter it stands behind; left out: the engagement's own, or the one it stood behind before. */
  meterId: z.number({ error: 'Choose the meter.' }).int().positive().optional(),
  plate: plateInput,
  calendar: calendarInput,
  fieldTodayA: z
    .number({ error: 'Write the field current it runs at today, in amperes.' })
    .positive('The field current must be above 0 A.'),
  /** `panel`: the exciter's field as the panel of a brushless machine shows it. */
  fieldReadAt: z.enum(['field', 'panel']).default('field'),
});
export type MotorInput = z.output<typeof motorInput>;

export const motorChangeInput = motorInput.extend({ version: z.number().int() });
export type MotorChangeInput = z.output<typeof motorChangeInput>;

/** A value that is not on the plate, and what its typical range does to the kvar in hand. */
export interface AssumedValue {
  motorId: number;
  motorName: string;
  field: string;
  label: string;
  value: number;
  unit: string;
  /** Typical range of the value. */
  range: [number, number] | null;
  /** Change of deliverable kvar at the usual load, at the range's ends. */
  kvarEffect: [number, number] | null;
  why: string;
}

/** A check of the plate against itself: what disagrees, by how much. */
export interface PlateNote {
  field: string;
  message: string;
  severity: 'warning' | 'error';
}

/** The machine as the core reads it, complete; plain JSON for the browser's own calculation. */
export type MachineView = SynchronousMotor;

/** A motor with its present state and what it may give at its usual load. Kvar delivered is positive when leading. */
export interface MotorView {
  id: number;
  version: number;
  name: string;
  drives: string | null;
  meterId: number;
  plate: PlateInput;
  calendar: CalendarInput;
  fieldTodayA: number;
  panelTodayA?: number;
  machine: MachineView;
  assumed: AssumedValue[];
  notes: PlateNote[];
  ratedKva: number;
  ratedCurrentA: number;
  speedRpm: number;
  usualShaftKw: number;
  usualLoadPercent: number;
  hoursRunning: number;
  kvarToday: number;
  pullOutToday: number;
  armatureTodayA: number;
  capability: { kvarDelivered: number | null; fieldCurrentA: number | null; binding: string };
  limits: { fieldA: number; armatureA: number; pullOutMargin: number; reservePercent: number };
  /** Extra watts per kvar gained from today to the most it may deliver. */
  wattsPerKvar: number | null;
}

/** The version of a row that was seen, for changes that carry nothing else. */
export const versionInput = z.object({ version: z.number().int() });
