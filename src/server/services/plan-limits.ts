import { settingFault, spanSeries, type LimitedMotor } from '../../core/plan';
import type { FieldControl } from '../../core/machine';
import { controlsOf, type MotorSetting } from '../../schemas/plan-settings';
import { spanNames, type SpanSet } from '../../schemas/plan-spans';
import type { SpanRules } from './plan-spans';
import { gatheredHours, gridOf, shaftLoadOf, yearLoadOf, type RunningMotor } from './shaft-load';

/** A motor with the loads its settings must hold. */
export type LoadedLimits = LimitedMotor & RunningMotor;

/** The year and its parts that settings are checked over. */
export interface LimitYear {
  from: string;
  to: string;
  timeZone: string;
  set: SpanSet;
  /** null: the year is whole. */
  rules: SpanRules | null;
}

/** A setting that may not be: of which span, in the plan's order, and why. */
export interface SettingFault {
  span: number;
  words: string;
}

/** Distinct shaft loads of every span, in the plan's order. [kW] */
function loadsBySpan(motor: LoadedLimits, year: LimitYear): number[][] {
  const { timeZone, rules, set } = year;
  if (!rules) return [yearLoadOf(motor, year).hours.map(({ shaftKw }) => shaftKw)];
  const grid = gridOf(year);
  const { index } = spanSeries(rules.rules, grid, timeZone);
  const { shaftKw } = shaftLoadOf(motor, grid, timeZone);
  return spanNames(set).map((_, span) => {
    const inSpan = shaftKw.filter((_kw, i) => rules.of[index[i]!] === span);
    const loads = motor.metered ? gatheredHours(inSpan, motor.machine.ratedOutputKw).map((one) => one.shaftKw) : inSpan;
    return [...new Set(loads)].filter((kw) => kw > 0).sort((a, b) => b - a);
  });
}

/** What a motor may not be set to, span by span; a control for all spans is checked at the loads of each. */
export function settingFaults(motor: LoadedLimits, controls: FieldControl[], year: LimitYear): SettingFault[] {
  const bySpan = loadsBySpan(motor, year);
  if (controls.length === 1) {
    const words = settingFault(motor, controls[0]!, [...new Set(bySpan.flat())]);
    return words === null ? [] : [{ span: 0, words }];
  }
  return controls.flatMap((control, span) => {
    const words = settingFault(motor, control, bySpan[span] ?? []);
    return words === null ? [] : [{ span, words }];
  });
}

/** Why a stored setting cannot be offered any more, naming the span; null where it can. */
export function storedFault(motor: LoadedLimits, setting: MotorSetting, year: LimitYear): string | null {
  const controls = controlsOf(setting);
  const [fault] = settingFaults(motor, controls, year);
  if (!fault) return null;
  return controls.length === 1 ? fault.words : `${spanNames(year.set)[fault.span]}: ${fault.words}`;
}
