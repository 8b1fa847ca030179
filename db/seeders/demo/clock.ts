import { addDays, localDateStartMs, weekdayOf, dayNumber, zoneOffsetMs } from '../../../src/core/load';

export const stepMinutes = 15;
export const stepMs = stepMinutes * 60_000;

/** An interval of the year as the plant's people see it. */
export interface PlantMoment {
  startMs: number;
  date: string;
  /** 0 Sunday ... 6 Saturday */
  weekday: number;
  /** Local clock at its beginning. [h] */
  hour: number;
}

/** Every quarter-hour of local days [from, to), the repeated autumn hour twice, the skipped spring hour not at all. */
export function* plantMoments(from: string, to: string, timeZone: string): Generator<PlantMoment> {
  for (let date = from; date < to; date = addDays(date, 1)) {
    const begins = localDateStartMs(date, timeZone);
    const ends = localDateStartMs(addDays(date, 1), timeZone);
    const weekday = weekdayOf(dayNumber(date));
    for (let startMs = begins; startMs < ends; startMs += stepMs) {
      const localMs = startMs + zoneOffsetMs(startMs, timeZone);
      yield { startMs, date, weekday, hour: (localMs / 3_600_000) % 24 };
    }
  }
}

/** Local clock at an instant: MM/DD/YYYY and minutes after midnight. */
export function wallClock(instantMs: number, timeZone: string): { date: string; minutes: number } {
  const local = new Date(instantMs + zoneOffsetMs(instantMs, timeZone));
  const two = (value: number) => String(value).padStart(2, '0');
  return {
    date: `${two(local.getUTCMonth() + 1)}/${two(local.getUTCDate())}/${local.getUTCFullYear()}`,
    minutes: local.getUTCHours() * 60 + local.getUTCMinutes(),
  };
}
