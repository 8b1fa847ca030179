import { attachmentChange } from '@/schemas/attachment';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { changeAttachment, openAttachment } from '@/server/services/attachments';

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const open = await openAttachment(actor, Number(params.id));
  const change = parseOrThrow(attachmentChange, await readJson(request));
  return Response.json(await changeAttachment(open, change));
});
