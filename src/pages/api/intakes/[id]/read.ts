import { intakeStep } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { patienceMs, readAgain } from '@/server/services/intake';
import { openIntake } from '@/server/services/intake-guard';

export const POST = endpoint(async ({ actor, params, request }) => {
  const id = rowId(params.id);
  await openIntake(actor, id);
  const { version } = parseOrThrow(intakeStep, await readJson(request));
  return Response.json(await readAgain(actor, id, version, patienceMs));
});
