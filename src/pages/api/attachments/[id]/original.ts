import { attachment } from '@/server/download';
import { endpoint } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openPages } from '@/server/services/attachments';

export const GET = endpoint(async ({ actor, params }) => attachment(await openPages(actor, rowId(params.id))));
