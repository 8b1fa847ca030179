import { lineMatchInput } from '@/schemas/tariff';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { matchLine } from '@/server/services/tariff';

export const PUT = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(lineMatchInput, await readJson(request));
  return Response.json(await matchLine(actor, params.code ?? '', input));
});
