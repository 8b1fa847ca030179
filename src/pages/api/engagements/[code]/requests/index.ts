import { requestInput } from '@/schemas/request';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { sendRequest } from '@/server/services/request-sending';
import { staffRequest } from '@/server/services/requests';

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(requestInput, await readJson(request));
  return Response.json(await staffRequest(await sendRequest(actor, opened, input)), { status: 201 });
});
