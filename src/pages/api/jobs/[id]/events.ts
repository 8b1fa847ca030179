import { rowId } from '@/server/row-id';
import { endpoint } from '@/server/http';
import { jobEvents } from '@/server/job-events';

export const GET = endpoint(async ({ actor, params }) => {
  const stream = await jobEvents(actor, rowId(params.id));
  const headers = { 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' };
  return new Response(stream, { headers });
});
