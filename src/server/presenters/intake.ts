import type { ColumnMapRow } from '../models/ColumnMapRow';
import type { Intake } from '../models/Intake';
import type { IntakeRow, IntakeView, RememberedMap } from '../../schemas/intake';

const iso = (date: Date | null) => date?.toISOString() ?? null;

/** A file on its way in, as lists show it. */
export function presentIntakeRow(intake: Intake, broughtBy: string | null = null): IntakeRow {
  const { id, kind, fileName, bytes, sha256, state, version } = intake;
  return {
    id,
    kind,
    fileName,
    bytes,
    sha256,
    state,
    broughtBy,
    broughtAt: intake.createdAt.toISOString(),
    keptAt: iso(intake.keptAt),
    undoneAt: iso(intake.undoneAt),
    version,
  };
}

/** A remembered map without its columns. */
export function presentMap(row: ColumnMapRow): RememberedMap {
  return { id: row.id, name: row.name, at: row.updatedAt.toISOString() };
}

/** A file with everything its four steps show. */
export function presentIntake(
  intake: Intake,
  around: {
    engagement: IntakeView['engagement'];
    broughtBy: string | null;
    reading: IntakeView['reading'];
    maps: ColumnMapRow[];
  },
): IntakeView {
  const stored = intake.preview;
  const readWith = around.maps.find((map) => map.id === stored?.readWithId);
  return {
    ...presentIntakeRow(intake, around.broughtBy),
    engagement: around.engagement,
    timeZone: stored?.timeZone ?? around.engagement.siteTimeZone,
    confirmed: stored?.confirmed ?? [],
    preview: stored?.preview ?? null,
    problems: intake.problems ?? [],
    reading: around.reading,
    readWith: readWith ? presentMap(readWith) : null,
    offered: around.maps.map(presentMap),
  };
}
