import { keepStep } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { keepIntake } from '@/server/services/intake-keep';
import { openIntake } from '@/server/services/intake-guard';

export const POST = endpoint(async ({ actor, params, request }) => {
  const id = rowId(params.id);
  await openIntake(actor, id);
  const { version, overlap } = parseOrThrow(keepStep, await readJson(request));
  return Response.json(await keepIntake(actor, id, version, overlap));
});
