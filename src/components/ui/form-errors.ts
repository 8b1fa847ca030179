import type { FieldErrors, FieldValues, Resolver } from 'react-hook-form';
import type { z } from 'zod';

/** Lays messages by dotted path into the nested shape react-hook-form reads. */
export function nestErrors<Draft extends FieldValues>(messages: Record<string, string[]>): FieldErrors<Draft> {
  const errors: Record<string, unknown> = {};
  for (const [path, [message]] of Object.entries(messages)) {
    const names = path.split('.');
    let place = errors;
    for (const name of names.slice(0, -1)) place = (place[name] ??= {}) as Record<string, unknown>;
    const last = names.at(-1) ?? path;
    place[last] ??= { type: 'check', message };
  }
  return errors as FieldErrors<Draft>;
}

/** Resolver of a form whose fields are text: converts, then asks the schema the server uses too. */
export function draftResolver<Draft extends FieldValues>(
  schema: z.ZodType,
  toInput: (draft: Draft) => unknown,
): Resolver<Draft> {
  return (draft) => {
    const parsed = schema.safeParse(toInput(draft));
    if (parsed.success) return { values: draft, errors: {} };
    const messages: Record<string, string[]> = {};
    for (const issue of parsed.error.issues) (messages[issue.path.join('.')] ??= []).push(issue.message);
    return { values: {}, errors: nestErrors<Draft>(messages) };
  };
}

/** Message at a dotted path of the form's errors. */
export function messageAt(errors: object, path: string): string | undefined {
  let place: unknown = errors;
  for (const name of path.split('.')) place = (place as Record<string, unknown> | undefined)?.[name];
  const message = (place as { message?: unknown } | undefined)?.message;
  return typeof message === 'string' ? message : undefined;
}
