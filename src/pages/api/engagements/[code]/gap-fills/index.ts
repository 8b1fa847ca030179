import { gapFillInput, gapStretch } from '@/schemas/gap-fill';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { fillGap, previewGap } from '@/server/services/gap-fills';

export const GET = endpoint(async ({ actor, params, url }) => {
  const code = params.code ?? '';
  await openEngagement(actor, code);
  const stretch = parseOrThrow(gapStretch, Object.fromEntries(url.searchParams));
  return Response.json(await previewGap(actor, code, stretch));
});

export const POST = endpoint(async ({ actor, params, request }) => {
  const code = params.code ?? '';
  await openEngagement(actor, code);
  const input = parseOrThrow(gapFillInput, await readJson(request));
  return Response.json(await fillGap(actor, code, input), { status: 201 });
});
