import type { EditorView } from '../../schemas/schedule-editor';
import type { Actor } from '../policies/actor';
import { monthSources } from './schedule-check';
import { draftOf, othersWriting } from './schedule-drafts';
import { openRevision } from './schedule-history';
import { openScheduleFile, scheduleUses } from './schedules';

/**
 * Everything the editor begins with: the kept text, one's own draft of it, months to try it on.
 *
 * @param from  A kept revision to take up again instead of the draft
 * @throws {ServiceError} 404 where there is no such schedule or revision
 */
export async function editorView(actor: Actor, id: string, from: number | null): Promise<EditorView> {
  const file = await openScheduleFile(actor, id);
  const revision = file.revision ?? 0;
  const [draft, months, uses, others] = await Promise.all([
    draftOf(actor, id),
    monthSources(actor, id),
    scheduleUses(actor),
    othersWriting(actor, id),
  ]);
  const taken =
    from === null ? null : { text: (await openRevision(actor, id, from)).text, baseNumber: revision, at: '' };
  const kept = draft && { text: draft.text, baseNumber: draft.baseNumber, at: draft.updatedAt.toISOString() };
  return {
    id,
    title: file.schedule?.title ?? file.fileName,
    revision,
    keptText: file.text,
    draft: taken ?? kept,
    months,
    uses: (uses.get(id) ?? []).map(({ code }) => code),
    othersWriting: others,
  };
}
