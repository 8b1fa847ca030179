import { existsSync } from 'node:fs';
import { z } from 'zod';

/** Values that stand in .env.example; a production server refuses to start with them. */
const exampleSecret = 'replace-this-secret-with-64-random-characters';

const schema = z.object({
  NODE_ENV: z.enum(['development', 'test', 'production']).default('development'),
  HOST: z.string().default('127.0.0.1'),
  PORT: z.coerce.number().int().min(0).max(65535).default(4321),
  APP_ORIGIN: z.url().default('http://127.0.0.1:4321'),
  APP_PUBLIC_HOST: z.string().optional(),
  DATA_DIR: z.string().min(1).default('db/data'),
  TARIFF_DIR: z.string().min(1).default('tariffs'),
  SESSION_SECRET: z.string().min(32),
  SMTP_HOST: z.string().default('127.0.0.1'),
  SMTP_PORT: z.coerce.number().int().min(1).max(65535).default(2525),
  SMTP_USER: z.string().optional(),
  SMTP_PASSWORD: z.string().optional(),
  MAIL_FROM: z.email().default('office@calder-vane.example'),
  TRUST_PROXY: z.coerce.number().int().min(0).max(5).default(0),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
});

export type Env = z.infer<typeof schema>;

let current: Env | undefined;

/**
 * Reads and checks the environment once; later calls return the same values.
 *
 * @throws {Error} naming every variable that is missing or wrong, never its value.
 */
export function getEnv(): Env {
  current ??= readEnv({ ...developmentDefaults(), ...process.env });
  return current;
}

/** Takes the values of a file `.env` in this folder, where there is one; what the environment says already wins. */
export function readEnvFile(): void {
  if (existsSync('.env')) process.loadEnvFile('.env');
}

/** Lays values under the environment before it is first read: the demo and the tests have no .env file. */
export function configureEnv(defaults: Record<string, string>): Env {
  const merged: Record<string, string | undefined> = { ...defaults, ...process.env };
  for (const [name, value] of Object.entries(merged)) if (value !== undefined) process.env[name] = value;
  process.env.UV_THREADPOOL_SIZE ??= '16';
  current = readEnv(merged);
  return current;
}

function developmentDefaults(): Record<string, string> {
  if (process.env.NODE_ENV === 'production') return {};
  return { SESSION_SECRET: 'development-only-secret-of-enough-length' };
}

function readEnv(values: Record<string, string | undefined>): Env {
  const parsed = schema.safeParse(values);
  if (!parsed.success) {
    const names = parsed.error.issues.map((issue) => `${issue.path.join('.')} (${issue.message})`);
    throw new Error(`The environment is not complete. Correct these variables (see .env.example): ${names.join('; ')}`);
  }
  if (parsed.data.NODE_ENV === 'production' && parsed.data.SESSION_SECRET === exampleSecret) {
    throw new Error('SESSION_SECRET still has the value of .env.example. Set one of your own.');
  }
  return parsed.data;
}
