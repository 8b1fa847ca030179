import { endpoint } from '@/server/http';
import { originalResponse } from '@/server/original-response';
import { openPages } from '@/server/services/attachments';

export const GET = endpoint(async ({ actor, params }) => originalResponse(await openPages(actor, Number(params.id))));
