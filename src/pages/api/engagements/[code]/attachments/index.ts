import { endpoint } from '@/server/http';
import { listAttachments } from '@/server/services/attachments';

export const GET = endpoint(async ({ actor, params }) =>
  Response.json(await listAttachments(actor, params.code ?? '')),
);
