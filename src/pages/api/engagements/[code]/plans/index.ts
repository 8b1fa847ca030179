import { planInput } from '@/schemas/plan-input';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { createPlan, plansOf } from '@/server/services/plans';

export const GET = endpoint(async ({ actor, params }) =>
  Response.json(await plansOf(await openEngagement(actor, params.code ?? ''))),
);

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(planInput, await readJson(request));
  return Response.json(await createPlan(opened, input), { status: 201 });
});
