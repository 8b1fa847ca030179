import type { AssumedValue, MotorView } from '../../schemas/motor';
import { formatList, formatNumber, formatQuantity } from '../ui/format';

/** Decimals that fit a value's size: three figures at least. */
export const fit = (value: number) =>
  Math.abs(value) >= 100 ? 0 : Math.abs(value) >= 10 ? 1 : Math.abs(value) >= 1 ? 2 : 3;

/** Motors together: "M-1 and M-2". */
export const namesOf = (motors: readonly { name: string }[]) => formatList(motors.map((motor) => motor.name));

const most = (motor: MotorView) => motor.capability.kvarDelivered ?? 0;

/** The finding of the station: what the motors have in hand, and what they do today. */
export function motorsHeadline(motors: MotorView[]): { title: string; lead: string } {
  const able = motors
    .filter((motor) => most(motor) > Math.max(motor.kvarToday, 0) + 1)
    .sort((a, b) => most(b) - most(a));
  const absorbing = motors.filter((motor) => motor.kvarToday < -1);
  const absorbed = -absorbing.reduce((sum, motor) => sum + motor.kvarToday, 0);
  const today =
    absorbing.length === 0
      ? 'today none of them absorbs'
      : absorbing.length === motors.length && motors.length > 1
        ? `today ${motors.length === 2 ? 'both' : 'all'} absorb`
        : `today ${namesOf(absorbing)} ${absorbing.length === 1 ? 'absorbs' : 'absorb'}`;
  const [first, ...others] = able;
  const title = first
    ? [
        `${first.name} can deliver ${formatQuantity(most(first), 'kvar')} at its usual load`,
        ...others.map((motor) => `${motor.name} another ${formatNumber(most(motor))}`),
      ].join(', ') + `; ${today}.`
    : `No motor has kvar in hand within its limits; ${today}.`;
  const lead =
    absorbed > 0
      ? `At the field currents of today they add ${formatQuantity(absorbed, 'kvar')} to the plant’s lag instead of countering it.`
      : 'They already counter the plant’s lag; what is left is the rest up to their limits.';
  return { title, lead };
}

/** The most a motor's assumed values matter, widest first. */
export function assumedEffects(motors: MotorView[]): { assumed: AssumedValue; words: string }[] {
  const swing = ({ kvarEffect }: AssumedValue) => (kvarEffect ? Math.abs(kvarEffect[1] - kvarEffect[0]) : 0);
  return motors
    .flatMap((motor) => motor.assumed)
    .filter((assumed) => assumed.kvarEffect && swing(assumed) >= 0.5)
    .sort((a, b) => swing(b) - swing(a))
    .map((assumed) => {
      const [low = 0, high = 0] = [...(assumed.kvarEffect ?? [])].sort((a, b) => a - b);
      return { assumed, words: `${formatNumber(low, { signed: true })}, ${formatNumber(high, { signed: true })} kvar` };
    });
}
