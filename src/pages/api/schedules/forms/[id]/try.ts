import { tryInput } from '@/schemas/try-out';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openReadable, tryOutOn } from '@/server/services/try-out';

export const POST = endpoint(async ({ actor, params, request }) => {
  const schedule = await openReadable(actor, params.id ?? '', 'forms');
  const input = parseOrThrow(tryInput, await readJson(request));
  return Response.json(tryOutOn(schedule, input));
});
