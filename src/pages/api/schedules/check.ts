import { checkInput } from '@/schemas/schedule-editor';
import { today } from '@/server/clock';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { checkSchedule } from '@/server/services/schedule-check';
import { authorizeSchedules } from '@/server/services/schedule-revisions';

export const POST = endpoint(async ({ actor, request }) => {
  authorizeSchedules(actor);
  const input = parseOrThrow(checkInput, await readJson(request));
  return Response.json(await checkSchedule(actor, input, today()));
});
