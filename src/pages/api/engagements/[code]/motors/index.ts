import { motorInput } from '@/schemas/motor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { createMotor, motorsOf } from '@/server/services/motors';
import { openEngagement } from '@/server/services/engagements';

export const GET = endpoint(async ({ actor, params }) =>
  Response.json(await motorsOf(await openEngagement(actor, params.code ?? ''))),
);

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(motorInput, await readJson(request));
  return Response.json(await createMotor(opened, input), { status: 201 });
});
