import type { ScheduleText } from '../model';

/**
 * Whether a window holds at each minute of a day's clock.
 *
 * @param season  Index of the day's season; 0 where the text has none
 * @param dayKinds  Bits of the day, see `dayKindsOf`
 * @returns uint8[1440], minute of the local clock, 1 inside
 */
export function windowMembership(text: ScheduleText, window: string, season: number, dayKinds: number): Uint8Array {
  const inside = new Uint8Array(1440);
  const entry = text.windows.get(window);
  if (!entry) throw new RangeError(`window must be one of the schedule's, got ${window}`);
  if (entry.restOf) {
    inside.fill(1);
    for (const other of entry.restOf) {
      const taken = windowMembership(text, other, season, dayKinds);
      for (let minute = 0; minute < 1440; minute++) if (taken[minute] === 1) inside[minute] = 0;
    }
    return inside;
  }
  for (const rule of entry.rules) {
    const isToday = (rule.days & dayKinds) !== 0 && (rule.seasons.length === 0 || rule.seasons.includes(season));
    if (isToday) for (const [from, to] of rule.spans) inside.fill(1, from, to);
  }
  return inside;
}
