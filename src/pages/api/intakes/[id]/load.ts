import { endpoint } from '@/server/http';
import { intakePicture } from '@/server/services/intake-keep';

export const GET = endpoint(async ({ actor, params }) => Response.json(await intakePicture(actor, Number(params.id))));
