import type { ScheduleText, WindowEntry } from '../model';

/** By window: whether it holds at each minute of a day's clock. uint8[1440], minute of the local clock, 1 inside */
export type DayWindows = ReadonlyMap<string, Uint8Array>;

/**
 * Which windows hold at each minute of a day's clock.
 *
 * @param season  Index of the day's season; 0 where the text has none
 * @param dayKinds  Bits of the day, see `dayKindsOf`
 */
export function windowsOfDay({ windows }: ScheduleText, season: number, dayKinds: number): DayWindows {
  const made = new Map<string, Uint8Array>();
  // A rest names windows above it only, so that each is made once, from top to bottom.
  for (const window of windows.values()) made.set(window.name, minutesInside(window, season, dayKinds, made));
  return made;
}

function minutesInside({ restOf, rules }: WindowEntry, season: number, dayKinds: number, made: DayWindows): Uint8Array {
  const inside = new Uint8Array(1440);
  if (restOf) {
    inside.fill(1);
    for (const other of new Set(restOf)) {
      const taken = made.get(other)!;
      for (let minute = 0; minute < 1440; minute++) if (taken[minute] === 1) inside[minute] = 0;
    }
    return inside;
  }
  for (const rule of rules) {
    const isToday = (rule.days & dayKinds) !== 0 && (rule.seasons.length === 0 || rule.seasons.includes(season));
    if (isToday) for (const [from, to] of rule.spans) inside.fill(1, from, to);
  }
  return inside;
}
