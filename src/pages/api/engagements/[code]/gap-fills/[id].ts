import { seenFill } from '@/schemas/gap-fill';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openEngagement } from '@/server/services/engagements';
import { takeBackFill } from '@/server/services/gap-fills';

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const code = params.code ?? '';
  await openEngagement(actor, code);
  const { version } = parseOrThrow(seenFill, await readJson(request));
  await takeBackFill(actor, code, { id: rowId(params.id), version });
  return new Response(null, { status: 204 });
});
