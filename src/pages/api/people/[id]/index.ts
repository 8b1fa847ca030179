import { personChangeInput } from '@/schemas/client';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { changePerson, openPerson } from '@/server/services/people';

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const user = await openPerson(actor, rowId(params.id));
  const input = parseOrThrow(personChangeInput, await readJson(request));
  return Response.json(await changePerson(actor, user, input));
});
