import { chooseInput } from '@/schemas/tariff';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { chooseSchedule } from '@/server/services/tariff';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const input = parseOrThrow(chooseInput, await readJson(request));
  return Response.json(await chooseSchedule(actor, params.code ?? '', input));
});
