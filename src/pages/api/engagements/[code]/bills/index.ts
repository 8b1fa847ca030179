import { billInput } from '@/schemas/bill';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { addBill } from '@/server/services/bills';
import { openEngagement } from '@/server/services/engagements';

export const POST = endpoint(async ({ actor, params, request }) => {
  await openEngagement(actor, params.code ?? '');
  const input = parseOrThrow(billInput, await readJson(request));
  return Response.json(await addBill(actor, params.code ?? '', input), { status: 201 });
});
