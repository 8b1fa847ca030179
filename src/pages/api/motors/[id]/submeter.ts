import { submeterRemoval } from '@/schemas/shaft-load';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openMotor } from '@/server/services/motors';
import { removeSubmeter } from '@/server/services/submeter';

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const found = await openMotor(actor, rowId(params.id));
  const { fileId } = parseOrThrow(submeterRemoval, await readJson(request));
  return Response.json(await removeSubmeter(found, fileId));
});
