import { moveFindingInput } from '@/schemas/finding';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { moveFinding, openFinding } from '@/server/services/finding-moves';

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const found = await openFinding(actor, rowId(params.id));
  await moveFinding(actor, found, parseOrThrow(moveFindingInput, await readJson(request)));
  return new Response(null, { status: 204 });
});
