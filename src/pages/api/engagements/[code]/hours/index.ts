import { hourInput } from '@/schemas/hour';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { hoursOf, logHours } from '@/server/services/hours';

export const GET = endpoint(async ({ actor, params }) =>
  Response.json(await hoursOf(actor, await openEngagement(actor, params.code ?? ''))),
);

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(hourInput, await readJson(request));
  return Response.json(await logHours(actor, opened, input), { status: 201 });
});
