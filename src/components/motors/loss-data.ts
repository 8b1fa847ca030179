import { leastLossField, lossCurve, operatingPoint, PullOutError } from '../../core/machine';
import type { MotorView } from '../../schemas/motor';
import type { KvarCost, LossData } from '../charts/loss-per-kvar';
import { formatQuantity } from '../ui/format';
import type { NamedField } from './curves';
import { fieldMeter } from './field-meter';

/** Points of the curve. */
const pointsOnCurve = 81;

/** What each further kvar costs a motor at its usual load, from today's setting; null where today's field falls out of step. */
export function lossData(motor: MotorView, tried: NamedField | null): LossData | null {
  const { machine, usualShaftKw: shaftKw, limits, capability } = motor;
  const meter = fieldMeter(machine);
  const sinceKvar = motor.kvarToday;
  const least = leastLossField(machine, { shaftKw });
  const most = capability.kvarDelivered;
  const top = Math.max(most ?? 0, sinceKvar, 0.2 * motor.ratedKva);
  const bottom = Math.min(-least.kvar, sinceKvar, 0);
  const span = { shaftKw, sinceKvar, fromKvar: bottom - 0.05 * (top - bottom), toKvar: top + 0.05 * (top - bottom) };
  const cost = ({ fieldCurrentA, ...point }: ReturnType<typeof lossCurve>[number]): KvarCost => ({
    ...point,
    fieldA: meter.shownA(fieldCurrentA),
  });
  const at = (kvarDelivered: number) => {
    const [point] = lossCurve(machine, { ...span, fromKvar: kvarDelivered, toKvar: kvarDelivered + 1, points: 2 });
    return point && cost(point);
  };
  const leastPoint = at(-least.kvar);
  const today = at(sinceKvar);
  if (!leastPoint || !today) return null;
  const triedKvar = tried && deliveredAt(motor, tried.fieldA);
  const triedPoint = triedKvar === null ? undefined : at(triedKvar);
  return {
    motorName: motor.name,
    fieldName: meter.name,
    fieldDecimals: meter.decimals,
    points: lossCurve(machine, { ...span, points: pointsOnCurve }).map(cost),
    least: leastPoint,
    today,
    tried: tried && triedPoint ? { ...triedPoint, name: tried.name } : null,
    most:
      most === null
        ? null
        : { kvarDelivered: most, name: capability.binding === 'armature' ? 'stator' : limits.fieldBy },
  };
}

function deliveredAt({ machine, usualShaftKw }: MotorView, fieldCurrentA: number): number | null {
  try {
    return -operatingPoint(machine, { shaftKw: usualShaftKw, fieldCurrentA }).kvar;
  } catch (error) {
    if (error instanceof PullOutError) return null;
    throw error;
  }
}

/** The finding: the price of the next kvar, and of the mean one. */
export function lossFinding({ tried, today, least }: LossData): string {
  const watts = (amount: number) => formatQuantity(amount, 'W', { decimals: 1 });
  const saved = today.lossKw - least.lossKw;
  const at = tried ?? today;
  const next = `${tried ? 'There' : 'Today'} the next kvar costs ${watts(at.marginalWPerKvar)}`;
  if (tried && tried.kvarDelivered > today.kvarDelivered + 1)
    return `${next}; those gained since today cost ${watts(tried.averageWPerKvar)} each on average.`;
  return `${next}; losses are least at another field, by ${formatQuantity(saved, 'kW', { decimals: 1 })}.`;
}
