import { endpoint } from '@/server/http';
import { rowId } from '@/server/row-id';
import { openMotor } from '@/server/services/motors';
import { removeSubmeter } from '@/server/services/submeter';

export const DELETE = endpoint(async ({ actor, params }) => {
  const found = await openMotor(actor, rowId(params.id));
  return Response.json(await removeSubmeter(found, rowId(params.file)));
});
