import { rememberInput, useMapInput } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { readWithMap, rememberMap } from '@/server/services/intake';
import { openIntake } from '@/server/services/intake-guard';

/** Remembers the map the file was read with. */
export const POST = endpoint(async ({ actor, params, request }) => {
  const id = rowId(params.id);
  await openIntake(actor, id);
  const input = parseOrThrow(rememberInput, await readJson(request));
  return Response.json(await rememberMap(actor, id, input), { status: 201 });
});

/** Reads the file with a remembered map. */
export const PUT = endpoint(async ({ actor, params, request }) => {
  const id = rowId(params.id);
  await openIntake(actor, id);
  const input = parseOrThrow(useMapInput, await readJson(request));
  return Response.json(await readWithMap(actor, id, input));
});
