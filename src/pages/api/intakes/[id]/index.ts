import { endpoint } from '@/server/http';
import { readIntake } from '@/server/services/intake';

export const GET = endpoint(async ({ actor, params }) => Response.json(await readIntake(actor, Number(params.id))));
