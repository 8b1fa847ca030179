import { matchInput } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { matchIntake } from '@/server/services/intake';

export const POST = endpoint(async ({ actor, params, request }) => {
  const input = parseOrThrow(matchInput, await readJson(request));
  return Response.json(await matchIntake(actor, Number(params.id), input));
});
