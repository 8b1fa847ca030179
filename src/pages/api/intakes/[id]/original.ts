import { endpoint } from '@/server/http';
import { originalResponse } from '@/server/original-response';
import { openOriginal } from '@/server/services/intake';

export const GET = endpoint(async ({ actor, params }) =>
  originalResponse(await openOriginal(actor, Number(params.id))),
);
