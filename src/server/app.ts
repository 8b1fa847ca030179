import { sessionStore } from './session-store';
import express, { type Express, type NextFunction, type Request, type Response } from 'express';
import { rateLimit } from 'express-rate-limit';
import session from 'express-session';
import helmet from 'helmet';
import passport from 'passport';
import { Strategy as LocalStrategy } from 'passport-local';
import { getEnv } from './env';
import { migrate } from './db/migrations';
import { actAs } from './db/context';
import { toErrorBody } from './http';
import { notFound, ServiceError } from './errors';
import type { Actor } from './policies/actor';
import { checkSignIn, loadActor, sessionEpochOf } from './services/sign-in';
import { clientUploadRoutes } from './client-uploads';
import { uploadRoutes } from './uploads';

const bodyCapBytes = 1024 * 1024;
const rememberMs = 14 * 24 * 60 * 60 * 1000;

let appPromise: Promise<Express> | undefined;

/** The Express layer before Astro: session, sign-in, origin check, limits, uploads. One for the process. */
export const getApp = () => (appPromise ??= build());

function sendError(error: unknown, res: Response): void {
  const { status, body } = toErrorBody(error);
  if (!res.headersSent) res.status(status).json(body);
}

/** The origins whose unsafe requests are believed: the configured one, and on this machine both its names. */
function trustedOrigins(): Set<string> {
  const url = new URL(getEnv().APP_ORIGIN);
  const origins = new Set([url.origin]);
  if (url.hostname === '127.0.0.1' || url.hostname === 'localhost') {
    for (const host of ['127.0.0.1', 'localhost'])
      origins.add(`${url.protocol}//${host}${url.port ? `:${url.port}` : ''}`);
  }
  return origins;
}

const isSafe = (method: string) => method === 'GET' || method === 'HEAD' || method === 'OPTIONS';

function checkOrigin(origins: Set<string>) {
  return (req: Request, res: Response, next: NextFunction) => {
    if (isSafe(req.method) || origins.has(req.headers.origin ?? '')) return next();
    const message = 'This request came from another site and was refused. Open the page itself and try again.';
    sendError(new ServiceError(403, 'origin', message), res);
  };
}

/** An address with a NUL sign has nothing behind it, and no statement of the database may carry one. */
function refuseNul(req: Request, res: Response, next: NextFunction): void {
  if (!/%00/.test(req.url)) return next();
  if (req.path.startsWith('/api/')) return sendError(notFound(), res);
  req.url = '/404';
  next();
}

/** Astro reads bodies whole: nothing large or of unknown length may reach it. */
function limitBody(req: Request, res: Response, next: NextFunction): void {
  if (isSafe(req.method)) return next();
  const length = req.headers['content-length'];
  if (length === undefined && req.headers['transfer-encoding'] !== undefined) {
    return sendError(new ServiceError(411, 'length-required', 'The request must say its length.'), res);
  }
  if (Number(length ?? 0) > bodyCapBytes) {
    return sendError(
      new ServiceError(413, 'too-large', 'The form is larger than 1 MiB. Files go through intake.'),
      res,
    );
  }
  next();
}

/** A session holds the account's id and epoch; the account is read afresh for every request. */
function setUpPassport(): void {
  passport.use(
    new LocalStrategy({ usernameField: 'email' }, (email, password, done) => {
      checkSignIn(email, password).then(
        (result) => ('user' in result ? done(null, result.user) : done(null, false, { message: result.message })),
        (error: unknown) => done(error),
      );
    }),
  );
  passport.serializeUser((user, done) => {
    const { id } = user as Actor;
    sessionEpochOf(id).then(
      (epoch) => done(null, `${id}.${epoch}`),
      (error: unknown) => done(error),
    );
  });
  passport.deserializeUser((key: string, done) => {
    const [id, epoch] = key.split('.').map(Number);
    loadActor(id ?? 0, epoch ?? -1).then(
      (actor) => done(null, actor ?? false),
      (error: unknown) => done(error),
    );
  });
}

function logIn(req: Request, user: Actor, remember: boolean): Promise<void> {
  return new Promise((resolve, reject) => {
    req.login(user, (error: unknown) => {
      if (error) return reject(error as Error);
      if (remember) req.session.cookie.maxAge = rememberMs;
      req.session.save((failed: unknown) => (failed ? reject(failed as Error) : resolve()));
    });
  });
}

function signIn(req: Request, res: Response): App.Locals['signIn'] {
  return (email, password, remember) =>
    new Promise((resolve, reject) => {
      req.body = { email, password };
      const answer = (error: unknown, user: Actor | false | undefined, info?: { message?: string }) => {
        if (error) return reject(error as Error);
        if (!user) return resolve({ ok: false, message: info?.message ?? 'Write your e-mail and your password.' });
        logIn(req, user, remember).then(() => resolve({ ok: true }), reject);
      };
      (passport.authenticate('local', answer) as express.RequestHandler)(req, res, reject);
    });
}

function signOut(req: Request): App.Locals['signOut'] {
  return () =>
    new Promise((resolve, reject) => {
      req.logout((error: unknown) => {
        if (error) return reject(error as Error);
        req.session.destroy((failed: unknown) => (failed ? reject(failed as Error) : resolve()));
      });
    });
}

/** Renews a session once an hour of use, so that it ends a day after its last use and not after its first. */
function renewSession(req: Request): void {
  const kept = req.session as typeof req.session & { renewedAt?: number };
  if (req.user && Date.now() - (kept.renewedAt ?? 0) > 60 * 60 * 1000) kept.renewedAt = Date.now();
}

/** Hands the person and the session's verbs to Astro, and names the person to the trail. */
function handToAstro(req: Request, res: Response, next: NextFunction): void {
  const user = (req.user as Actor | undefined) ?? null;
  const locals: App.Locals = {
    user,
    ip: req.ip ?? '',
    signIn: signIn(req, res),
    signInAs: async (userId) => {
      const actor = await loadActor(userId, await sessionEpochOf(userId));
      if (actor) await logIn(req, actor, false);
    },
    signOut: signOut(req),
  };
  res.locals.astro = locals;
  renewSession(req);
  actAs({ actorId: user?.id ?? null, ip: req.ip ?? null }, () => next());
}

async function build(): Promise<Express> {
  await migrate();
  const env = getEnv();
  const app = express();
  app.disable('x-powered-by');
  app.use(
    helmet({
      contentSecurityPolicy: false,
      crossOriginResourcePolicy: { policy: 'same-origin' },
      // With no referrer at all browsers send `Origin: null` on form posts, which checkOrigin must refuse.
      referrerPolicy: { policy: 'same-origin' },
    }),
  );
  app.use(checkOrigin(trustedOrigins()));
  app.use(
    session({
      name: 'counterlag.sid',
      secret: env.SESSION_SECRET,
      resave: false,
      saveUninitialized: false,
      rolling: false,
      store: sessionStore(),
      cookie: { httpOnly: true, sameSite: 'lax', secure: 'auto', path: '/' },
    }),
  );
  setUpPassport();
  app.use(passport.session());
  app.use(handToAstro);
  app.post(
    '/sign-in',
    // Refused ones alone: a whole office may sign in from one address.
    rateLimit({
      windowMs: 15 * 60 * 1000,
      limit: 60,
      skipSuccessfulRequests: true,
      standardHeaders: 'draft-8',
      legacyHeaders: false,
    }),
  );
  app.post(
    '/reset',
    rateLimit({ windowMs: 15 * 60 * 1000, limit: 20, standardHeaders: 'draft-8', legacyHeaders: false }),
  );
  app.use(refuseNul);
  app.use(uploadRoutes());
  app.use(clientUploadRoutes());
  app.use(limitBody);
  app.use((error: unknown, _req: Request, res: Response, _next: NextFunction) => sendError(error, res));
  return app;
}
