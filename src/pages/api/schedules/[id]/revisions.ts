import { keepRevisionInput } from '@/schemas/schedule-editor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { authorizeSchedules, keepRevision } from '@/server/services/schedule-revisions';

export const POST = endpoint(async ({ actor, params, request }) => {
  authorizeSchedules(actor);
  const input = parseOrThrow(keepRevisionInput, await readJson(request));
  return Response.json({ number: await keepRevision(actor, params.id ?? '', input) }, { status: 201 });
});
