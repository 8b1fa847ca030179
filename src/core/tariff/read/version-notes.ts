import type { Schedule, ScheduleText } from '../model';
import { addMonths } from '../../load';
import { valueOf, type MapTree, type Tree } from './tree';

type Add = (path: string, message: string) => void;

/** Notes what looks forgotten between the texts of a schedule: their order, versions that change nothing, months without a rider. */
export function addVersionNotes(root: MapTree, merged: MapTree[], texts: readonly ScheduleText[], add: Add): void {
  const versions = valueOf(root, 'versions');
  const dates = versions?.kind === 'map' ? versions.entries.map(({ key }) => key) : [];
  for (const [i, date] of dates.entries()) {
    const later = dates.slice(0, i).find((other) => other > date);
    if (later !== undefined)
      add(
        `versions.${date}`,
        `Stands below the later version of ${later}. It holds from its own day on; write it above.`,
      );
  }
  for (const [i, text] of texts.entries())
    if (i > 0 && isSameTree(merged[i - 1]!, merged[i]!)) add(`versions.${text.from}`, 'The version changes nothing.');
  noteMonths(texts, add);
}

function noteMonths(texts: Schedule['texts'], add: Add): void {
  const last = texts[texts.length - 1]!;
  for (const { path, place } of last.rates) {
    if (place.kind !== 'months') continue;
    const months = [...place.byMonth.keys()].sort();
    const lacking: string[] = [];
    for (let month = months[0]!; month < months[months.length - 1]!; month = addMonths(`${month}-01`, 1).slice(0, 7))
      if (!place.byMonth.has(month)) lacking.push(month);
    if (lacking.length === 0) continue;
    const some =
      lacking.length > 6 ? `${lacking.slice(0, 6).join(', ')} and ${lacking.length - 6} more` : lacking.join(', ');
    add(
      path,
      `No value for ${some}, between ${months[0]} and ${months[months.length - 1]}: bills of that time cannot be priced.`,
    );
  }
}

/** Whether two trees say the same, wherever they stand. */
function isSameTree(a: Tree, b: Tree): boolean {
  if (a === b) return true;
  if (a.kind === 'scalar') return b.kind === 'scalar' && a.text === b.text;
  if (a.kind === 'list')
    return (
      b.kind === 'list' &&
      a.items.length === b.items.length &&
      a.items.every((item, i) => isSameTree(item, b.items[i]!))
    );
  if (b.kind !== 'map' || a.entries.length !== b.entries.length) return false;
  return a.entries.every(({ key, value }, i) => key === b.entries[i]!.key && isSameTree(value, b.entries[i]!.value));
}
