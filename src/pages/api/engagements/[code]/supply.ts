import { supplyChangeInput } from '@/schemas/supply';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { changeSupply } from '@/server/services/supplies';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(supplyChangeInput, await readJson(request));
  return Response.json(await changeSupply(opened, input));
});
