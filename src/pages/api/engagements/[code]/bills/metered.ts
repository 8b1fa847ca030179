import { billPeriod } from '@/schemas/bill';
import { endpoint, parseOrThrow } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { meteredPeriod } from '@/server/services/meter-check';

export const GET = endpoint(async ({ actor, params, url }) => {
  await openEngagement(actor, params.code ?? '');
  const period = parseOrThrow(billPeriod, Object.fromEntries(url.searchParams));
  return Response.json(await meteredPeriod(actor, params.code ?? '', period));
});
