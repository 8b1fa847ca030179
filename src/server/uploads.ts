import { Router, type Request, type Response } from 'express';
import { z } from 'zod';
import { unauthenticated } from './errors';
import { parseOrThrow, toErrorBody } from './http';
import { storeOriginal } from './drawer';
import type { Actor } from './policies/actor';
import { authorizeIntake, patienceMs, receiveFile } from './services/intake';

const query = z.object({
  kind: z.enum(['intervals', 'bills'], { error: 'Say whether the file holds intervals or bills.' }),
  fileName: z.string().trim().min(1, 'The file needs a name.').max(255, 'The name of the file is too long.'),
});

async function takeUpload(req: Request): Promise<unknown> {
  const actor = req.user as Actor | undefined;
  if (!actor) throw unauthenticated();
  const input = parseOrThrow(query, req.query);
  const engagement = await authorizeIntake(actor, String(req.params.code));
  const file = await storeOriginal(req);
  return receiveFile(actor, engagement, { ...input, ...file }, patienceMs);
}

/** The one way in for files: a raw PUT streamed to the drawer, before Astro, which would read it whole into memory. */
export function uploadRoutes(): Router {
  const router = Router();
  router.put('/api/engagements/:code/uploads', (req: Request, res: Response) => {
    takeUpload(req).then(
      (intake) => res.status(201).json(intake),
      (error: unknown) => {
        // The sender stopped or went away: nothing was kept, and nobody is there to be told.
        if (req.readableAborted) return;
        const { status, body } = toErrorBody(error);
        res.status(status).json(body);
        req.resume();
      },
    );
  });
  return router;
}
