import { scheduleJsonSchema } from '@/core/tariff';
import { endpoint } from '@/server/http';
import { authorizeSchedules } from '@/server/services/schedule-revisions';

/** The language as a JSON Schema, for editors of one's own. */
export const GET = endpoint(async ({ actor }) => {
  authorizeSchedules(actor);
  return new Response(JSON.stringify(scheduleJsonSchema(), null, 2), {
    headers: { 'content-type': 'application/schema+json', 'cache-control': 'private, max-age=3600' },
  });
});
