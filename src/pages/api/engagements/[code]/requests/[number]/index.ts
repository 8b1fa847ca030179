import { requestChangeInput } from '@/schemas/request';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openRequestAsStaff } from '@/server/services/request-open';
import { changeRequest } from '@/server/services/request-sending';
import { staffRequest } from '@/server/services/requests';

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const open = await openRequestAsStaff(actor, params.code ?? '', rowId(params.number));
  await changeRequest(open, parseOrThrow(requestChangeInput, await readJson(request)));
  return Response.json(await staffRequest(open));
});
