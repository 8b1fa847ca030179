import { existsSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import express, { type NextFunction, type Request, type Response } from 'express';
import { getApp } from './app';
import { getEnv } from './env';
import { log } from './log';

type AstroHandler = (req: Request, res: Response, next: NextFunction, locals: unknown) => void;

/** The folder of client files: `client` beside the folder the bundle's entries lie in. */
function clientFolder(): string {
  let folder = path.dirname(fileURLToPath(import.meta.url));
  for (let up = 0; up < 5; up++) {
    if (existsSync(path.join(folder, 'entry.mjs'))) return path.join(folder, '..', 'client');
    folder = path.dirname(folder);
  }
  throw new Error('The built client files were not found. Run npm run build first.');
}

async function astroHandler(): Promise<AstroHandler> {
  const entry = path.join(clientFolder(), '..', 'server', 'entry.mjs');
  const module = (await import(/* @vite-ignore */ entry)) as { handler: AstroHandler };
  return module.handler;
}

/** What the reader of strangers' PDF may do: decode pictures, and reach nothing. A worker goes by the policy of its own file. */
const readerPolicy = "default-src 'none'; script-src 'wasm-unsafe-eval'";

function staticFiles(): express.Handler {
  const year = 365 * 24 * 60 * 60;
  return express.static(clientFolder(), {
    index: false,
    redirect: false,
    setHeaders: (res, file) => {
      const forever = file.includes(`${path.sep}_astro${path.sep}`);
      if (/[\\/]pdf\.worker[^\\/]*$/.test(file)) res.setHeader('Content-Security-Policy', readerPolicy);
      res.setHeader('Cache-Control', forever ? `public, max-age=${year}, immutable` : 'public, max-age=300');
    },
  });
}

/** Starts the server: static files, the Express layer, Astro, and Astro's own page for what nobody answers. */
export async function startServer(): Promise<Server> {
  const env = getEnv();
  const handler = await astroHandler();
  const root = express();
  root.disable('x-powered-by');
  root.set('trust proxy', env.TRUST_PROXY);
  root.use(staticFiles());
  root.use(await getApp());
  root.use((req, res, next) => handler(req, res, next, res.locals.astro));
  root.use((req, res, next) => {
    req.url = '/404';
    handler(req, res, next, res.locals.astro);
  });
  const server = createServer(root);
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(env.PORT, env.HOST, resolve);
  });
  log().info({ host: env.HOST, port: env.PORT }, 'listening');
  return server;
}

/** Ends open requests within five seconds, then cuts what is left. */
export function stopServer(server: Server): Promise<void> {
  return new Promise((resolve) => {
    server.close(() => resolve());
    server.closeIdleConnections();
    setTimeout(() => server.closeAllConnections(), 5000).unref();
  });
}
