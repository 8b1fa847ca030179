import { motorChangeInput, versionInput } from '@/schemas/motor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { changeMotor, openMotor, removeMotor } from '@/server/services/motors';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const found = await openMotor(actor, rowId(params.id));
  const input = parseOrThrow(motorChangeInput, await readJson(request));
  return Response.json(await changeMotor(found, input));
});

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const found = await openMotor(actor, rowId(params.id));
  await removeMotor(found, parseOrThrow(versionInput, await readJson(request)));
  return new Response(null, { status: 204 });
});
