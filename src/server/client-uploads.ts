import { Router, type Request, type Response } from 'express';
import { rateLimit } from 'express-rate-limit';
import { z } from 'zod';
import { storeOriginal } from './drawer';
import { ServiceError, unauthenticated } from './errors';
import { parseOrThrow, toErrorBody } from './http';
import { checkedBody } from './media-type';
import type { Actor } from './policies/actor';
import { rowId } from './row-id';
import { authorizeAnswer, receiveAnswer } from './services/request-answers';
import { clientRequest } from './services/requests';

const query = z.object({
  fileName: z.string().trim().min(1, 'The file needs a name.').max(255, 'The name of the file is too long.'),
});

/** Files one person sends at the same time; a browser of ours sends one after the other. */
const mostAtOnce = 4;
const underWay = new Map<number, number>();

async function countedFor<Result>(actor: Actor, work: () => Promise<Result>): Promise<Result> {
  const count = underWay.get(actor.id) ?? 0;
  if (count >= mostAtOnce) {
    throw new ServiceError(429, 'busy', `${count} files are on their way already. Send this one when they are here.`);
  }
  underWay.set(actor.id, count + 1);
  try {
    return await work();
  } finally {
    const left = (underWay.get(actor.id) ?? 1) - 1;
    if (left > 0) underWay.set(actor.id, left);
    else underWay.delete(actor.id);
  }
}

async function takeAnswer(req: Request): Promise<unknown> {
  const actor = req.user as Actor | undefined;
  if (!actor) throw unauthenticated();
  const { code, number, position } = req.params;
  const address = { code: String(code), number: rowId(String(number)), position: rowId(String(position)) };
  const answer = await authorizeAnswer(actor, address, Number(req.headers['content-length'] ?? 0));
  const { fileName } = parseOrThrow(query, req.query);
  return countedFor(actor, async () => {
    let mediaType = '';
    const stored = await storeOriginal(checkedBody(req, fileName, (found) => (mediaType = found)));
    await receiveAnswer(actor, answer, { fileName, mediaType, ...stored });
    return clientRequest(actor, answer.open);
  });
}

/**
 * The way in for files of a client's people: a raw PUT streamed to the drawer. Nobody opens the file here; reading begins
 * when the practice takes it into intake.
 */
export function clientUploadRoutes(): Router {
  const router = Router();
  const perPerson = rateLimit({
    windowMs: 60 * 60 * 1000,
    limit: 400,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    skip: (req) => !(req as Request).user,
    keyGenerator: (req) => `person ${((req as Request).user as Actor).id}`,
    handler: (_req, res) => {
      const message = 'Many files came from you within an hour. Wait a while, then send the rest.';
      res.status(429).json({ error: { code: 'too-many', message } });
    },
  });
  const address = '/api/engagements/:code/requests/:number/items/:position/uploads';
  router.put(address, perPerson, (req: Request, res: Response) => {
    takeAnswer(req).then(
      (request) => res.status(201).json(request),
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
