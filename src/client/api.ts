/** An answer that is no success: its code, the sentence for the person, and the fields it concerns. */
export class ApiError extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly fields: Record<string, string[]> = {},
    readonly details: Record<string, unknown> = {},
  ) {
    super(message);
    this.name = 'ApiError';
  }
}

async function errorOf(response: Response): Promise<ApiError> {
  const body = (await response.json().catch(() => null)) as { error?: Record<string, unknown> } | null;
  const { code, message, fields, ...details } = body?.error ?? {};
  const text = typeof message === 'string' ? message : `The server answered ${response.status}. Try again in a minute.`;
  return new ApiError(
    response.status,
    String(code ?? 'unknown'),
    text,
    (fields ?? {}) as Record<string, string[]>,
    details,
  );
}

/**
 * Calls an endpoint of this application and reads its JSON.
 *
 * @throws {ApiError} for every answer that is no success, and where the server cannot be reached
 */
export async function call<Result>(method: string, path: string, body?: unknown): Promise<Result> {
  const headers: Record<string, string> = { accept: 'application/json' };
  if (body !== undefined) headers['content-type'] = 'application/json';
  const request = { method, headers, body: body === undefined ? undefined : JSON.stringify(body) };
  const response = await fetch(path, request as RequestInit).catch(() => {
    throw new ApiError(0, 'unreachable', 'The server cannot be reached. What you typed is still here; try again.');
  });
  if (!response.ok) throw await errorOf(response);
  return (response.status === 204 ? undefined : await response.json()) as Result;
}

/** Sends a file as it is and tells how much of it has gone. */
export function sendFile<Result>(
  path: string,
  file: File,
  onProgress: (share: number) => void,
  signal?: AbortSignal,
): Promise<Result> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    request.open('PUT', path);
    request.setRequestHeader('content-type', 'application/octet-stream');
    request.upload.onprogress = (event) => onProgress(event.total > 0 ? event.loaded / event.total : 0);
    request.onerror = () =>
      reject(new ApiError(0, 'unreachable', 'The server cannot be reached. Nothing was kept; try again.'));
    request.onabort = () => reject(new ApiError(0, 'stopped', 'Stopped. Nothing was kept.'));
    request.onload = () => {
      const response = new Response(request.responseText, { status: request.status });
      if (response.ok) resolve(JSON.parse(request.responseText) as Result);
      else errorOf(response).then(reject, reject);
    };
    signal?.addEventListener('abort', () => request.abort());
    request.send(file);
  });
}
