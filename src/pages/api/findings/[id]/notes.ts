import { findingNoteInput } from '@/schemas/finding';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { noteFinding, openFinding } from '@/server/services/finding-moves';

export const POST = endpoint(async ({ actor, params, request }) => {
  const found = await openFinding(actor, rowId(params.id));
  await noteFinding(actor, found, parseOrThrow(findingNoteInput, await readJson(request)));
  return new Response(null, { status: 204 });
});
