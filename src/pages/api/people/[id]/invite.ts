import { endpoint } from '@/server/http';
import { rowId } from '@/server/row-id';
import { sendInvitation } from '@/server/services/account';

export const POST = endpoint(async ({ actor, params }) =>
  Response.json(await sendInvitation(actor, rowId(params.id)), { status: 201 }),
);
