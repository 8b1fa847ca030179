import type { MotorView } from '../../schemas/motor';
import { formatList, formatNumber, formatQuantity } from '../ui/format';
import { fieldMeter } from './field-meter';

/** Decimals that fit a value's size: three figures at least. */
export const fit = (value: number) =>
  Math.abs(value) >= 100 ? 0 : Math.abs(value) >= 10 ? 1 : Math.abs(value) >= 1 ? 2 : 3;

/** Motors together: "M-1 and M-2". */
export const namesOf = (motors: readonly { name: string }[]) => formatList(motors.map((motor) => motor.name));

const most = (motor: MotorView) => motor.capability.kvarDelivered ?? 0;

/** What a motor could deliver beyond what it does today. [kvar] */
const spare = (motor: MotorView) => most(motor) - Math.max(motor.kvarToday, 0);

/** Below this share of the greatest a motor has little to give. */
const littleShare = 0.15;

function todayWords(motors: MotorView[], absorbing: MotorView[]): string {
  if (absorbing.length === 0) return motors.length === 1 ? 'today it absorbs nothing' : 'today none of them absorbs';
  if (absorbing.length < motors.length || motors.length === 1)
    return `today ${namesOf(absorbing)} ${absorbing.length === 1 ? 'absorbs' : 'absorb'}`;
  return `today ${motors.length === 2 ? 'both' : 'all'} absorb`;
}

function leadOf(absorbing: MotorView[]): string {
  if (absorbing.length === 0)
    return 'They already counter the plant’s lag; what is left is the rest up to their limits.';
  const absorbed = -absorbing.reduce((sum, motor) => sum + motor.kvarToday, 0);
  const ratings = new Set(absorbing.map((motor) => ratingWords(motor.machine.ratedPowerFactor)));
  const rated = ratings.size === 1 ? `Rated for ${[...ratings][0]}, run` : 'Run';
  const fields = absorbing.map((motor) => fieldMeter(motor.machine).words(motor.fieldTodayA));
  const together = absorbing.length === 1 ? 'it adds' : 'between them they add';
  return `${rated} at ${formatList(fields)} of field: ${together} ${formatQuantity(absorbed, 'kvar')} to the plant’s lag instead of countering it.`;
}

const ratingWords = (powerFactor: number) =>
  powerFactor < 0.995 ? `${formatNumber(powerFactor, { decimals: 2 })} leading` : 'unity power factor';

/** The finding of the station: what the motors have in hand, and what they do today. */
export function motorsHeadline(motors: MotorView[]): { title: string; lead: string } {
  const ranked = motors.filter((motor) => spare(motor) > 1).sort((a, b) => most(b) - most(a));
  const greatest = Math.max(0, ...ranked.map(spare));
  const able = ranked.filter((motor) => spare(motor) >= littleShare * greatest);
  const little = motors.filter((motor) => !able.includes(motor));
  const absorbing = motors.filter((motor) => motor.kvarToday < -1);
  const today = todayWords(motors, absorbing);
  const [first, ...others] = able;
  if (!first) return { title: `No motor has kvar in hand within its limits; ${today}.`, lead: leadOf(absorbing) };
  const given = [
    `${first.name} can deliver ${formatQuantity(most(first), 'kvar')} at its usual load`,
    ...others.map((motor) => `${motor.name} another ${formatNumber(most(motor))}`),
  ].join(', ');
  const rest = little.length > 0 ? ` ${namesOf(little)} ${little.length === 1 ? 'has' : 'have'} little to give.` : '';
  return { title: `${given}; ${today}.${rest}`, lead: leadOf(absorbing) };
}
