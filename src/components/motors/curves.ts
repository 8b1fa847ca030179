import { operatingPoint, PullOutError, unityField, vCurve, type SynchronousMotor } from '../../core/machine';
import type { MotorView } from '../../schemas/motor';
import type { CurrentPoint, VCurveData } from '../charts/v-curve';
import { formatNumber } from '../ui/format';
import { fieldMeter } from './field-meter';

const loadPercents = [0, 25, 50, 75, 100] as const;
const pointsPerCurve = 70;

/** A field setting on a picture: the plan's, or the one being tried. */
export interface NamedField {
  name: string;
  /** Of the machine's own field. [A] */
  fieldA: number;
}

/** Whether a field current holds a load with at least a pull-out ratio. */
function holds(machine: SynchronousMotor, shaftKw: number, fieldCurrentA: number, ratio: number): boolean {
  try {
    return operatingPoint(machine, { shaftKw, fieldCurrentA }).pullOutRatio >= ratio;
  } catch (error) {
    if (error instanceof PullOutError) return false;
    throw error;
  }
}

/** Least field current that holds a load with a pull-out ratio, by halving; null above the search's end. */
export function leastFieldA(machine: SynchronousMotor, shaftKw: number, ratio: number): number | null {
  let low = 0;
  let high = 2 * machine.ratedFieldCurrentA;
  if (!holds(machine, shaftKw, high, ratio)) return null;
  for (let step = 0; step < 24; step += 1) {
    const middle = (low + high) / 2;
    if (holds(machine, shaftKw, middle, ratio)) high = middle;
    else low = middle;
  }
  return high;
}

function currentsAt(machine: SynchronousMotor, shaftKw: number, fieldCurrentA: number): CurrentPoint | null {
  try {
    return { fieldA: fieldCurrentA, armatureA: operatingPoint(machine, { shaftKw, fieldCurrentA }).lineCurrentA };
  } catch (error) {
    if (error instanceof PullOutError) return null;
    throw error;
  }
}

/** Least admissible field over the loads, as a line of the plane. */
function pullOutEdge(machine: SynchronousMotor, margin: number): CurrentPoint[] {
  const edge: CurrentPoint[] = [];
  for (let percent = 5; percent <= 130; percent += 5) {
    const shaftKw = (percent / 100) * machine.ratedOutputKw;
    const fieldA = leastFieldA(machine, shaftKw, margin);
    const point = fieldA === null ? null : currentsAt(machine, shaftKw, fieldA);
    if (point) edge.push(point);
  }
  return edge;
}

/** Five loads, the usual one in place of its nearest so that the names of the curves keep apart. */
function loadsOnPicture(usualPercent: number): number[] {
  const gap = (percent: number) => Math.abs(percent - usualPercent);
  const nearest = loadPercents.reduce((a, b) => (gap(b) < gap(a) ? b : a));
  return loadPercents.map((percent) => (percent === nearest ? usualPercent : percent));
}

/** The family of V-curves of a motor with its limits and marks, in the amperes its ammeter shows. */
export function vCurveData(motor: MotorView, plan: NamedField | null): VCurveData {
  const { machine, limits, usualShaftKw } = motor;
  const meter = fieldMeter(machine);
  const shown = (point: CurrentPoint) => ({ ...point, fieldA: meter.shownA(point.fieldA) });
  const shownOrNone = (point: CurrentPoint | null) => point && shown(point);
  const fieldToA = Math.max(limits.fieldA, machine.ratedFieldCurrentA) * 1.1;
  const usualLoadPercent = Math.round(motor.usualLoadPercent);
  const percents = loadsOnPicture(usualLoadPercent);
  const shaft = (percent: number) =>
    percent === usualLoadPercent ? usualShaftKw : (percent / 100) * machine.ratedOutputKw;
  return {
    motorName: motor.name,
    fieldName: meter.name,
    fieldDecimals: meter.decimals,
    usualLoadPercent,
    curves: percents.map((loadPercent) => ({
      loadPercent,
      points: vCurve(machine, {
        shaftKw: shaft(loadPercent),
        fieldFromA: 0.15 * machine.ratedFieldCurrentA,
        fieldToA,
        points: pointsPerCurve,
      })
        .map(({ fieldCurrentA, lineCurrentA, leading }) => ({
          fieldA: meter.shownA(fieldCurrentA),
          armatureA: lineCurrentA,
          leading,
        }))
        .filter(({ fieldA }) => fieldA >= 0),
    })),
    unity: percents.flatMap((percent) => {
      const fieldA = unityField(machine, { shaftKw: shaft(percent) });
      return shownOrNone(currentsAt(machine, shaft(percent), fieldA)) ?? [];
    }),
    limits: {
      armatureA: limits.armatureA,
      fieldA: meter.shownA(limits.fieldA),
      fieldBy: limits.fieldBy,
      leastFieldA: limits.leastFieldA === undefined ? undefined : meter.shownA(limits.leastFieldA),
      pullOut: pullOutEdge(machine, limits.pullOutMargin).map(shown),
      pullOutName: `pull-out below ${formatNumber(limits.pullOutMargin, { upTo: 2 })}`,
    },
    today: shownOrNone(currentsAt(machine, usualShaftKw, motor.fieldTodayA)),
    plan: plan && shownOrNone(currentsAt(machine, usualShaftKw, plan.fieldA)),
    planName: plan?.name,
  };
}

/** A motor at its usual load and one field current, or the reason why it cannot run there. */
export interface SettingReading {
  fieldA: number;
  kvarDelivered: number;
  armatureA: number;
  pullOut: number;
  lossesKw: number;
  /** Against today's setting. */
  extraLossKw: number;
  wattsPerKvar: number | null;
  beyond: string[];
}

/** A limit's name as a person knows it; the field's may be its exciter's. */
export const limitWord = ({ limits }: Pick<MotorView, 'limits'>, limit: string) =>
  limit === 'armature' ? 'stator' : limit === 'field' ? limits.fieldBy : limit;

/** Reads a motor at a field current and its usual load; null where it would fall out of step. */
export function settingReading(motor: MotorView, fieldCurrentA: number): SettingReading | null {
  const { machine, usualShaftKw: shaftKw } = motor;
  const least = motor.limits.leastFieldA;
  try {
    const point = operatingPoint(machine, { shaftKw, fieldCurrentA });
    const today = operatingPoint(machine, { shaftKw, fieldCurrentA: motor.fieldTodayA });
    const extraLossKw = point.inputKw - today.inputKw;
    const gained = today.kvar - point.kvar;
    return {
      fieldA: fieldCurrentA,
      kvarDelivered: -point.kvar,
      armatureA: point.lineCurrentA,
      pullOut: point.pullOutRatio,
      lossesKw: point.inputKw - shaftKw,
      extraLossKw,
      wattsPerKvar: gained > 1 ? (1000 * extraLossKw) / gained : null,
      beyond: [
        ...point.beyond.map((limit) => limitWord(motor, limit)),
        ...(least !== undefined && fieldCurrentA < least ? ['the least field'] : []),
      ],
    };
  } catch (error) {
    if (error instanceof PullOutError) return null;
    throw error;
  }
}
