import { endpoint } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openEngagement } from '@/server/services/engagements';
import { removeMeter } from '@/server/services/meters';

export const DELETE = endpoint(async ({ actor, params }) => {
  const code = params.code ?? '';
  await openEngagement(actor, code);
  return Response.json(await removeMeter(actor, code, rowId(params.id)));
});
