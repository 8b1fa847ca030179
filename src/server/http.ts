import { randomUUID } from 'node:crypto';
import type { APIContext, APIRoute } from 'astro';
import { OptimisticLockError } from 'sequelize';
import { z } from 'zod';
import { invalid, ServiceError, unauthenticated, type FieldErrors } from './errors';
import { log } from './log';
import type { Actor } from './policies/actor';

/** A request whose sender is known. */
export type SignedIn = APIContext & { actor: Actor };

/** Wraps a handler of a signed-in person: the one place where errors become responses. */
export function endpoint(handler: (context: SignedIn) => Promise<Response>): APIRoute {
  return (context) =>
    respond(async () => {
      const actor = context.locals.user;
      if (!actor) throw unauthenticated();
      return handler(Object.assign(context, { actor }));
    });
}

async function respond(work: () => Promise<Response>): Promise<Response> {
  try {
    return await work();
  } catch (error) {
    return toErrorResponse(error);
  }
}

/** The one mapper of errors: known ones keep their words, anything else is logged with an id and becomes a plain 500. */
export function toErrorResponse(error: unknown): Response {
  const { status, body } = toErrorBody(error);
  return Response.json(body, { status });
}

/** Status and body of an error, for handlers outside Astro. */
export function toErrorBody(error: unknown): { status: number; body: { error: Record<string, unknown> } } {
  if (error instanceof ServiceError) {
    const { code, message, fields, details } = error;
    return { status: error.status, body: { error: { code, message, fields, ...details } } };
  }
  if (error instanceof OptimisticLockError) {
    const message = 'This was changed by somebody else in this moment. Load it again, then save.';
    return { status: 409, body: { error: { code: 'stale', message } } };
  }
  const id = randomUUID();
  log().error({ id, err: error }, 'unexpected error');
  const message = `Something failed on our side and was noted as ${id}. Nothing was saved. Try again, or tell us this number.`;
  return { status: 500, body: { error: { code: 'unexpected', message, id } } };
}

/**
 * Parses input at the edge.
 *
 * @throws {ServiceError} 422 with every issue by field
 */
export function parseOrThrow<Schema extends z.ZodType>(schema: Schema, input: unknown): z.output<Schema> {
  const parsed = schema.safeParse(input);
  if (parsed.success) return parsed.data;
  const fields: FieldErrors = {};
  for (const issue of parsed.error.issues) (fields[issue.path.join('.') || 'form'] ??= []).push(issue.message);
  throw invalid('Some entries cannot be used. Each is marked with what to change.', fields);
}

/** Refuses the NUL sign: no keyboard writes it, and a statement of the database ends at it. */
function refuseNul(_name: string, value: unknown): unknown {
  if (typeof value === 'string' && value.includes('\0')) {
    throw invalid('An entry holds a sign that is no text (NUL). Take it out and send the form again.');
  }
  return value;
}

/** Reads a JSON body; an unreadable one is the sender's error. */
export async function readJson(request: Request): Promise<unknown> {
  try {
    return JSON.parse(await request.text(), refuseNul) as unknown;
  } catch (error) {
    if (error instanceof ServiceError) throw error;
    throw invalid('The request could not be read as JSON. Send the form again.');
  }
}
