import type { ScheduleText } from '../model';
import type { Problems } from './problems';
import { entryOf, valueOf, type MapTree } from './tree';

/** Most entries of each part; windows of a quantity and lines of a charge each count. No sheet comes near; more would make pricing endless. */
const mostEntries = { contract: 100, rates: 300, seasons: 24, quantities: 250, charges: 250, versions: 100 } as const;

/** Most quantities and lines over all versions together. */
const mostInAll = 5000;

/** Refuses parts with more entries than are read, before any entry is looked at. */
export function checkSizes(root: MapTree, problems: Problems): void {
  const versions = valueOf(root, 'versions');
  let isTooMuch = false;
  const maps = [root, ...(versions?.kind === 'map' ? versions.entries.map(({ value }) => value) : [])];
  for (const map of maps) {
    for (const [part, most] of Object.entries(mostEntries)) {
      const entry = map.kind === 'map' ? entryOf(map, part) : undefined;
      const count = entry?.value.kind === 'map' ? entry.value.entries.length : 0;
      if (!entry || count <= most) continue;
      problems.add(entry, `there are ${count} ${part}, at most ${most} are read.`, 'Leave some out.');
      isTooMuch = true;
    }
  }
  if (isTooMuch) problems.throwIfAny();
}

/** Counts what the texts of a schedule hold, families by member, and refuses too much. */
export class SizeCount {
  private inAll = 0;

  constructor(
    private readonly root: MapTree,
    private readonly problems: Problems,
  ) {}

  /** Adds a text; false if that is too much. */
  add({ from, quantities, charges }: ScheduleText): boolean {
    const counts = { quantities: quantities.length, charges: charges.length };
    for (const part of ['quantities', 'charges'] as const) {
      if (counts[part] <= mostEntries[part]) continue;
      const message = `make ${counts[part]} ${part} with all their windows, at most ${mostEntries[part]} are read.`;
      this.problems.add(entryOf(this.root, part) ?? this.root, message, 'Name fewer windows, or leave some out.');
      return false;
    }
    this.inAll += counts.quantities + counts.charges;
    if (this.inAll <= mostInAll) return true;
    const message = `the versions up to ${from} hold ${this.inAll} quantities and charges together, at most ${mostInAll} are read.`;
    const place = entryOf(this.root, 'versions') ?? this.root;
    this.problems.add(place, message, `Begin another schedule file with the version of ${from}.`);
    return false;
  }
}
