import {
  addDays,
  dayNumber,
  isCalendarDate,
  isTimeZone,
  localDateStartMs,
  stepLengthsMinutes,
  zoneOffsetMs,
} from '../../load';
import { mostReadings, readingFields } from '../grammar/examples';
import { fieldNames } from '../grammar/types';
import type { ExampleReadings } from '../model';
import { asMap, asNumbers, asText, checkFields } from './fields';
import type { Problems } from './problems';
import { valueOf, type MapTree, type ScalarTree, type Tree } from './tree';

const dayMs = 86_400_000;
const registers = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

/** Reads `readings`: a stretch of meter readings inside the example's period. */
export function readReadings(
  tree: Tree,
  period: { from: string; to: string },
  timeZone: string,
  problems: Problems,
): ExampleReadings | undefined {
  const map = asMap(tree, problems, 'Write { begin: 2026-07-14 18:00, step: 60 min, kwh: [100, 120] }.');
  if (!map || !checkFields(map, fieldNames(readingFields), 'readings', problems)) return undefined;
  // A time zone nobody knows is a problem of its own.
  if (!isTimeZone(timeZone)) return undefined;
  const stepMinutes = stepOf(map, problems);
  const startMs = stepMinutes && beginOf(map, stepMinutes, timeZone, problems);
  const energies = startMs === undefined ? undefined : energiesOf(map, problems);
  if (!stepMinutes || startMs === undefined || !energies) return undefined;
  const fromMs = localDateStartMs(period.from, timeZone);
  const toMs = localDateStartMs(period.to, timeZone);
  if (startMs < fromMs || startMs + energies.kwh.length * stepMinutes * 60_000 > toMs) {
    const remedy = `They lie from ${period.from} 00:00 to ${addDays(period.to, -1)} 24:00.`;
    problems.add(tree, 'hold readings outside the period.', remedy);
    return undefined;
  }
  return { startMs, stepMinutes, ...energies };
}

function stepOf(map: MapTree, problems: Problems): number | undefined {
  const remedy = `Write step: ${stepLengthsMinutes.join(', ')} min.`;
  const tree = valueOf(map, 'step');
  if (!tree) problems.add(map, 'does not say the length of a reading.', remedy);
  const word = tree && asText(tree, problems, remedy);
  if (!word) return undefined;
  const minutes = Number(/^(\d+) min$/.exec(word.text)?.[1]);
  const found = stepLengthsMinutes.find((length) => length === minutes);
  if (!found) problems.add(word, `"${word.text}" is not a length of readings.`, remedy);
  return found;
}

function beginOf(map: MapTree, stepMinutes: number, timeZone: string, problems: Problems): number | undefined {
  const remedy = 'Write begin: 2026-07-14 18:00, by the local clock.';
  const tree = valueOf(map, 'begin');
  if (!tree) problems.add(map, 'does not say when the first reading begins.', remedy);
  const word = tree && asText(tree, problems, remedy);
  if (!word) return undefined;
  const [, date = '', hours = '', minutes = ''] = /^(\S+) (\d{2}):(\d{2})$/.exec(word.text) ?? [];
  const minute = Number(hours) * 60 + Number(minutes);
  if (!isCalendarDate(date) || Number(minutes) > 59 || minute >= 1440) {
    problems.add(word, `"${word.text}" is not an instant.`, remedy);
    return undefined;
  }
  if (minute % stepMinutes !== 0) {
    problems.add(
      word,
      `${hours}:${minutes} is no multiple of ${stepMinutes} minutes.`,
      'Begin where a reading begins.',
    );
    return undefined;
  }
  return instantOf(word, dayNumber(date) * dayMs + minute * 60_000, timeZone, problems);
}

/** The instant at which a local clock shows a time; the first of two. */
function instantOf(word: ScalarTree, localMs: number, timeZone: string, problems: Problems): number | undefined {
  const instants = [localMs - dayMs, localMs + dayMs]
    .map((ms) => localMs - zoneOffsetMs(ms, timeZone))
    .filter((ms) => ms + zoneOffsetMs(ms, timeZone) === localMs);
  if (instants.length > 0) return Math.min(...instants);
  problems.add(word, `the local clock never shows ${word.text}.`, 'It is put forward over it; begin an hour later.');
  return undefined;
}

function energiesOf(map: MapTree, problems: Problems): Pick<ExampleReadings, (typeof registers)[number]> | undefined {
  const remedy = 'Write the energy of each interval: [100, 120].';
  if (!valueOf(map, 'kwh')) {
    problems.add(map, 'gives no kwh.', 'Add kwh: and the energy of each interval.');
    return undefined;
  }
  const lists = registers.map((register) => {
    const tree = valueOf(map, register);
    return tree && asNumbers(tree, mostReadings, problems, remedy);
  });
  const [kwh, ...reactive] = lists;
  if (!kwh || registers.some((register, i) => valueOf(map, register) && !lists[i])) return undefined;
  for (const [i, register] of registers.entries()) {
    const values = lists[i];
    const tree = valueOf(map, register)!;
    if (values && values.length !== kwh.length) {
      problems.add(tree, `has ${wordCount(values.length)}, kwh has ${kwh.length}.`, 'Give one for every interval.');
      return undefined;
    }
    const negative = values?.find((value) => value < 0);
    if (negative !== undefined) {
      problems.add(tree, `${negative} is below 0.`, 'What is delivered stands under kvarhLeading, without a sign.');
      return undefined;
    }
  }
  const [kvarhLagging = kwh.map(() => 0), kvarhLeading = kwh.map(() => 0)] = reactive;
  return { kwh, kvarhLagging, kvarhLeading };
}

function wordCount(count: number): string {
  return count === 1 ? '1 value' : `${count} values`;
}
