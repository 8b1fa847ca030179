import { shareOf, type ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';
import { headerWords } from './words';

/**
 * Stamps of further tables: of tables laid side by side from one below the other where the first has its own, and of tables
 * that stand side by side in the file, whose stamps bear the name of the first.
 */
export function furtherStamps(
  profiles: readonly ColumnProfile[],
  found: ReadonlyMap<number, RoleFinding>,
  sections: readonly number[],
): [number, RoleFinding][] {
  const further = sections
    .slice(1)
    .flatMap((offset) =>
      [...found].map(([index, { role }]): [number, RoleFinding] => [
        offset + index,
        { role, tests: [[true, 'Stands where the table above has its stamps']] },
      ]),
    );
  if (further.length > 0) return further.filter(([index]) => index < profiles.length);
  const stamps = [...found].filter(([, { role }]) => role === 'stamp');
  const [first] = stamps;
  if (!first || found.size > 1) return [];
  const [own] = first;
  const isFigures = (profile: ColumnProfile): boolean => shareOf(profile, 'number') > 0.9;
  return profiles
    .filter(
      (profile) =>
        profile.index > own &&
        headerWords(profile.name).join(' ') === headerWords(profiles[own]?.name ?? '').join(' ') &&
        shareOf(profile, 'stamp', 'date') > 0.9 &&
        profiles.slice(own + 1, profile.index).some(isFigures) &&
        profiles.slice(profile.index + 1).some(isFigures),
    )
    .map((profile) => [
      profile.index,
      { role: 'stamp', tests: [[true, 'A second column of stamps, for the figures beside it']] },
    ]);
}
