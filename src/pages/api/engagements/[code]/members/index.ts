import { memberInput } from '@/schemas/engagement';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { addMember } from '@/server/services/members';

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const { userId } = parseOrThrow(memberInput, await readJson(request));
  return Response.json(await addMember(opened, userId), { status: 201 });
});
