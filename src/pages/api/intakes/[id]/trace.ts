import { tracePoint } from '@/schemas/intake';
import { endpoint, parseOrThrow } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openIntake } from '@/server/services/intake-guard';
import { traceIntake } from '@/server/services/intake-trace';

export const GET = endpoint(async ({ actor, params, url }) => {
  const id = rowId(params.id);
  await openIntake(actor, id);
  const at = parseOrThrow(tracePoint, Object.fromEntries(url.searchParams));
  return Response.json(await traceIntake(actor, id, at));
});
