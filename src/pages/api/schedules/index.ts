import { newScheduleInput } from '@/schemas/schedule-editor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { authorizeSchedules, createSchedule } from '@/server/services/schedule-revisions';

export const POST = endpoint(async ({ actor, request }) => {
  authorizeSchedules(actor);
  const input = parseOrThrow(newScheduleInput, await readJson(request));
  return Response.json({ id: await createSchedule(actor, input) }, { status: 201 });
});
