import { dayKindsOf } from '../calendar/day-kinds';
import { windowMembership } from '../calendar/membership';
import type { ScheduleText } from '../model';

/** Notes overlaps and gaps between the windows of one family, over all kinds of days and seasons. */
export function addWindowNotes(text: ScheduleText, add: (path: string, message: string) => void): void {
  const seen = new Set<string>();
  for (const [family, { windows }] of text.families) {
    const key = windows.join(', ');
    const isMeasured = text.quantities.some(
      ({ name, definition }) =>
        definition.kind === 'measure' && name.startsWith(family) && definition.window !== undefined,
    );
    if (!isMeasured || seen.has(key)) continue;
    seen.add(key);
    const { hasGap, hasOverlap } = coverage(text, windows);
    if (hasOverlap) add(`quantities.${family}`, `The windows ${key} overlap: some time counts twice.`);
    if (hasGap) add(`quantities.${family}`, `The windows ${key} leave gaps: some time counts in none of them.`);
  }
}

function coverage(text: ScheduleText, windows: string[]): { hasGap: boolean; hasOverlap: boolean } {
  let hasGap = false;
  let hasOverlap = false;
  for (let season = 0; season < Math.max(1, text.seasons?.names.length ?? 0); season++) {
    for (const isHoliday of [false, true]) {
      for (let weekday = 0; weekday < 7; weekday++) {
        const kinds = dayKindsOf(weekday, isHoliday);
        const members = windows.map((window) => windowMembership(text, window, season, kinds));
        for (let minute = 0; minute < 1440; minute++) {
          const count = members.reduce((sum, member) => sum + member[minute]!, 0);
          if (count === 0) hasGap = true;
          if (count > 1) hasOverlap = true;
        }
      }
    }
  }
  return { hasGap, hasOverlap };
}
