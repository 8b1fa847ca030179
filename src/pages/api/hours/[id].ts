import { hourChangeInput } from '@/schemas/hour';
import { versionInput } from '@/schemas/motor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { changeHours, openHours, removeHours } from '@/server/services/hours';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const found = await openHours(actor, rowId(params.id));
  const input = parseOrThrow(hourChangeInput, await readJson(request));
  return Response.json(await changeHours(actor, found, input));
});

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const found = await openHours(actor, rowId(params.id));
  await removeHours(found, parseOrThrow(versionInput, await readJson(request)).version);
  return new Response(null, { status: 204 });
});
