import { normalStream, uniformStream } from '../economics';
import type { LoadSeries } from '../load';
import type { Plant } from './types';

/** How far a perturbed year may lie from the metered one. Shares are one standard deviation unless said. */
export interface Perturbation {
  /** Chance that a day changes places with the same weekday one to four weeks on. */
  swappedDays: number;
  /** Scale of a whole day's power. */
  dayShare: number;
  /** Noise of a single interval, active and reactive by themselves. */
  intervalShare: number;
  /** Scale of a motor's shaft load over the year. */
  shaftShare: number;
  /** Greatest change of a motor's terminal voltage over the year, either way. [pu] */
  voltagePu: number;
}

/** What a plant commonly shows from one year to the next. Common practice; to be replaced where two years are metered. */
export const USUAL_PERTURBATION: Perturbation = {
  swappedDays: 0.5,
  dayShare: 0.03,
  intervalShare: 0.02,
  shaftShare: 0.03,
  voltagePu: 0.025,
};

const DAYS_OF_WEEK = 7;
const MOST_WEEKS = 4;

/**
 * A year like the metered one: days changed about with their weekday and scaled, noise in every interval, shaft loads and voltages
 * a little off. The same seed gives the same year. Missing intervals stay missing and move with their day.
 *
 * Days are blocks of 24 hours from the beginning of the series; the motors' shaft loads move with them.
 */
export function perturbPlant(plant: Plant, seed: number, by: Perturbation = USUAL_PERTURBATION): Plant {
  const uniform = uniformStream(seed);
  const normal = normalStream(uniform);
  const count = plant.load.kwh.length;
  const perDay = Math.round(1440 / plant.load.stepMinutes);
  const source = daysChanged(Math.floor(count / perDay), by.swappedDays, uniform);
  const from = (i: number) => {
    const day = Math.floor(i / perDay);
    return day < source.length ? source[day]! * perDay + (i - day * perDay) : i;
  };
  const scales = Array.from({ length: source.length + 1 }, () => scaleOf(by.dayShare * normal()));
  const scaleAt = (i: number) => scales[Math.floor(i / perDay)]!;
  const loads = [plant.load, ...(plant.beside ?? [])].map((load) =>
    perturbLoad(load, from, scaleAt, () => scaleOf(by.intervalShare * normal())),
  );
  const motors = plant.motors.map((motor) => {
    const shaftScale = scaleOf(by.shaftShare * normal());
    const voltagePu = (motor.voltagePu ?? 1) + by.voltagePu * (2 * uniform() - 1);
    return { ...motor, voltagePu, shaftKw: motor.shaftKw.map((_, i) => motor.shaftKw[from(i)]! * shaftScale) };
  });
  return { ...plant, load: loads[0]!, ...(plant.beside && { beside: loads.slice(1) }), motors };
}

/** A factor near one that is never below a half. */
const scaleOf = (change: number) => Math.max(0.5, 1 + change);

/** Day that each day is taken from. */
function daysChanged(days: number, chance: number, uniform: () => number): number[] {
  const source = Array.from({ length: days }, (_, day) => day);
  for (let day = 0; day < days; day++) {
    const wanted = uniform() < chance;
    const other = day + DAYS_OF_WEEK * (1 + Math.floor(uniform() * MOST_WEEKS));
    if (wanted && other < days) [source[day], source[other]] = [source[other]!, source[day]!];
  }
  return source;
}

function perturbLoad(
  load: LoadSeries,
  from: (i: number) => number,
  scaleAt: (i: number) => number,
  noise: () => number,
): LoadSeries {
  const out: LoadSeries = {
    ...load,
    kwh: load.kwh.slice(),
    kvarhLagging: load.kvarhLagging.slice(),
    kvarhLeading: load.kvarhLeading.slice(),
    quality: load.quality.slice(),
  };
  for (let i = 0; i < load.kwh.length; i++) {
    const k = from(i);
    const scale = scaleAt(i);
    const reactive = scale * noise();
    out.kwh[i] = load.kwh[k]! * scale * noise();
    out.kvarhLagging[i] = load.kvarhLagging[k]! * reactive;
    out.kvarhLeading[i] = load.kvarhLeading[k]! * reactive;
    out.quality[i] = load.quality[k]!;
  }
  return out;
}
