import { billChange, billRemoval } from '@/schemas/bill';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { changeBill, removeBill } from '@/server/services/bills';
import { openEngagement } from '@/server/services/engagements';

export const PUT = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const change = parseOrThrow(billChange, await readJson(request));
  return Response.json(await changeBill(actor, params.code ?? '', Number(params.id), change));
});

export const DELETE = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const seen = parseOrThrow(billRemoval, await readJson(request));
  await removeBill(actor, params.code ?? '', Number(params.id), seen);
  return new Response(null, { status: 204 });
});
