import { rowId } from '@/server/row-id';
import { endpoint } from '@/server/http';
import { cancelJob } from '@/server/services/jobs';

export const POST = endpoint(async ({ actor, params }) => Response.json(await cancelJob(actor, rowId(params.id))));
