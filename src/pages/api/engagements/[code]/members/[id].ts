import { endpoint } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openEngagement } from '@/server/services/engagements';
import { removeMember } from '@/server/services/members';

export const DELETE = endpoint(async ({ actor, params }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  return Response.json(await removeMember(opened, rowId(params.id)));
});
