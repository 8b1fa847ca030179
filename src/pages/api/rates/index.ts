import { rateInput } from '@/schemas/rate';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { authorizeRates, setRate } from '@/server/services/rates';

export const POST = endpoint(async ({ actor, request }) => {
  authorizeRates(actor);
  const input = parseOrThrow(rateInput, await readJson(request));
  return Response.json(await setRate(actor, input), { status: 201 });
});
