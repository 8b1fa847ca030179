import { billRemoval } from '@/schemas/bill';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { takeBillApart } from '@/server/services/bill-joins';
import { openEngagement } from '@/server/services/engagements';

export const POST = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const seen = parseOrThrow(billRemoval, await readJson(request));
  return Response.json(await takeBillApart(actor, params.code ?? '', Number(params.id), seen));
});
