import { itemDecisionInput } from '@/schemas/request';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { decideItem } from '@/server/services/request-items';
import { itemOf, openRequestAsStaff } from '@/server/services/request-open';
import { staffRequest } from '@/server/services/requests';

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const open = await openRequestAsStaff(actor, params.code ?? '', rowId(params.number));
  const item = await itemOf(open, rowId(params.position));
  await decideItem(open, item, parseOrThrow(itemDecisionInput, await readJson(request)));
  return Response.json(await staffRequest(open));
});
