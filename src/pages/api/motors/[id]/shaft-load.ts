import { shaftLoadInput } from '@/schemas/shaft-load';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { changeShaftLoad, shaftLoadViewOf } from '@/server/services/motor-loads';
import { openMotor } from '@/server/services/motors';

export const GET = endpoint(async ({ actor, params }) =>
  Response.json(await shaftLoadViewOf(await openMotor(actor, rowId(params.id)))),
);

export const PUT = endpoint(async ({ actor, params, request }) => {
  const found = await openMotor(actor, rowId(params.id));
  const input = parseOrThrow(shaftLoadInput, await readJson(request));
  return Response.json(await changeShaftLoad(found, input));
});
