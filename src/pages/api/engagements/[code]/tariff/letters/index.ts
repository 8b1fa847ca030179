import { utilityLetterInput } from '@/schemas/utility-letter';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { openEngagement } from '@/server/services/engagements';
import { sendUtilityLetter } from '@/server/services/utility-letters';

export const POST = endpoint(async ({ actor, params, request }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(utilityLetterInput, await readJson(request));
  return Response.json(await sendUtilityLetter(actor, opened, input), { status: 201 });
});
