import { intakeStep } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { keepIntake } from '@/server/services/intake-keep';

export const POST = endpoint(async ({ actor, params, request }) => {
  const { version } = parseOrThrow(intakeStep, await readJson(request));
  return Response.json(await keepIntake(actor, Number(params.id), version));
});
