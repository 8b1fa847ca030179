import { DEFAULT_PULL_OUT_MARGIN, controlField, fixField, operatingPoint, ratedCurrentA } from '../machine';
import type { FieldControl, Limit, OperatingPoint, SynchronousMotor } from '../machine';
import { inductionTaken } from './induction';
import { motorSpells } from './motor-spells';
import type { Spell } from './motor-spells';
import type { PlacedMotor } from './placed-motor';
import type { PlanMotor, Replacement, Spans } from './types';

/** What a plan does to one motor in one span of the year. Hours count intervals whether metered or missing. */
export interface MotorSpanResult {
  hoursRunning: number;
  /** Load the motor spends most hours at; 0 when it never runs. [kW] */
  usualShaftKw: number;
  /** kvar delivered at the usual load, as it stands and with the plan: the mean where the plan answers interval by interval. [kvar] */
  kvarStanding: number;
  kvarPlan: number;
  /** Field current with the plan at the usual load; null when it never runs. [A] */
  fieldPlanA: number | null;
  /** Energy the plan makes the motor take beyond standing; negative when it saves. [kWh] */
  extraLossKwh: number;
}

/** What a plan does to one motor over the series. */
export interface MotorPlanResult extends MotorSpanResult {
  /** The same in each span. */
  spans: MotorSpanResult[];
  /** Hours by the limit that stands nearest with the plan: the one of which the greatest share is used. */
  nearestLimitHours: Record<Limit, number>;
  /** Hours beyond each limit with the plan. */
  beyondHours: Record<Limit, number>;
  /** Hours in which a limiter keeps a regulator from what it should hold. */
  limitedHours: number;
  /** Least ratio of pull-out to load, as it stands and with the plan; null when it never runs, or an induction motor stands. */
  leastPullOutRatioStanding: number | null;
  leastPullOutRatio: number | null;
  /** Greatest shares of field and armature limit used with the plan, before the reserve. [unitless] */
  greatestFieldShare: number;
  greatestArmatureShare: number;
}

/** A motor with all that its figures are made of. */
export interface MotorInResult {
  placed: PlacedMotor;
  source: PlanMotor | Replacement;
  controls: FieldControl[];
  spans?: Spans;
  /** Per interval, where the motor is answered so. */
  deliveredKvar: Float64Array;
  limited: Uint8Array;
  /** Length of an interval. [h] */
  hours: number;
}

/** Figures of one motor over the series. */
export function motorResult(input: MotorInResult): MotorPlanResult {
  const standing = standingOf(input.source);
  const planned = plannedOf(input);
  const count = input.spans?.count ?? 1;
  const figures = motorSpells(input).map((spell): Figures => {
    const point = planned(spell);
    return { spell, point, standing: standing(spell.shaftKw), limited: spell.limited || point.limited };
  });
  const whole: MotorPlanResult = {
    ...spanResult(figures),
    spans: Array.from({ length: count }, (_, span) => spanResult(figures.filter(({ spell }) => spell.span === span))),
    nearestLimitHours: { armature: 0, field: 0, 'pull-out': 0 },
    beyondHours: { armature: 0, field: 0, 'pull-out': 0 },
    limitedHours: 0,
    leastPullOutRatioStanding: null,
    leastPullOutRatio: null,
    greatestFieldShare: 0,
    greatestArmatureShare: 0,
  };
  for (const one of figures) addLimits(whole, input.placed.motor, one);
  return whole;
}

interface Standing {
  kvar: number;
  inputKw: number;
  pullOutRatio: number | null;
}

interface Figures {
  spell: Spell;
  point: OperatingPoint;
  standing: Standing;
  limited: boolean;
}

/** What the motor, or the one it replaces, takes as it stands. */
function standingOf(source: PlanMotor | Replacement): (shaftKw: number) => Standing {
  if ('induction' in source) {
    return (shaftKw) => {
      const { kvar, inputKw } = inductionTaken(source.induction, Float64Array.of(shaftKw));
      return { kvar: kvar[0]!, inputKw: inputKw[0]!, pullOutRatio: null };
    };
  }
  const { motor, standingFieldA, voltagePu } = source;
  return fixField(motor, { fieldCurrentA: standingFieldA, voltagePu }).point;
}

/** The point a motor runs at with the plan. */
function plannedOf({ source, controls }: MotorInResult): (spell: Spell) => OperatingPoint & { limited: boolean } {
  const { motor } = source;
  const { voltagePu, leastFieldA } = 'induction' in source ? { voltagePu: undefined, leastFieldA: undefined } : source;
  const bySpan = controls.map((control) =>
    control.holds === 'voltage' || control.holds === 'plant-power-factor'
      ? null
      : controlField(motor, control, { voltagePu, leastFieldA }),
  );
  return ({ span, shaftKw, deliveredKvar }) => {
    const own = bySpan[controls.length === 1 ? 0 : span]!;
    if (!own) return { ...operatingPoint(motor, { shaftKw, voltagePu, kvar: -deliveredKvar }), limited: false };
    const point = own.point(shaftKw);
    return { ...point, limited: point.limited !== null };
  };
}

function spanResult(figures: Figures[]): MotorSpanResult {
  const hoursAt = new Map<number, number>();
  for (const { spell } of figures) hoursAt.set(spell.shaftKw, (hoursAt.get(spell.shaftKw) ?? 0) + spell.hours);
  const [usualShaftKw] = [...hoursAt].reduce((a, b) => (b[1] > a[1] ? b : a), [0, 0]);
  const usual = figures.filter(({ spell }) => spell.shaftKw === usualShaftKw);
  const mean = (of: (one: Figures) => number) => {
    const hours = usual.reduce((sum, { spell }) => sum + spell.hours, 0);
    return hours === 0 ? 0 : usual.reduce((sum, one) => sum + of(one) * one.spell.hours, 0) / hours;
  };
  return {
    hoursRunning: figures.reduce((sum, { spell }) => sum + spell.hours, 0),
    usualShaftKw,
    kvarStanding: mean(({ standing }) => -standing.kvar),
    kvarPlan: mean(({ point }) => -point.kvar),
    fieldPlanA: usual.length === 0 ? null : mean(({ point }) => point.fieldCurrentA),
    extraLossKwh: figures.reduce(
      (sum, { point, standing, spell }) => sum + (point.inputKw - standing.inputKw) * spell.hours,
      0,
    ),
  };
}

function addLimits(
  result: MotorPlanResult,
  motor: SynchronousMotor,
  { spell, point, standing, limited }: Figures,
): void {
  const shares = limitShares(motor, point);
  const reserve = motor.limits?.reserve ?? 0;
  const nearest = (Object.keys(shares) as Limit[]).reduce((a, b) => (shares[b] > shares[a] ? b : a));
  result.nearestLimitHours[nearest] += spell.hours;
  for (const limit of point.beyond) result.beyondHours[limit] += spell.hours;
  if (limited) result.limitedHours += spell.hours;
  const least = (known: number | null, ratio: number) => (known === null ? ratio : Math.min(known, ratio));
  if (standing.pullOutRatio !== null)
    result.leastPullOutRatioStanding = least(result.leastPullOutRatioStanding, standing.pullOutRatio);
  result.leastPullOutRatio = least(result.leastPullOutRatio, point.pullOutRatio);
  result.greatestFieldShare = Math.max(result.greatestFieldShare, shares.field * (1 - reserve));
  result.greatestArmatureShare = Math.max(result.greatestArmatureShare, shares.armature * (1 - reserve));
}

/** Share of each limit a point uses, after the reserve; 1 stands at the limit. */
function limitShares(motor: SynchronousMotor, point: OperatingPoint): Record<Limit, number> {
  const reserve = motor.limits?.reserve ?? 0;
  const fieldA = (motor.limits?.fieldCurrentA ?? motor.ratedFieldCurrentA) * (1 - reserve);
  const armatureA = (motor.limits?.armatureCurrentA ?? ratedCurrentA(motor)) * (1 - reserve);
  const margin = motor.limits?.pullOutMargin ?? DEFAULT_PULL_OUT_MARGIN;
  return {
    armature: point.lineCurrentA / armatureA,
    field: point.fieldCurrentA / fieldA,
    'pull-out': margin / point.pullOutRatio,
  };
}
