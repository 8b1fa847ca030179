import { attachment } from '@/server/download';
import { endpoint } from '@/server/http';
import { openOriginal } from '@/server/services/intake';

export const GET = endpoint(async ({ actor, params }) => attachment(await openOriginal(actor, Number(params.id))));
