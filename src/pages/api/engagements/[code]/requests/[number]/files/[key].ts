import { fileActInput, removeFileInput } from '@/schemas/request';
import { attachment } from '@/server/download';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { removeAnswer } from '@/server/services/request-answers';
import { actOnFile, openRequestFile } from '@/server/services/request-files';
import { fileOf, openRequest, openRequestAsStaff, openRequestToAnswer } from '@/server/services/request-open';
import { clientRequest, staffRequest } from '@/server/services/requests';

export const GET = endpoint(async ({ actor, params }) => {
  const open = await openRequest(actor, params.code ?? '', rowId(params.number));
  return attachment(await openRequestFile(actor, open, params.key ?? ''));
});

export const PATCH = endpoint(async ({ actor, params, request }) => {
  const open = await openRequestAsStaff(actor, params.code ?? '', rowId(params.number));
  const key = params.key ?? '';
  await fileOf(open, key);
  const outcome = await actOnFile(actor, open, key, parseOrThrow(fileActInput, await readJson(request)));
  return Response.json({ ...outcome, request: await staffRequest(open) });
});

export const DELETE = endpoint(async ({ actor, params, request }) => {
  const open = await openRequestToAnswer(actor, params.code ?? '', rowId(params.number));
  const key = params.key ?? '';
  await fileOf(open, key);
  await removeAnswer(open, key, parseOrThrow(removeFileInput, await readJson(request)).version);
  return Response.json(await clientRequest(actor, open));
});
