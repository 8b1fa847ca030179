import { answerInput } from '@/schemas/request';
import { endpoint, parseOrThrow, readJson } from '@/server/http';
import { rowId } from '@/server/row-id';
import { answerInWords } from '@/server/services/request-answers';
import { itemOf, openRequestToAnswer } from '@/server/services/request-open';
import { clientRequest } from '@/server/services/requests';

export const PUT = endpoint(async ({ actor, params, request }) => {
  const open = await openRequestToAnswer(actor, params.code ?? '', rowId(params.number));
  const item = await itemOf(open, rowId(params.position));
  await answerInWords(actor, { open, item }, parseOrThrow(answerInput, await readJson(request)));
  return Response.json(await clientRequest(actor, open));
});
