import type { APIContext, MiddlewareNext } from 'astro';
import { defineMiddleware } from 'astro:middleware';
import { ServiceError } from './server/errors';

/** Pages that need no account. Everything else asks for one; services then decide what the person may see. */
const openPaths = [/^\/sign-in$/, /^\/sign-out$/, /^\/reset(\/|$)/, /^\/invitation\//, /^\/404$/, /^\/500$/];

const contentPolicy = [
  "default-src 'self'",
  "img-src 'self' data: blob:",
  "font-src 'self'",
  "connect-src 'self'",
  // PDF is read in a worker that is a file of our own.
  "worker-src 'self'",
  "object-src 'none'",
  "base-uri 'self'",
  "form-action 'self'",
  "frame-ancestors 'none'",
  "style-src-attr 'unsafe-inline'",
].join('; ');

/**
 * Adds what Astro's own policy (hashes of scripts and styles) cannot say, and keeps pages of people out of caches. A
 * page that took the place of another comes by here twice and is left as it is the second time.
 */
function harden(response: Response): Response {
  const own = response.headers.get('content-security-policy') ?? '';
  const isPage = response.headers.get('content-type')?.startsWith('text/html') ?? false;
  // The development server puts styles and scripts into the page that no policy can know; the built one is held to it.
  if (!import.meta.env.DEV && isPage && !own.includes(contentPolicy)) {
    const policies = [own.replace(/;\s*$/, ''), contentPolicy].filter((policy) => policy !== '');
    response.headers.set('content-security-policy', policies.join('; '));
  }
  if (!response.headers.has('cache-control')) response.headers.set('cache-control', 'private, no-store');
  return response;
}

/** Pages let services throw: what a person may not know of or not open is the plain page of what does not exist. */
async function answer(context: APIContext, next: MiddlewareNext): Promise<Response> {
  try {
    return await next();
  } catch (error) {
    if (!(error instanceof ServiceError) || (error.status !== 404 && error.status !== 403)) throw error;
    const page = await context.rewrite('/404');
    return new Response(page.body, { status: error.status, headers: page.headers });
  }
}

/** Signed-out people are sent to sign in and come back; endpoints answer 401 themselves. */
export const onRequest = defineMiddleware(async (context, next) => {
  const { pathname, search } = context.url;
  const open = openPaths.some((path) => path.test(pathname)) || pathname.startsWith('/api/');
  if (!open && !context.locals.user) {
    const back = context.request.method === 'GET' ? `?next=${encodeURIComponent(pathname + search)}` : '';
    return harden(context.redirect(`/sign-in${back}`, 303));
  }
  return harden(await answer(context, next));
});
