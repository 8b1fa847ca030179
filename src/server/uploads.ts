import { Router, type Request, type Response } from 'express';
import { z } from 'zod';
import { attachmentQuery } from '../schemas/attachment';
import { submeterQuery } from '../schemas/shaft-load';
import { unauthenticated } from './errors';
import { parseOrThrow, toErrorBody } from './http';
import { storeOriginal } from './drawer';
import { storePages } from './page-stream';
import type { Actor } from './policies/actor';
import { rowId } from './row-id';
import { assertBillOf, attachPages } from './services/attachments';
import { authorizeIntake, patienceMs, receiveFile } from './services/intake';
import { authorizeSubmeter, takeSubmeter } from './services/submeter';

const query = z.object({
  kind: z.enum(['intervals', 'bills'], { error: 'Say whether the file holds intervals or bills.' }),
  meterId: z.coerce.number('Choose the meter.').int().positive().optional(),
  fileName: z.string().trim().min(1, 'The file needs a name.').max(255, 'The name of the file is too long.'),
});

async function takeUpload(actor: Actor, req: Request): Promise<unknown> {
  const input = parseOrThrow(query, req.query);
  const engagement = await authorizeIntake(actor, String(req.params.code));
  const file = await storeOriginal(req);
  return receiveFile(actor, engagement, { ...input, ...file }, patienceMs);
}

async function takePages(actor: Actor, req: Request): Promise<unknown> {
  const opened = await authorizeIntake(actor, String(req.params.code));
  const { fileName, billId = null, pageCount = null } = parseOrThrow(attachmentQuery, req.query);
  await assertBillOf(opened.engagement.id, billId);
  const file = await storePages(req, fileName);
  return attachPages(actor, opened, { ...file, fileName, billId, pageCount });
}

async function takeSubmeterFile(actor: Actor, req: Request): Promise<unknown> {
  const found = await authorizeSubmeter(actor, rowId(String(req.params.id)));
  const input = parseOrThrow(submeterQuery, req.query);
  return takeSubmeter(actor, found, { ...input, ...(await storeOriginal(req)) });
}

/** Takes a raw PUT; what goes wrong is told as the other endpoints tell it. */
const taking = (take: (actor: Actor, req: Request) => Promise<unknown>) => (req: Request, res: Response) => {
  const actor = req.user as Actor | undefined;
  const taken = actor ? take(actor, req) : Promise.reject(unauthenticated());
  taken.then(
    (answer) => res.status(201).json(answer),
    (error: unknown) => {
      // The sender stopped or went away: nothing was kept, and nobody is there to be told.
      if (req.readableAborted) return;
      const { status, body } = toErrorBody(error);
      res.status(status).json(body);
      req.resume();
    },
  );
};

/** The ways in for files: a raw PUT streamed to the drawer, before Astro, which would read it whole into memory. */
export function uploadRoutes(): Router {
  const router = Router();
  router.put('/api/engagements/:code/uploads', taking(takeUpload));
  router.put('/api/engagements/:code/attachments', taking(takePages));
  router.put('/api/motors/:id/submeter', taking(takeSubmeterFile));
  return router;
}
