import type { APIRoute } from 'astro';

/** Ends the session. Only by POST, so that no link or picture can do it. */
export const POST: APIRoute = async ({ locals, redirect }) => {
  await locals.signOut();
  return redirect('/sign-in?out', 303);
};
