import type { PlantMoment } from './clock';
import { kestrel } from './scenario';
import { randomFrom, wanderFrom } from './random';

/** Mean power of a quarter-hour at the service point, load view: kvar > 0 is absorbed. */
export interface PlantPower {
  kw: number;
  kvar: number;
}

/** What the two synchronous motors draw while they run, at today's field. */
export type MotorPower = PlantPower;

const within = (date: string, span: { from: string; to: string }) => date >= span.from && date <= span.to;
const isHoliday = (date: string) => (kestrel.holidays as readonly string[]).includes(date);

/** Whether the kiln, and with it the compressor, burns: day and night but for the relining. */
export const kilnRuns = ({ date }: PlantMoment) => !within(date, kestrel.shutdown);

/** The raw mill runs two shifts, Monday to Saturday, while the kiln burns; not on holidays. */
export const millRuns = (at: PlantMoment) =>
  kilnRuns(at) && at.weekday !== 0 && !isHoliday(at.date) && at.hour >= 6 && at.hour < 22;

/** The quarry's crusher line works by daylight on weekdays, on Saturday mornings in the building season. */
function crusherShare({ date, weekday, hour }: PlantMoment): number {
  if (isHoliday(date) || weekday === 0 || within(date, { from: '2025-12-20', to: '2026-01-04' })) return 0;
  const season = date >= '2026-04-01' && date <= '2026-10-31';
  const ends = weekday === 6 ? (season ? 12 : 6) : 17.5;
  if (hour < 6 || hour >= ends) return 0;
  const pause = hour >= 12 && hour < 12.75 ? 0.35 : 1;
  return pause * (season ? 1 : 0.82);
}

/** Lighting and heating of yards, offices and workshops: dark hours and cold days. */
function houseKw({ date, hour }: PlantMoment): number {
  const month = Number(date.slice(5, 7));
  const cold = [165, 150, 110, 60, 30, 25, 40, 35, 25, 55, 105, 150][month - 1] ?? 60;
  const dark = hour < 6.5 || hour > 18 ? 45 : 0;
  const office = hour >= 7 && hour < 17 ? 60 : 20;
  return cold + dark + office;
}

const tanOf = (powerFactor: number) => Math.sqrt(1 / powerFactor ** 2 - 1);

/** Fans, pumps and drives of the kiln: induction motors of middling power factor. */
const kilnTan = tanOf(0.82);
const crusherTan = tanOf(0.7);
const houseTan = tanOf(0.93);
/** An old fixed capacitor at the house transformer that nobody switches: the plant leads when everything else stands. */
const forgottenCapacitorKvar = 200;

/**
 * The plant's meter over the year, quarter-hour by quarter-hour. Repeatable: the same seed gives the same year.
 *
 * @param motors  draw of the mill motor and the compressor motor while they run
 */
export function plantPowers(
  moments: readonly PlantMoment[],
  motors: [mill: MotorPower, compressor: MotorPower],
): PlantPower[] {
  const random = randomFrom(20_251_101);
  const kilnWander = wanderFrom(random, 0.985);
  const crusherWander = wanderFrom(random, 0.55);
  const tanWander = wanderFrom(random, 0.97);
  return moments.map((at) => {
    const kiln = kilnRuns(at) ? 1180 * (1 + 0.035 * kilnWander()) : 90;
    const crusher = 1150 * crusherShare(at) * Math.max(0.25, 1 + 0.13 * crusherWander());
    const house = houseKw(at) * (0.95 + 0.1 * random());
    const wander = 1 + 0.02 * tanWander();
    const running = [...(millRuns(at) ? [motors[0]] : []), ...(kilnRuns(at) ? [motors[1]] : [])];
    const kw = kiln + crusher + house + running.reduce((sum, motor) => sum + motor.kw, 0);
    const kvar =
      (kiln * kilnTan + crusher * crusherTan) * wander +
      house * houseTan +
      running.reduce((sum, motor) => sum + motor.kvar, 0) -
      forgottenCapacitorKvar;
    return { kw, kvar };
  });
}
