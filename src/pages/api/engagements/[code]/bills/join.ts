import { billJoin } from '@/schemas/bill';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { joinBills } from '@/server/services/bill-joins';
import { openEngagement } from '@/server/services/engagements';

export const POST = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const join = parseOrThrow(billJoin, await readJson(request));
  return Response.json(await joinBills(actor, params.code ?? '', join));
});
