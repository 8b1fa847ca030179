import { rememberInput, useMapInput } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { readWithMap, rememberMap } from '@/server/services/intake';

/** Remembers the map the file was read with. */
export const POST = endpoint(async ({ actor, params, request }) => {
  const input = parseOrThrow(rememberInput, await readJson(request));
  return Response.json(await rememberMap(actor, Number(params.id), input), { status: 201 });
});

/** Reads the file with a remembered map. */
export const PUT = endpoint(async ({ actor, params, request }) => {
  const input = parseOrThrow(useMapInput, await readJson(request));
  return Response.json(await readWithMap(actor, Number(params.id), input));
});
