import { endpoint } from '@/server/http';
import { startAssumedSaving } from '@/server/services/assumed-saving';
import { openEngagement } from '@/server/services/engagements';

export const POST = endpoint(async ({ actor, params }) => {
  const opened = await openEngagement(actor, params.code ?? '');
  return Response.json(await startAssumedSaving(actor, opened), { status: 202 });
});
