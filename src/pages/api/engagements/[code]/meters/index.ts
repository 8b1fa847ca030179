import { meterInput } from '@/schemas/engagement';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { addMeter } from '@/server/services/meters';

export const POST = endpoint(async ({ actor, params, request }) => {
  const code = params.code ?? '';
  await openEngagement(actor, code);
  const input = parseOrThrow(meterInput, await readJson(request));
  return Response.json(await addMeter(actor, code, input), { status: 201 });
});
