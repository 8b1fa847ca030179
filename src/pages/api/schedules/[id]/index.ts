import { putAwayInput } from '@/schemas/schedule-editor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { authorizeSchedules, putAway } from '@/server/services/schedule-revisions';

export const PATCH = endpoint(async ({ actor, params, request }) => {
  authorizeSchedules(actor);
  await putAway(actor, params.id ?? '', parseOrThrow(putAwayInput, await readJson(request)));
  return new Response(null, { status: 204 });
});
