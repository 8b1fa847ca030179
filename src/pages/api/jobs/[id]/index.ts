import { rowId } from '@/server/row-id';
import { endpoint } from '@/server/http';
import { readJob } from '@/server/services/jobs';

export const GET = endpoint(async ({ actor, params }) => Response.json(await readJob(actor, rowId(params.id))));
