import { versionInput } from '@/schemas/motor';
import { rateChangeInput } from '@/schemas/rate';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { changeRate, openRate, removeRate } from '@/server/services/rates';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const rate = await openRate(actor, rowId(params.id));
  const input = parseOrThrow(rateChangeInput, await readJson(request));
  return Response.json(await changeRate(actor, rate, input));
});

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const rate = await openRate(actor, rowId(params.id));
  await removeRate(rate, parseOrThrow(versionInput, await readJson(request)).version);
  return new Response(null, { status: 204 });
});
