import pino from 'pino';
import { getEnv } from './env';

let logger: pino.Logger | undefined;

/** The process's logger: one JSON line an event, secrets redacted. */
export function log(): pino.Logger {
  logger ??= pino({
    level: getEnv().LOG_LEVEL,
    redact: ['password', '*.password', 'req.headers.cookie', 'req.headers.authorization'],
  });
  return logger;
}
