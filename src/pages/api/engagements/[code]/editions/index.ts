import { makeEditionInput } from '@/schemas/edition';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { makeEdition } from '@/server/services/editions';
import { openEngagement } from '@/server/services/engagements';

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const { planId } = parseOrThrow(makeEditionInput, await readJson(request));
  return Response.json(await makeEdition(actor, opened, planId), { status: 202 });
});
