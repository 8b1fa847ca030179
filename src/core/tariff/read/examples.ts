import { isCalendarDate } from '../../load';
import { exampleFields, mostExamples } from '../grammar/examples';
import { fieldNames } from '../grammar/types';
import type { Schedule, ScheduleExample } from '../model';
import { expectOf, historyOf, namesOf, numbersOf, type KnownNames } from './example-figures';
import { readReadings } from './example-readings';
import { asMap, asText, checkFields } from './fields';
import type { Problems } from './problems';
import type { TextContext } from './text-reader';
import { valueOf, type MapTree, type Tree } from './tree';

type Head = Pick<Schedule, 'currency' | 'timeZone' | 'inForce'>;

/** Reads `examples`: worked bills, checked against the names of the schedule; nothing is priced. */
export function readExamples(
  root: MapTree,
  head: Head,
  texts: { context: TextContext }[],
  problems: Problems,
): ScheduleExample[] {
  const tree = valueOf(root, 'examples');
  if (!tree) return [];
  const remedy = 'Write a list of worked bills: - title: July 2026, by hand and so on.';
  if (tree.kind !== 'list' || tree.items.length === 0) {
    problems.add(tree, tree.kind === 'list' ? 'is an empty list.' : 'is not a list.', remedy);
    return [];
  }
  if (tree.items.length > mostExamples) {
    problems.add(tree, `holds ${tree.items.length} bills, at most ${mostExamples} are read.`, 'Keep the telling ones.');
    return [];
  }
  const known = namesOf(texts);
  return tree.items.flatMap((item) => readExample(item, head, known, problems) ?? []);
}

function readExample(item: Tree, head: Head, known: KnownNames, problems: Problems): ScheduleExample | undefined {
  const map = asMap(item, problems, 'Write title, from, to, quantities or readings, expect.');
  if (!map || !checkFields(map, fieldNames(exampleFields), 'an example', problems)) return undefined;
  const words = textsOf(map, problems);
  const period = words && readPeriod(map, head, problems);
  if (!period) return undefined;
  const readingsTree = valueOf(map, 'readings');
  const quantitiesTree = valueOf(map, 'quantities');
  if (!readingsTree && !quantitiesTree) {
    problems.add(
      map,
      'says no figures to price.',
      'Add quantities: as the bill prints them, or readings: of the meter.',
    );
    return undefined;
  }
  const readings = readingsTree && readReadings(readingsTree, period, head.timeZone, problems);
  const contract = numbersOf(map, 'contract', 'contract input', known.contract, known, problems);
  const measured = readingsTree ? 'quantity given by the bill' : 'quantity';
  const quantities = numbersOf(
    map,
    'quantities',
    measured,
    readingsTree ? known.given : known.quantities,
    known,
    problems,
  );
  const history = historyOf(map, known, problems);
  const expect = expectOf(map, head.currency, known, problems);
  if (!expect || contract === 'problem' || quantities === 'problem' || history === 'problem') return undefined;
  if (readingsTree && !readings) return undefined;
  return { ...words, path: map.path, ...period, contract, history, quantities: quantities ?? {}, readings, expect };
}

function textsOf(map: MapTree, problems: Problems): { title: string; source?: string } | undefined {
  const titleTree = valueOf(map, 'title');
  if (!titleTree) {
    problems.add(map, 'has no title.', 'Add title: July 2026, worked by hand.');
    return undefined;
  }
  const title = asText(titleTree, problems, 'Write a few words.');
  const sourceTree = valueOf(map, 'source');
  const source = sourceTree && asText(sourceTree, problems, 'Write a few words.');
  return title && (!sourceTree || source) ? { title: title.text, source: source?.text } : undefined;
}

function readPeriod(map: MapTree, head: Head, problems: Problems): { from: string; to: string } | undefined {
  const dateOf = (field: 'from' | 'to', written: string): string | undefined => {
    const tree = valueOf(map, field);
    if (!tree) {
      const message = `does not say ${field === 'from' ? 'its first day' : 'the day after its last'}.`;
      problems.add(map, message, `Add ${field}: ${written}.`);
      return undefined;
    }
    const word = asText(tree, problems, `Write ${written}.`);
    if (word && !isCalendarDate(word.text)) {
      problems.add(word, `"${word.text}" is not a date.`, `Write ${written}.`);
      return undefined;
    }
    return word?.text;
  };
  const from = dateOf('from', '2026-07-01');
  const to = dateOf('to', '2026-08-01');
  if (from === undefined || to === undefined) return undefined;
  if (from >= to) {
    const remedy = 'Write the first day and the day after the last: from: 2026-07-01, to: 2026-08-01.';
    problems.add(valueOf(map, 'to')!, `${to} does not lie after from, ${from}.`, remedy);
    return undefined;
  }
  if (head.inForce !== null && from < head.inForce) {
    const remedy = 'Move the example, or date inForce to the sheet that held then.';
    problems.add(valueOf(map, 'from')!, `${from} lies before inForce, ${head.inForce}.`, remedy);
    return undefined;
  }
  return { from, to };
}
