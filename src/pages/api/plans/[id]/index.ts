import { planChangeInput, planChoiceInput } from '@/schemas/plan-input';
import { versionInput } from '@/schemas/motor';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { changePlan, choosePlan, openPlan, removePlan } from '@/server/services/plans';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const found = await openPlan(actor, rowId(params.id));
  const input = parseOrThrow(planChangeInput, await readJson(request));
  return Response.json(await changePlan(found, input));
});

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const found = await openPlan(actor, rowId(params.id));
  const input = parseOrThrow(planChoiceInput, await readJson(request));
  return Response.json(await choosePlan(found, input));
});

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const found = await openPlan(actor, rowId(params.id));
  await removePlan(found, parseOrThrow(versionInput, await readJson(request)));
  return new Response(null, { status: 204 });
});
