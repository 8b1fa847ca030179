import { chooseInput } from '@/schemas/tariff';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { chooseSchedule } from '@/server/services/tariff';

export const PUT = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(chooseInput, await readJson(request));
  return Response.json(await chooseSchedule(actor, params.code ?? '', input));
});
