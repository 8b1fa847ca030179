import { z } from 'zod';
import type { LoadSource } from './shaft-load';
import { isCalendarDate } from '../core/load';
import type { SynchronousMotor } from '../core/machine';
import { plateInput, type PlateInput } from './plate';

export const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'] as const;
export type DayName = (typeof dayNames)[number];

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

/** What the panel of a brushless machine shows: amperes of the exciter's field. */
export interface PanelView {
  todayA: number;
  ratedA: number;
  /** After the reserve. */
  limitA: number;
}

/** Greatest kvar at a voltage, and the limit that sets it. */
export interface CapabilityView {
  kvarDelivered: number | null;
  fieldCurrentA: number | null;
  binding: string;
}

/** Limits of a motor, after the reserve. */
export interface LimitsView {
  fieldA: number;
  /** Whether the field or its exciter ends there. */
  fieldBy: 'field' | 'exciter';
  armatureA: number;
  pullOutMargin: number;
  reservePercent: number;
  /** Least field that regulator or maker allow, besides the pull-out margin. */
  leastFieldA?: number;
  /** Bus voltages at which all of them hold. */
  voltageBandPu?: { low: number; high: number };
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
  /** Of the machine's own field. */
  fieldTodayA: number;
  /** Brushless machines whose exciter field is known. */
  panel?: PanelView;
  machine: MachineView;
  assumed: AssumedValue[];
  notes: PlateNote[];
  ratedKva: number;
  ratedCurrentA: number;
  speedRpm: number;
  /** What tells its shaft load. */
  loadSource: LoadSource;
  usualShaftKw: number;
  usualLoadPercent: number;
  hoursRunning: number;
  /** Hours of the year at each shaft load, most hours first. */
  loadHours: { shaftKw: number; hours: number }[];
  kvarToday: number;
  pullOutToday: number;
  armatureTodayA: number;
  /** At rated voltage, or what both ends of the voltage band admit. */
  capability: CapabilityView;
  /** At the ends of the voltage band, where one is set. */
  band: { low: CapabilityView & { voltagePu: number }; high: CapabilityView & { voltagePu: number } } | null;
  limits: LimitsView;
  /** Extra watts per kvar gained from today to the most it may deliver. */
  wattsPerKvar: number | null;
}

/** The version of a row that was seen, for changes that carry nothing else. */
export const versionInput = z.object({ version: z.number().int() });
