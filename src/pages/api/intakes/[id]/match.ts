import { matchInput } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { matchIntake } from '@/server/services/intake';
import { openIntake } from '@/server/services/intake-guard';

export const POST = endpoint(async ({ actor, params, request }) => {
  const id = rowId(params.id);
  await openIntake(actor, id);
  const input = parseOrThrow(matchInput, await readJson(request));
  return Response.json(await matchIntake(actor, id, input));
});
