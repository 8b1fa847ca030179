import { endpoint } from '@/server/http';
import { intakeOverlap } from '@/server/services/intake-overlap';

export const GET = endpoint(async ({ actor, params }) => Response.json(await intakeOverlap(actor, Number(params.id))));
