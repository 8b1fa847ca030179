import { ServiceError, type FieldErrors } from './errors';

/** What a plain form did wrong: a sentence for the whole, and words by field. */
export interface FormFault {
  status: number;
  message: string;
  fields: FieldErrors;
}

/** Reads a plain form; files and unreadable bodies count as nothing. */
export async function readForm(request: Request): Promise<Record<string, string>> {
  const form = await request.formData().catch(() => new FormData());
  return Object.fromEntries([...form].filter((entry): entry is [string, string] => typeof entry[1] === 'string'));
}

/** Runs the work of a plain form; an error that a person may read becomes a fault to show, any other goes on. */
export async function attempt<Result>(
  work: () => Promise<Result>,
): Promise<{ result: Result; fault: null } | { result: null; fault: FormFault }> {
  try {
    return { result: await work(), fault: null };
  } catch (error) {
    if (!(error instanceof ServiceError) || error.status === 404) throw error;
    return { result: null, fault: { status: error.status, message: error.message, fields: error.fields ?? {} } };
  }
}
