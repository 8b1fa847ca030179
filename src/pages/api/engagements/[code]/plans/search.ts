import { searchInput } from '@/schemas/search';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { startSearch } from '@/server/services/search';

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(searchInput, await readJson(request));
  return Response.json(await startSearch(actor, opened, input), { status: 202 });
});
