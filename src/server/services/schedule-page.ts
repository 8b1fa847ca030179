import type { LibraryEntry } from '../../schemas/tariff';
import type { ScheduleSheetView } from '../../schemas/schedule-sheet';
import type { Actor } from '../policies/actor';
import { presentScheduleSheet } from '../presenters/schedule-sheet';
import { presentLibraryEntry } from '../presenters/tariff';
import { listScheduleFiles, openScheduleFile, scheduleUses, type ScheduleUse } from './schedules';

/** A row of the library: the file and where it is used. */
export interface LibraryRow extends LibraryEntry {
  uses: (ScheduleUse & { isCurrent: boolean })[];
}

/** The library with where each schedule is used. Staff only. */
export async function libraryPage(actor: Actor): Promise<LibraryRow[]> {
  const [files, uses] = await Promise.all([listScheduleFiles(actor), scheduleUses(actor)]);
  return files.map((file) => ({
    ...presentLibraryEntry(file),
    uses: (uses.get(file.id) ?? []).map((use) => ({ ...use, isCurrent: use.sha256 === file.sha256 })),
  }));
}

/** One schedule as its page reads, and where it is used. */
export async function schedulePage(
  actor: Actor,
  id: string,
  today: string,
): Promise<{ view: ScheduleSheetView; uses: LibraryRow['uses'] }> {
  const file = await openScheduleFile(actor, id);
  const uses = (await scheduleUses(actor)).get(id) ?? [];
  return {
    view: presentScheduleSheet(file, today),
    uses: uses.map((use) => ({ ...use, isCurrent: use.sha256 === file.sha256 })),
  };
}
