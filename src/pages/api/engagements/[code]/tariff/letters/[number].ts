import { versionInput } from '@/schemas/motor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openUtilityLetter, sendAgain } from '@/server/services/utility-letters';

export const POST = endpoint(async ({ actor, params, request }) => {
  const letter = await openUtilityLetter(actor, params.code ?? '', rowId(params.number));
  const { version } = parseOrThrow(versionInput, await readJson(request));
  return Response.json(await sendAgain(actor, letter, version));
});
