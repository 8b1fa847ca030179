import { draftInput } from '@/schemas/schedule-editor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { dropDraft, keepDraft } from '@/server/services/schedule-drafts';
import { authorizeSchedules } from '@/server/services/schedule-revisions';

export const PUT = endpoint(async ({ actor, params, request }) => {
  authorizeSchedules(actor);
  const input = parseOrThrow(draftInput, await readJson(request));
  return Response.json(await keepDraft(actor, params.id ?? '', input));
});

export const DELETE = endpoint(async ({ actor, params }) => {
  await dropDraft(actor, params.id ?? '');
  return new Response(null, { status: 204 });
});
