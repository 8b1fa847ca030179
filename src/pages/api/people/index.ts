import { personInput } from '@/schemas/client';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { addPerson, authorizePeople } from '@/server/services/people';

export const POST = endpoint(async ({ actor, request }) => {
  authorizePeople(actor);
  const input = parseOrThrow(personInput, await readJson(request));
  return Response.json(await addPerson(actor, input), { status: 201 });
});
