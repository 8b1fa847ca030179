import { sourceFields } from '../grammar/entries';
import { fieldNames } from '../grammar/types';
import { metering, statuses } from '../grammar/words';
import { isCalendarDate, isTimeZone } from '../../load';
import type { Schedule, ScheduleSource } from '../model';
import { asMap, asText, checkFields } from './fields';
import type { Problems } from './problems';
import { entryOf, valueOf, type MapTree } from './tree';

/** What stands above the sections and is the same in all versions. */
export type Head = Pick<Schedule, 'id' | 'title' | 'currency' | 'timeZone' | 'source' | 'inForce' | 'meters'>;

/** Reads it. */
export function readHead(root: MapTree, problems: Problems): Head {
  const text = (key: string, remedy: string, isRequired: boolean): string => {
    const tree = valueOf(root, key);
    if (!tree && isRequired) problems.add({ offset: root.offset, path: key }, 'is missing.', remedy);
    return (tree && asText(tree, problems, remedy)?.text) ?? '';
  };
  const id = text('schedule', 'Write schedule: and an id such as millrace-large.', true);
  if (id !== '' && !/^[a-z0-9]+(-[a-z0-9]+)*$/.test(id)) {
    problems.add(
      entryOf(root, 'schedule')!,
      `"${id}" is not an id.`,
      'Write small letters, digits and single hyphens: millrace-large.',
    );
  }
  const currency = text('currency', 'Write currency: EUR.', true);
  const isCurrency = /^[A-Z]{3}$/.test(currency);
  if (currency !== '' && !isCurrency)
    problems.add(entryOf(root, 'currency')!, `"${currency}" is not a currency.`, 'Write its three letters: EUR.');
  const timeZone = text('timeZone', 'Write timeZone: Europe/Lisbon.', true);
  if (timeZone !== '' && !isTimeZone(timeZone))
    problems.add(
      entryOf(root, 'timeZone')!,
      `"${timeZone}" is not a time zone.`,
      'Write its name in the time zone database: Europe/Lisbon.',
    );
  return {
    id,
    title: text('title', 'Write title: and a few words.', false) || id,
    currency: isCurrency ? currency : 'EUR',
    timeZone,
    source: readSource(root, problems),
    inForce: readInForce(root, problems),
    meters: readMeters(root, problems),
  };
}

function readInForce(root: MapTree, problems: Problems): string | null {
  const tree = valueOf(root, 'inForce');
  const word = tree && asText(tree, problems, 'Write inForce: 2026-01-01.');
  if (!word) return null;
  if (isCalendarDate(word.text)) return word.text;
  problems.add(word, `"${word.text}" is not a date.`, 'Write 2026-01-01.');
  return null;
}

function readMeters(root: MapTree, problems: Problems): Schedule['meters'] {
  const tree = valueOf(root, 'meters');
  const word = tree && asText(tree, problems, 'Write meters: summed.');
  if (!word) return 'one';
  const meters = metering.find((one) => one === word.text);
  if (!meters) problems.add(word, `"${word.text}" is not a way of metering.`, `Write ${metering.join(' or ')}.`);
  return meters ?? 'one';
}

function readSource(root: MapTree, problems: Problems): ScheduleSource {
  const tree = valueOf(root, 'source');
  const map = tree && asMap(tree, problems, 'Write { publisher: ..., title: ..., date: 2026-01-01, status: found }.');
  const source: ScheduleSource = {};
  if (!map || !checkFields(map, fieldNames(sourceFields), 'a source', problems)) return source;
  for (const entry of map.entries) {
    const word = asText(entry.value, problems, 'Write a few words.');
    if (!word) continue;
    if (entry.key === 'status') {
      source.status = statuses.find((status) => status === word.text);
      if (!source.status) problems.add(word, `"${word.text}" is not a status.`, `Write ${statuses.join(', ')}.`);
    } else source[entry.key as 'publisher' | 'title' | 'date' | 'url'] = word.text;
  }
  return source;
}
