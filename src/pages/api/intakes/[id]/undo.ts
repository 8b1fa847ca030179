import { intakeStep } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { undoIntake } from '@/server/services/intake-keep';

export const POST = endpoint(async ({ actor, params, request }) => {
  const { version } = parseOrThrow(intakeStep, await readJson(request));
  return Response.json(await undoIntake(actor, Number(params.id), version));
});
