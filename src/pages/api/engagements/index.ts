import { engagementInput } from '@/schemas/engagement';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { authorizeCreation, createEngagement, proposeCode } from '@/server/services/create-engagement';

/** The code that an engagement of a client named so would get. */
export const GET = endpoint(async ({ actor, url }) =>
  Response.json({ code: await proposeCode(actor, (url.searchParams.get('client') ?? '').slice(0, 120)) }),
);

export const POST = endpoint(async ({ actor, request }) => {
  authorizeCreation(actor);
  const input = parseOrThrow(engagementInput, await readJson(request));
  return Response.json({ code: await createEngagement(actor, input) }, { status: 201 });
});
