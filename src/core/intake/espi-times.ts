import { zoneOffsetMs } from '../load';
import type { EspiEntry } from './espi-feed';
import type { IntakeNote } from './types';

const hourS = 3600;
const summerRule = /^[0-9A-F]{8}$/i;

/**
 * Notes on the local time parameters of a feed. They only say how to show its instants, which are UTC, and are often wrong:
 * rules cut to 16 bits, offsets of the wrong sign. Nothing is read with them.
 */
export function notesOnLocalTime(
  entries: readonly EspiEntry[],
  { timeZone, atMs }: { timeZone: string; atMs: number },
): IntakeNote[] {
  const notes: IntakeNote[] = [];
  for (const { kind, fields } of entries) {
    if (kind !== 'LocalTimeParameters') continue;
    const offsetS = Number(fields.get('tzOffset') ?? Number.NaN);
    const rules = ['dstStartRule', 'dstEndRule'].map((name) => fields.get(name) ?? '');
    const odd = rules.filter((rule) => rule !== '' && !summerRule.test(rule));
    if (odd.length > 0) notes.push(oddNote(`rules of summer time that are no 32 bits (${odd.join(', ')})`));
    const standardS = standardOffsetS(timeZone, atMs);
    if (Number.isFinite(offsetS) && Math.abs(offsetS - standardS) > hourS / 2) {
      notes.push(oddNote(`an offset of ${hours(offsetS)} where ${timeZone} has ${hours(standardS)}`));
    }
  }
  return notes.slice(0, 2);
}

const oddNote = (what: string): IntakeNote => ({
  code: 'local-time-odd',
  message: `The feed's local time parameters give ${what}. They only concern how times are shown: the readings carry instants in UTC and stand by them.`,
});

/** The lesser of the offsets half a year apart: the one without summer time. */
function standardOffsetS(timeZone: string, atMs: number): number {
  const halfYearMs = 182 * 86_400_000;
  return Math.min(zoneOffsetMs(atMs, timeZone), zoneOffsetMs(atMs + halfYearMs, timeZone)) / 1000;
}

function hours(seconds: number): string {
  const size = Math.abs(seconds / hourS);
  return `UTC${seconds < 0 ? '-' : '+'}${Number.isInteger(size) ? size : size.toFixed(2)}`;
}
