import { whyQuery } from '@/schemas/tariff-why';
import { endpoint, parseOrThrow } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { explainFigure } from '@/server/services/tariff-why';

export const GET = endpoint(async ({ actor, params, url }) => {
  await openEngagement(actor, params.code ?? '');
  const query = parseOrThrow(whyQuery, Object.fromEntries(url.searchParams));
  return Response.json(await explainFigure(actor, params.code ?? '', query));
});
