import pino from 'pino';
import { getEnv } from './env';

let logger: pino.Logger | undefined;

/** What of an error is written. Its other properties stay out: an error of the database carries the row and its values. */
function writtenOf(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { message: String(error) };
  const { code, cause } = error as Error & { code?: unknown };
  return {
    type: error.name,
    message: error.message,
    stack: error.stack,
    ...(typeof code === 'string' || typeof code === 'number' ? { code } : {}),
    ...(cause === undefined ? {} : { cause: writtenOf(cause) }),
  };
}

/** How the process's logger writes: secrets and what people entered are left out. */
export const logOptions = {
  redact: ['password', '*.password', 'req.headers.cookie', 'req.headers.authorization'],
  serializers: { err: writtenOf },
} satisfies pino.LoggerOptions;

/** The process's logger: one JSON line an event. */
export function log(): pino.Logger {
  logger ??= pino({ level: getEnv().LOG_LEVEL, ...logOptions });
  return logger;
}
