import { mailEditionInput } from '@/schemas/edition';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { mailEdition, openEdition } from '@/server/services/editions';

export const POST = endpoint(async ({ actor, params, request }) => {
  const found = await openEdition(actor, rowId(params.id));
  const input = parseOrThrow(mailEditionInput, await readJson(request));
  return Response.json(await mailEdition(actor, found, input));
});
