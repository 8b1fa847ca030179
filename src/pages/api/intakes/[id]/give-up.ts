import { intakeStep } from '@/schemas/intake';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { giveUpIntake } from '@/server/services/intake';

export const POST = endpoint(async ({ actor, params, request }) => {
  const { version } = parseOrThrow(intakeStep, await readJson(request));
  return Response.json(await giveUpIntake(actor, Number(params.id), version));
});
